import type { Hooks } from '../../mesher/index.ts';
import {
  type Coefficient,
  conductance,
  exitShares,
  lostShare,
  meanExitTime,
  type Problem,
  type System,
} from '../../solver/index.ts';
import type { Answer } from './answers.ts';

/** What is solved once per layout and read for every start. */
export interface SolvedFields {
  /** Mean time to leave or be lost, per mesh node, in the case's time unit. */
  readonly meanExitTime: Float64Array;
  /** Chance to end there, per mesh node, by exit in their order; with loss also `lost`. They sum to 1 at every node. */
  readonly shares: ReadonlyMap<string, Float64Array>;
  /** By exit, where it is defined; absent where none is. */
  readonly conductance?: Readonly<Record<string, Answer>>;
}

/** Name of the share of particles that are lost on the way; no wall or region can have it. */
const lost = 'lost';

/**
 * Solves for the mean exit time and the shares.
 *
 * @param exits names by exit number
 * @param hooks of the part of the work named, with how far it is when it begins and ends, 0 to 1
 * @throws {SolverError} NOT_CONVERGED, MEMORY_LIMIT, SOLVING_STOPPED
 */
export function solveFields(
  system: System,
  problem: Problem,
  exits: readonly string[],
  hooks: (doing: string, from: number, to: number) => Hooks,
): SolvedFields {
  const time = meanExitTime(system, hooks('solving for the mean exit time', 0, 0.6));
  const byExit = exitShares(system, hooks('solving for the shares', 0.6, 1));
  const shares = new Map(byExit.map((field, exit) => [exits[exit] ?? '', field]));
  const loses = problem.media.some((medium) => medium.loss);
  if (loses) shares.set(lost, lostShare(system, hooks('solving for the share lost', 1, 1)));
  // Between one exit and nothing there is no difference to conduct by.
  const conducted = loses || exits.length < 2 ? {} : conductances(system, problem.depth, exits, byExit);
  return {
    meanExitTime: time,
    shares,
    ...(Object.keys(conducted).length > 0 && { conductance: conducted }),
  };
}

/**
 * Conductance per unit depth of every exit that has one. Left out: with drift (the solver says so); where the depth
 * varies, as none is the unit; and for absorbing exits that touch another, where it is infinite.
 */
function conductances(
  system: System,
  depth: Coefficient | undefined,
  exits: readonly string[],
  shares: readonly Float64Array[],
): Record<string, Answer> {
  if (depth?.kind === 'varying') return {};
  const { exit, part } = system.absorbing;
  const touching = new Set<number>();
  for (let q = 0; q < part.length; q++) if ((part[q] ?? 1) < 1) touching.add(exit[q] ?? -1);
  const found: Record<string, Answer> = {};
  for (const [number, share] of shares.entries()) {
    const value = touching.has(number) ? undefined : conductance(system, number, share);
    if (value === undefined) continue;
    found[exits[number] ?? ''] = { value: value / (depth?.value ?? 1), kind: 'estimate' };
  }
  return found;
}
