import type { Hooks } from '../../mesher/index.ts';
import { solveOrThrow } from '../linear/prepare.ts';
import type { System } from '../operator/system.ts';
import { overAllNodes } from './fields.ts';

/**
 * Mean exit time u of every mesh node: L u = −1 with the walls' conditions, 0 on absorbing walls.
 *
 * @returns one entry per mesh node, in the case's time unit
 * @throws {SolverError} NOT_CONVERGED, SOLVING_STOPPED
 * Source: Dynkin's formula; Gardiner 2009, section 5.5 (recalled); METHODS 3.
 */
export function meanExitTime(system: System, hooks: Hooks = {}): Float64Array {
  return overAllNodes(system, solveOrThrow(system, system.load, hooks));
}
