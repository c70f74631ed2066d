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
  options: IterationOptions & Hooks = {},
): Solution {
  const tolerance = options.tolerance ?? iterationDefaults.tolerance;
  const limit = options.maxIterations ?? iterationDefaults.maxIterations;
  const n = b.length;
  const x = options.from ?? b.slice();
  if (!options.from) precondition(x);
  const r = new Float64Array(n);
  const q = new Float64Array(n);
  let residual = backwardError(a, x, b, r);
  let iterations = 0;
  let lowest = residual;
  // Restarted from the true residual: once, and again whenever the recurrence claims an end it has not reached.
  while (!(residual <= tolerance) && iterations < limit) {
    const z = r.slice();
    precondition(z);
    const p = z.slice();
    let rz = dot(r, z);
    const goal = rz * (tolerance / Math.max(residual, tolerance)) ** 2;
    while (rz > goal && iterations < limit) {
      stopIfAsked(options);
      applyOperator(a, p, q);
      const step = rz / dot(p, q);
      if (!Number.isFinite(step)) return { converged: false, residual, iterations };
      for (let i = 0; i < n; i++) {
        x[i] += step * p[i];
        r[i] -= step * q[i];
      }
      iterations++;
      z.set(r);
      precondition(z);
      const next = dot(r, z);
      const beta = next / rz;
      for (let i = 0; i < n; i++) p[i] = z[i] + beta * p[i];
      rz = next;
    }
    residual = backwardError(a, x, b, r);
    if (!(residual < 0.5 * lowest)) break;
    lowest = residual;
  }
  return residual <= tolerance
    ? { converged: true, x, residual, iterations }
    : { converged: false, residual, iterations };
}
