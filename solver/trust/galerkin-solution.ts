import type { Hooks } from '../../mesher/index.ts';
import { pollMask, stopIfAsked } from '../linear/stopping.ts';
import { edgePoints, edgeWeights, trianglePoints, triangleWeights } from '../operator/quadrature.ts';
import { type ConsistentSystem, solveGalerkin } from './consistent-system.ts';
import { pointCount } from './element-coefficients.ts';
import type { ElementSource } from './element-sources.ts';
import { equilibratedFlux } from './equilibrated-flux.ts';
import { perExchange } from './wall-sides.ts';

/** A linear problem a(u, v) = ∫fv + ∫κ̂ g v with u given on absorbing walls. */
export interface GalerkinProblem {
  readonly source: ElementSource;
  /** Value on absorbing nodes, one entry per mesh node (others unused); 0 without it. */
  readonly wallValues?: Float64Array;
  /** g of every exchanging wall; 0 without it. */
  readonly exchangeValues?: Float64Array;
}

/**
 * u_h, and r = (σ − k̂∇u_h, what the walls' conditions lack): the error u − u_h is the projection of r (plus what
 * `oscillation` bounds) onto the energy space, so ‖u − u_h‖ ≤ ‖r‖.
 */
export interface GalerkinSolution {
  readonly source: ElementSource;
  /** One entry per mesh node. */
  readonly field: Float64Array;
  /** ∫fφ_i + ∫κ̂gφ_i − a(u_h, φ_i) per mesh node: rounding at free nodes, the reaction at absorbing ones. */
  readonly residual: Float64Array;
  /** σ = centre + turn·(x − centroid) per triangle, less k̂∇u_h: entries centreX, centreY, turn, ∂xu_h, ∂yu_h. */
  readonly parts: Float64Array;
  /** Norm of r over each triangle, ‖k̂^−½(σ − k̂∇u_h)‖. */
  readonly norm: Float64Array;
  /** Per triangle a bound of what f − ĉu_h − its mean, and what was left over, add to the error; absent where nothing. */
  readonly oscillation: Float64Array | undefined;
  /** What exchanging walls lack at their Gauss points, {@link perExchange} entries each. */
  readonly wallGap: Float64Array;
}

/**
 * Solves and equilibrates.
 *
 * @throws {SolverError} NOT_CONVERGED, MEMORY_LIMIT, SOLVING_STOPPED
 * Source: METHODS 6.
 */
export function galerkinSolution(
  base: ConsistentSystem,
  problem: GalerkinProblem,
  hooks: Hooks = {},
): GalerkinSolution {
  const { system } = base;
  const field = new Float64Array(system.freeOf.length);
  const { wallValues } = problem;
  if (wallValues) for (let i = 0; i < field.length; i++) if (system.freeOf[i] < 0) field[i] = wallValues[i];
  const rhs = nodalResidual(base, elementResidual(base, problem, field, hooks), wanted(base, problem, field));
  const free = solveGalerkin(
    base,
    Float64Array.from(system.nodeOf, (node) => rhs[node]),
    hooks,
  );
  for (let i = 0; i < free.length; i++) field[system.nodeOf[i]] = free[i];
  stopIfAsked(hooks);
  return gapOf(base, problem, field, hooks);
}

function gapOf(
  base: ConsistentSystem,
  problem: GalerkinProblem,
  field: Float64Array,
  hooks: Hooks,
): GalerkinSolution {
  const { geometry, sides } = base;
  const residual = elementResidual(base, problem, field, hooks);
  const outward = wanted(base, problem, field);
  const gradients = fluxGradients(base, field);
  const { flux, leftOver } = equilibratedFlux(base, gradients, residual, wallLoads(base, outward));
  stopIfAsked(hooks);
  const parts = new Float64Array(5 * geometry.count);
  describeParts(base, field, flux, parts);
  const wallGap = outward.slice();
  for (let w = 0; w < sides.exchanges.count; w++) {
    const density = flux[sides.exchanges.side[w]] / sides.exchanges.length[w];
    for (let q = perExchange * w; q < perExchange * (w + 1); q++) wallGap[q] -= density;
  }
  const norm = new Float64Array(geometry.count);
  elementProducts(base, parts, parts, norm);
  for (let t = 0; t < norm.length; t++) norm[t] = Math.sqrt(norm[t]);
  return {
    ...{ source: problem.source, field, parts, norm, wallGap },
    residual: nodalResidual(base, residual, outward),
    oscillation: oscillationOf(base, problem, field, leftOver),
  };
}

/** ∫_T (f − ĉu)φ − k̂∇u·∇φ, 3 per triangle. */
function elementResidual(
  { geometry, coefficients, system }: ConsistentSystem,
  { source }: GalerkinProblem,
  u: Float64Array,
  hooks: Hooks,
): Float64Array {
  const { triangles } = system.mesh;
  const { area, gradX, gradY, count } = geometry;
  const { loss, per, step, meanXx, meanXy, meanYy } = coefficients;
  const residual = source.load.slice();
  for (let t = 0; t < count; t++) {
    if ((t & pollMask) === 0) stopIfAsked(hooks);
    const q = 3 * t;
    const ua = u[triangles[q]];
    const ub = u[triangles[q + 1]];
    const uc = u[triangles[q + 2]];
    const gx = (ub - ua) * gradX[q + 1] + (uc - ua) * gradX[q + 2];
    const gy = (ub - ua) * gradY[q + 1] + (uc - ua) * gradY[q + 2];
    const fx = area[t] * (meanXx[t] * gx + meanXy[t] * gy);
    const fy = area[t] * (meanXy[t] * gx + meanYy[t] * gy);
    for (let p = q; p < q + 3; p++) residual[p] -= fx * gradX[p] + fy * gradY[p];
    if (!loss) continue;
    for (let g = 0; g < pointCount; g++) {
      const a = trianglePoints[3 * g];
      const b = trianglePoints[3 * g + 1];
      const c = trianglePoints[3 * g + 2];
      const lost = area[t] * triangleWeights[g] * loss[t * per + g * step] * (a * ua + b * ub + c * uc);
      residual[q] -= a * lost;
      residual[q + 1] -= b * lost;
      residual[q + 2] -= c * lost;
    }
  }
  return residual;
}

/** The outward flux density that exchanging walls ask for at their points: −κ̂(u − g), or P̂(u₂ − u₁). */
function wanted(
  { sides }: ConsistentSystem,
  { exchangeValues }: GalerkinProblem,
  u: Float64Array,
): Float64Array {
  const { count, first, second, firstBehind, secondBehind, rate } = sides.exchanges;
  const outward = new Float64Array(perExchange * count);
  for (let w = 0; w < count; w++) {
    const through = firstBehind[w] >= 0;
    const beyond = exchangeValues ? exchangeValues[w] : 0;
    const from = (through ? u[firstBehind[w]] : beyond) - u[first[w]];
    const to = (through ? u[secondBehind[w]] : beyond) - u[second[w]];
    for (let g = 0; g < perExchange; g++) {
      const s = edgePoints[g];
      outward[perExchange * w + g] = rate[perExchange * w + g] * ((1 - s) * from + s * to);
    }
  }
  return outward;
}

/** ∫ outward φ of first and second end, 2 per exchanging wall. */
function wallLoads({ sides }: ConsistentSystem, outward: Float64Array): Float64Array {
  const { count, length } = sides.exchanges;
  const loads = new Float64Array(2 * count);
  for (let w = 0; w < count; w++) {
    for (let g = 0; g < perExchange; g++) {
      const share = length[w] * edgeWeights[g] * outward[perExchange * w + g];
      loads[2 * w] += (1 - edgePoints[g]) * share;
      loads[2 * w + 1] += edgePoints[g] * share;
    }
  }
  return loads;
}

/** Sums over elements and walls. */
function nodalResidual(base: ConsistentSystem, element: Float64Array, outward: Float64Array): Float64Array {
  const { triangles, nodes } = base.system.mesh;
  const { count, first, second, firstBehind, secondBehind } = base.sides.exchanges;
  const sum = new Float64Array(nodes.length / 2);
  for (let q = 0; q < triangles.length; q++) sum[triangles[q]] += element[q];
  const loads = wallLoads(base, outward);
  for (let w = 0; w < count; w++) {
    sum[first[w]] += loads[2 * w];
    sum[second[w]] += loads[2 * w + 1];
    if (firstBehind[w] < 0) continue;
    sum[firstBehind[w]] -= loads[2 * w];
    sum[secondBehind[w]] -= loads[2 * w + 1];
  }
  return sum;
}

/** Mean of k̂ times ∇u per triangle. */
function fluxGradients({ geometry, coefficients, system }: ConsistentSystem, u: Float64Array): Float64Array {
  const { triangles } = system.mesh;
  const { gradX, gradY, count } = geometry;
  const { meanXx, meanXy, meanYy } = coefficients;
  const flux = new Float64Array(2 * count);
  for (let t = 0; t < count; t++) {
    const q = 3 * t;
    const ub = u[triangles[q + 1]] - u[triangles[q]];
    const uc = u[triangles[q + 2]] - u[triangles[q]];
    const gx = ub * gradX[q + 1] + uc * gradX[q + 2];
    const gy = ub * gradY[q + 1] + uc * gradY[q + 2];
    flux[2 * t] = meanXx[t] * gx + meanXy[t] * gy;
    flux[2 * t + 1] = meanXy[t] * gx + meanYy[t] * gy;
  }
  return flux;
}

function describeParts(
  { geometry, system }: ConsistentSystem,
  u: Float64Array,
  flux: Float64Array,
  parts: Float64Array,
): void {
  const { triangles } = system.mesh;
  const { area, gradX, gradY, offX, offY, count } = geometry;
  for (let t = 0; t < count; t++) {
    let sx = 0;
    let sy = 0;
    let sum = 0;
    for (let q = 3 * t; q < 3 * t + 3; q++) {
      sx -= flux[q] * offX[q];
      sy -= flux[q] * offY[q];
      sum += flux[q];
    }
    const q = 3 * t;
    const ub = u[triangles[q + 1]] - u[triangles[q]];
    const uc = u[triangles[q + 2]] - u[triangles[q]];
    parts[5 * t] = sx / (2 * area[t]);
    parts[5 * t + 1] = sy / (2 * area[t]);
    parts[5 * t + 2] = sum / (2 * area[t]);
    parts[5 * t + 3] = ub * gradX[q + 1] + uc * gradX[q + 2];
    parts[5 * t + 4] = ub * gradY[q + 1] + uc * gradY[q + 2];
  }
}

/** products ← ∫_T k̂⁻¹(σ₁ − k̂∇u₁)·(σ₂ − k̂∇u₂) per triangle, from the parts of two solutions. */
export function elementProducts(
  { geometry, coefficients, hooks }: ConsistentSystem,
  one: Float64Array,
  two: Float64Array,
  products: Float64Array,
): void {
  const { area, offX, offY, count } = geometry;
  const { per, step, xx, xy, yy } = coefficients;
  for (let t = 0; t < count; t++) {
    if ((t & pollMask) === 0) stopIfAsked(hooks);
    const q = 3 * t;
    const p = 5 * t;
    let sum = 0;
    for (let g = 0; g < pointCount; g++) {
      const a = trianglePoints[3 * g];
      const b = trianglePoints[3 * g + 1];
      const c = trianglePoints[3 * g + 2];
      const x = a * offX[q] + b * offX[q + 1] + c * offX[q + 2];
      const y = a * offY[q] + b * offY[q + 1] + c * offY[q + 2];
      const at = t * per + g * step;
      const kx = xx[at];
      const ky = yy[at];
      const kxy = xy ? xy[at] : 0;
      const r1x = one[p] + one[p + 2] * x - kx * one[p + 3] - kxy * one[p + 4];
      const r1y = one[p + 1] + one[p + 2] * y - kxy * one[p + 3] - ky * one[p + 4];
      const r2x = two[p] + two[p + 2] * x - kx * two[p + 3] - kxy * two[p + 4];
      const r2y = two[p + 1] + two[p + 2] * y - kxy * two[p + 3] - ky * two[p + 4];
      sum +=
        (triangleWeights[g] * (ky * r1x * r2x - kxy * (r1x * r2y + r1y * r2x) + kx * r1y * r2y)) /
        (kx * ky - kxy * kxy);
    }
    products[t] = area[t] * sum;
  }
}

/** ∫ gap₁ gap₂ ÷ rate over the exchanging walls. */
export function wallProduct({ sides }: ConsistentSystem, one: Float64Array, two: Float64Array): number {
  const { count, length, rate } = sides.exchanges;
  let sum = 0;
  for (let w = 0; w < count; w++) {
    for (let g = 0; g < perExchange; g++) {
      const q = perExchange * w + g;
      sum += (length[w] * edgeWeights[g] * one[q] * two[q]) / rate[q];
    }
  }
  return sum;
}

/**
 * Bounds by triangle of |∫(f − ĉu_h − its mean)v| ÷ ‖v‖: h/(π√min k̂) times the norm (Payne & Weinberger 1960), or
 * 1/√min ĉ times it where that is less; and of what the tree left in a triangle with loss.
 */
function oscillationOf(
  { geometry, coefficients, system }: ConsistentSystem,
  { source }: GalerkinProblem,
  u: Float64Array,
  leftOver: Float64Array,
): Float64Array | undefined {
  const { area, diameter, count } = geometry;
  const { loss, per, step, leastK, leastLoss } = coefficients;
  if (!loss && !source.oscillation) return undefined;
  const { triangles } = system.mesh;
  const bound = new Float64Array(count);
  const at = new Float64Array(pointCount);
  for (let t = 0; t < count; t++) {
    let norm = source.oscillation ? source.oscillation[t] : 0;
    const least = leastLoss ? leastLoss[t] : 0;
    if (loss) {
      let mean = 0;
      for (let g = 0; g < pointCount; g++) {
        const value =
          trianglePoints[3 * g] * u[triangles[3 * t]] +
          trianglePoints[3 * g + 1] * u[triangles[3 * t + 1]] +
          trianglePoints[3 * g + 2] * u[triangles[3 * t + 2]];
        at[g] = loss[t * per + g * step] * value;
        mean += triangleWeights[g] * at[g];
      }
      let square = 0;
      for (let g = 0; g < pointCount; g++) square += triangleWeights[g] * (at[g] - mean) ** 2;
      norm += Math.sqrt(square * area[t]);
    }
    const byLoss = least > 0 ? 1 / Math.sqrt(least) : Number.POSITIVE_INFINITY;
    bound[t] = norm * Math.min(diameter[t] / (Math.PI * Math.sqrt(leastK[t])), byLoss);
    if (leftOver[t] !== 0) bound[t] += (Math.abs(leftOver[t]) / Math.sqrt(area[t])) * byLoss;
  }
  return bound;
}

/** The same solution for a times the right-hand side. */
export function scaledSolution(solution: GalerkinSolution, a: number): GalerkinSolution {
  const times = (values: Float64Array): Float64Array => values.map((value) => a * value);
  const absolute = (values: Float64Array | undefined): Float64Array | undefined =>
    values?.map((value) => Math.abs(a) * value);
  const { source } = solution;
  const oscillation = absolute(source.oscillation);
  return {
    source: { load: times(source.load), ...(oscillation ? { oscillation } : {}) },
    ...{ field: times(solution.field), residual: times(solution.residual), wallGap: times(solution.wallGap) },
    ...{ norm: solution.norm.map((v) => Math.abs(a) * v), oscillation: absolute(solution.oscillation) },
    parts: times(solution.parts),
  };
}

/** The solution for a times one right-hand side plus b times another. */
export function combinedSolution(
  base: ConsistentSystem,
  a: number,
  one: GalerkinSolution,
  b: number,
  two: GalerkinSolution,
): GalerkinSolution {
  if (a === 0) return scaledSolution(two, b);
  const sum = (p: Float64Array, q: Float64Array): Float64Array => p.map((value, i) => a * value + b * q[i]);
  const atMost = (p: Float64Array | undefined, q: Float64Array | undefined): Float64Array | undefined => {
    if (!p) return q?.map((value) => Math.abs(b) * value);
    return p.map((value, i) => Math.abs(a) * value + Math.abs(b) * (q ? q[i] : 0));
  };
  const parts = sum(one.parts, two.parts);
  const norm = new Float64Array(one.norm.length);
  elementProducts(base, parts, parts, norm);
  for (let t = 0; t < norm.length; t++) norm[t] = Math.sqrt(norm[t]);
  const oscillation = atMost(one.source.oscillation, two.source.oscillation);
  return {
    source: { load: sum(one.source.load, two.source.load), ...(oscillation ? { oscillation } : {}) },
    ...{ field: sum(one.field, two.field), residual: sum(one.residual, two.residual), parts, norm },
    wallGap: sum(one.wallGap, two.wallGap),
    oscillation: atMost(one.oscillation, two.oscillation),
  };
}
