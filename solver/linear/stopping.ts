import type { Hooks } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';

/** Loops over a mesh ask after this many rounds, less than 20 ms of work; a power of two less one. */
export const pollMask = 16383;

/**
 * Ends the work when the caller asks for it.
 *
 * @throws {SolverError} SOLVING_STOPPED
 */
export function stopIfAsked(hooks: Hooks): void {
  if (!hooks.stop?.()) return;
  throw new SolverError(
    'SOLVING_STOPPED',
    'The computation was stopped',
    {},
    'Start it again to get an answer.',
  );
}
