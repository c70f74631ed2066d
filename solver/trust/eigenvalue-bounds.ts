import type { Hooks } from '../../mesher/index.ts';
import { csrOfPairs } from '../linear/csr.ts';
import { dissect } from '../linear/dissection.ts';
import { solveWithFactor } from '../linear/factor-solve.ts';
import { planFronts } from '../linear/fronts.ts';
import { dot } from '../linear/iteration.ts';
import { applyOperator } from '../linear/residual.ts';
import { stopIfAsked } from '../linear/stopping.ts';
import { type ConsistentSystem, solveGalerkin } from './consistent-system.ts';
import { type CrouzeixRaviart, crouzeixRaviart } from './crouzeix-raviart.ts';
import { definiteFactor } from './definite-factor.ts';
import { coefficientSource } from './element-sources.ts';

/** Smallest eigenvalue λ₁ of −L from both sides, 1/time. */
export interface RateBounds {
  readonly low: number;
  readonly high: number;
}

/**
 * Bounds of λ₁: above by the Rayleigh quotient of a P1 field with the consistent mass, below from Crouzeix–Raviart
 * elements with every coefficient replaced by its least (m̂: largest) value in each triangle.
 *
 * @throws {SolverError} NOT_CONVERGED, MEMORY_LIMIT, SOLVING_STOPPED
 * Source: Carstensen & Gedicke 2014; METHODS 6.
 */
export function rateBounds(base: ConsistentSystem, hooks: Hooks = {}): RateBounds {
  const { quotient, field } = rayleigh(base, hooks);
  const below = crouzeixRaviart(base);
  return { low: lowerBound(below, field, quotient, hooks), high: quotient };
}

/** Inverse iteration until the quotient settles; every one of its values is an upper bound. */
function rayleigh(
  base: ConsistentSystem,
  hooks: Hooks,
): { readonly quotient: number; readonly field: Float64Array } {
  const { system, geometry, coefficients, operator } = base;
  const { nodeOf, freeOf, mesh } = system;
  const field = new Float64Array(freeOf.length).fill(1);
  let x = new Float64Array(system.size).fill(1);
  const y = new Float64Array(system.size);
  let quotient = Number.POSITIVE_INFINITY;
  for (let round = 0; round < 40; round++) {
    stopIfAsked(hooks);
    for (let i = 0; i < freeOf.length; i++) field[i] = freeOf[i] < 0 ? 0 : x[freeOf[i]];
    const { load } = coefficientSource(mesh, geometry, coefficients, coefficients.mass, field);
    const rhs = new Float64Array(freeOf.length);
    for (let q = 0; q < load.length; q++) rhs[mesh.triangles[q]] += load[q];
    const massTimesX = Float64Array.from(nodeOf, (node) => rhs[node]);
    applyOperator(operator, x, y);
    const before = quotient;
    const norm = dot(massTimesX, x);
    quotient = dot(x, y) / norm;
    if (!(quotient < before * (1 - 1e-7))) return { quotient: Math.min(quotient, before), field };
    x = Float64Array.from(
      solveGalerkin(
        base,
        massTimesX.map((v) => v / Math.sqrt(norm)),
        hooks,
      ),
    );
  }
  return { quotient, field };
}

/** A diagonal is stored about this often while it is eliminated. */
const stores = 16;

/** Left between the Crouzeix–Raviart eigenvalue and the shift that is shown to lie below it, relative. */
const gap = 1e-6;

function lowerBound(cr: CrouzeixRaviart, field: Float64Array, above: number, hooks: Hooks): number {
  const off = csrOfPairs(cr.size, cr.first, cr.second, cr.value, cr.value, hooks);
  const fronts = planFronts(off, dissect(off, cr.middle, hooks), hooks);
  const shifted = (shift: number) =>
    definiteFactor(
      fronts,
      off,
      cr.diagonal.map((d, i) => d - shift * cr.mass[i]),
      hooks,
    );
  let shift = above * 0.5;
  let factor = shifted(shift);
  for (let tries = 0; !factor && tries < 60; tries++) {
    shift /= 2;
    factor = shifted(shift);
  }
  if (!factor) return 0;
  let proven = shift;
  let x = cr.interpolate(field);
  let estimate = Number.POSITIVE_INFINITY;
  for (let round = 0; round < 60; round++) {
    stopIfAsked(hooks);
    const rhs = x.map((v, i) => v * cr.mass[i]);
    const before = dot(x, rhs);
    x = rhs.slice();
    solveWithFactor(factor, x, 1, false, hooks);
    const now = shift + before / dot(x, rhs);
    const scale = 1 / Math.sqrt(x.reduce((sum, v, i) => sum + v * v * cr.mass[i], 0));
    for (let i = 0; i < x.length; i++) x[i] *= scale;
    const settled = Math.abs(now - estimate) < 0.01 * gap * now;
    estimate = now;
    if (settled) break;
  }
  // One factorization just below shows that no eigenvalue was missed.
  for (let back = gap; back < 0.5; back *= 10) {
    const candidate = estimate * (1 - back);
    if (candidate <= proven) break;
    if (!shifted(candidate)) continue;
    proven = candidate;
    break;
  }
  // Rounding of each stored diagonal acts like a false sink (METHODS 1) and may make a matrix definite that is not.
  const stored = x.reduce((sum, v, i) => sum + v * v * cr.diagonal[i], 0);
  const sinks = (stores * 2 ** -53 * stored) / estimate;
  return sinks < 0.1 ? cr.lowerBound(proven * (1 - sinks)) : 0;
}
