import type { Hooks } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';

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
