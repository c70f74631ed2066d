import type { Point } from '../mesher/index.ts';

/** Every code a {@link SolverError} can carry. README.md lists each with its remedy; a test compares the lists. */
export type SolverCode =
  | 'DIFFUSION_NOT_POSITIVE'
  | 'DEPTH_NOT_POSITIVE'
  | 'DRIFT_NOT_FINITE'
  | 'LOSS_NEGATIVE'
  | 'FLOOR_WITHOUT_DEPTH'
  | 'TENSOR_CONVENTION'
  | 'WALL_COEFFICIENT_NOT_POSITIVE'
  | 'WALL_NOT_DESCRIBED'
  | 'WALL_NOT_INNER'
  | 'NO_WAY_OUT'
  | 'START_OUTSIDE'
  | 'START_ON_ABSORBING_WALL'
  | 'EXIT_TOO_RARE'
  | 'MEMORY_LIMIT'
  | 'NOT_CONVERGED'
  | 'WALK_NOT_AVAILABLE'
  | 'WALK_TOO_LONG'
  | 'SOLVING_STOPPED';

/** Where a problem is at fault. Kernels know numbers; `src/run` turns them into names of the drawing. */
export interface SolverWhere {
  readonly at?: readonly Point[];
  readonly tags?: readonly number[];
}

/** A problem that has no answer as stated, or a solve that found none. */
export class SolverError extends Error {
  override readonly name = 'SolverError';
  readonly code: SolverCode;
  readonly what: string;
  readonly where: SolverWhere;
  readonly remedy: string;

  constructor(code: SolverCode, what: string, where: SolverWhere, remedy: string, cause?: unknown) {
    super(`${what}. ${remedy}`, { cause });
    this.code = code;
    this.what = what;
    this.where = where;
    this.remedy = remedy;
  }
}
