import { Matrix, QrDecomposition } from 'ml-matrix';
import type { Hooks } from '../../mesher/index.ts';
import { dot, type IterationOptions, iterationDefaults, type Solution } from './iteration.ts';
import { applyOperator, backwardError, type LinearOperator } from './residual.ts';
import { stopIfAsked } from './stopping.ts';

const cycleLength = 20;

/**
 * GMRES from x₀ = P⁻¹b, preconditioned from the right, restarted every few steps from the true residual. A factor as
 * preconditioner usually ends it before the first step.
 *
 * @param precondition y ↦ P⁻¹y in place
 * @throws {SolverError} SOLVING_STOPPED
 * Source: Saad & Schultz 1986; stop rule METHODS 5.
 */
export function gmres(
  a: LinearOperator,
  b: Float64Array,
  precondition: (y: Float64Array) => void,
  options: IterationOptions & Hooks = {},
): Solution {
  const tolerance = options.tolerance ?? iterationDefaults.tolerance;
  const limit = options.maxIterations ?? iterationDefaults.maxIterations;
  const x = options.from ?? b.slice();
  if (!options.from) precondition(x);
  const r = new Float64Array(b.length);
  let residual = backwardError(a, x, b, r);
  let iterations = 0;
  let lowest = residual;
  while (!(residual <= tolerance) && Number.isFinite(residual) && iterations < limit) {
    const steps = Math.min(cycleLength, limit - iterations);
    iterations += cycle(a, x, r, precondition, steps, tolerance / residual / 4, options);
    residual = backwardError(a, x, b, r);
    if (!(residual < 0.5 * lowest)) break;
    lowest = residual;
  }
  return residual <= tolerance
    ? { converged: true, x, residual, iterations }
    : { converged: false, residual, iterations };
}

/** Up to `steps` Arnoldi steps on the residual r; adds the best correction to x. Returns the steps taken. */
function cycle(
  a: LinearOperator,
  x: Float64Array,
  r: Float64Array,
  precondition: (y: Float64Array) => void,
  steps: number,
  reduction: number,
  hooks: Hooks,
): number {
  const beta = Math.sqrt(dot(r, r));
  const basis = [r.map((v) => v / beta)];
  const directions: Float64Array[] = [];
  const h = Matrix.zeros(steps + 1, steps);
  let weights: Matrix | undefined;
  for (let j = 0; j < steps; j++) {
    stopIfAsked(hooks);
    const z = basis[j].slice();
    precondition(z);
    directions.push(z);
    const w = new Float64Array(x.length);
    applyOperator(a, z, w);
    for (let i = 0; i <= j; i++) {
      const c = dot(w, basis[i]);
      h.set(i, j, c);
      for (let q = 0; q < w.length; q++) w[q] -= c * basis[i][q];
    }
    const norm = Math.sqrt(dot(w, w));
    h.set(j + 1, j, norm);
    const small = h.subMatrix(0, j + 1, 0, j);
    const right = Matrix.zeros(j + 2, 1);
    right.set(0, 0, beta);
    weights = new QrDecomposition(small).solve(right);
    const left = Matrix.sub(right, small.mmul(weights)).norm();
    if (!(left > reduction * beta) || norm === 0) break;
    basis.push(w.map((v) => v / norm));
  }
  if (!weights) return 0;
  for (let j = 0; j < weights.rows; j++) {
    const c = weights.get(j, 0);
    for (let q = 0; q < x.length; q++) x[q] += c * directions[j][q];
  }
  return weights.rows;
}
