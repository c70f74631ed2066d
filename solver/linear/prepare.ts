import type { Hooks } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import type { System } from '../operator/system.ts';
import { conjugateGradients, type IterationOptions, type Solution } from './conjugate-gradients.ts';
import { dissect } from './dissection.ts';
import { planFronts } from './fronts.ts';
import { factorSymmetric, solveSymmetric } from './multifrontal.ts';
import { stopIfAsked } from './stopping.ts';

/** A system with its factor, ready for any number of right-hand sides. */
export interface Prepared {
  readonly system: System;
  /** A x = rhs, one entry per free node; a statement of failure instead of a half-true field. */
  readonly solve: (rhs: Float64Array, options?: IterationOptions & Hooks) => Solution;
  /** Bytes held by the factor. */
  readonly bytes: number;
}

const prepared = new WeakMap<System, Prepared>();

/**
 * Orders and factors a system once; later calls with the same system get the same factor.
 *
 * @throws {SolverError} SOLVING_STOPPED
 */
export function prepare(system: System, hooks: Hooks = {}): Prepared {
  const known = prepared.get(system);
  if (known) return known;
  const made = prepareAnew(system, hooks);
  prepared.set(system, made);
  return made;
}

function prepareAnew(system: System, hooks: Hooks): Prepared {
  const { nodes } = system.mesh;
  const xy = new Float64Array(2 * system.size);
  for (let i = 0; i < system.size; i++) {
    xy[2 * i] = nodes[2 * system.nodeOf[i]];
    xy[2 * i + 1] = nodes[2 * system.nodeOf[i] + 1];
  }
  const fronts = planFronts(system.rates, dissect(system.rates, xy));
  stopIfAsked(hooks);
  const factor = factorSymmetric(fronts, system.rates, system.slack, hooks);
  const precondition = (y: Float64Array): void => solveSymmetric(factor, y);
  return {
    system,
    solve: (rhs, options = hooks) => conjugateGradients(system, rhs, precondition, options),
    bytes: factor.lower.byteLength + factor.inversePivot.byteLength,
  };
}

/**
 * The solution of A x = rhs.
 *
 * @throws {SolverError} NOT_CONVERGED with the residual reached, SOLVING_STOPPED
 */
export function solveOrThrow(system: System, rhs: Float64Array, hooks: Hooks = {}): Float64Array {
  const solution = prepare(system, hooks).solve(rhs, hooks);
  if (solution.converged) return solution.x;
  throw new SolverError(
    'NOT_CONVERGED',
    `The linear solve stopped at a relative residual of ${solution.residual.toExponential(1)} after ${solution.iterations} steps`,
    {},
    'Refine the mesh where coefficients change fast, or bring the coefficients nearer to each other.',
  );
}
