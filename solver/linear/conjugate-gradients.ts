import type { Hooks } from '../../mesher/index.ts';
import { dot, type IterationOptions, iterationDefaults, type Solution } from './iteration.ts';
import { applyOperator, backwardError, type LinearOperator } from './residual.ts';
import { stopIfAsked } from './stopping.ts';

/**
 * Conjugate gradients from x₀ = P⁻¹b. The true residual is computed before answering; a factor as preconditioner
 * usually ends it before the first step.
 *
 * @param precondition y ↦ P⁻¹y in place, P symmetric positive definite
 * @throws {SolverError} SOLVING_STOPPED
 * Source: Hestenes & Stiefel 1952; stop rule METHODS 5.
 */
export function conjugateGradients(
  a: LinearOperator,
  b: Float64Array,
  precondition: (y: Float64Array) => void,
  options: IterationOptions & Hooks & EnergyOption = {},
): Solution {
  const tolerance = options.tolerance ?? iterationDefaults.tolerance;
  const limit = options.maxIterations ?? iterationDefaults.maxIterations;
  const x = options.from ?? b.slice();
  if (!options.from) precondition(x);
  const r = new Float64Array(b.length);
  const z = new Float64Array(b.length);
  /** Error ÷ what is allowed; leaves b − A x in r. */
  const measure = (): number => {
    residual = backwardError(a, x, b, r);
    if (options.energyTolerance === undefined) return residual / tolerance;
    z.set(r);
    precondition(z);
    const energy = Math.sqrt(Math.abs(dot(r, z) / dot(x, b))) || 0;
    return Math.max(residual / tolerance, energy / options.energyTolerance);
  };
  let residual = 0;
  let error = measure();
  let iterations = 0;
  // Restarted from the true residual whenever the recurrence claims an end it has not reached.
  while (!(error <= 1) && iterations < limit) {
    const before = error;
    iterations += descend(a, x, r, z, precondition, Math.min(1, 1 / error), limit - iterations, options);
    error = measure();
    if (!(error < 0.5 * before)) break;
  }
  return error <= 1
    ? { converged: true, x, residual, iterations }
    : { converged: false, residual, iterations };
}

/** For a preconditioner that is not exact: error in the energy norm, relative, as r·P⁻¹r ÷ x·b shows it. */
export interface EnergyOption {
  readonly energyTolerance?: number;
}

/** Steps until r·P⁻¹r has fallen by `reduction` squared; updates x and r, returns their number. */
function descend(
  a: LinearOperator,
  x: Float64Array,
  r: Float64Array,
  z: Float64Array,
  precondition: (y: Float64Array) => void,
  reduction: number,
  most: number,
  hooks: Hooks,
): number {
  const n = x.length;
  const q = new Float64Array(n);
  z.set(r);
  precondition(z);
  const p = z.slice();
  let rz = dot(r, z);
  const goal = rz * reduction * reduction;
  let steps = 0;
  while (rz > goal && steps < most) {
    stopIfAsked(hooks);
    applyOperator(a, p, q);
    const step = rz / dot(p, q);
    if (!Number.isFinite(step)) break;
    for (let i = 0; i < n; i++) {
      x[i] += step * p[i];
      r[i] -= step * q[i];
    }
    steps++;
    z.set(r);
    precondition(z);
    const next = dot(r, z);
    const beta = next / rz;
    for (let i = 0; i < n; i++) p[i] = z[i] + beta * p[i];
    rz = next;
  }
  return steps;
}
