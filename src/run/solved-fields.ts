import type { Hooks } from '../../mesher/index.ts';
import {
  type Coefficient,
  conductance,
  exitShares,
  exitTimeMoments,
  lostShare,
  type Problem,
  SolverError,
  type System,
  timeByExit,
} from '../../solver/index.ts';
import type { Answer } from './answers.ts';

/** What is solved once per layout and read for every start. */
export interface SolvedFields {
  /** Mean time to leave or be lost, per mesh node, in the case's time unit. */
  readonly meanExitTime: Float64Array;
  /**
   * Moments of that time per mesh node, the mean first; fewer than asked for where the next is beyond the largest
   * number.
   */
  readonly moments: readonly Float64Array[];
  /** Chance to end there, per mesh node, by exit in their order; with loss also `lost`. They sum to 1 at every node. */
  readonly shares: ReadonlyMap<string, Float64Array>;
  /** Under the names of `shares`: the mean of the time, counted as 0 for those that end elsewhere. */
  readonly timeByExit: ReadonlyMap<string, Float64Array>;
  /** By exit, where it is defined; absent where none is. */
  readonly conductance?: Readonly<Record<string, Answer>>;
}

/** Name of the share of particles that are lost on the way; no wall or region can have it. */
const lost = 'lost';

/**
 * Solves for the moments of the exit time, the shares, and the times by exit.
 *
 * @param order how many moments
 * @param exits names by exit number
 * @param hooks of the part of the work named, with how far it is when it begins and ends, 0 to 1
 * @throws {SolverError} NOT_CONVERGED, MEMORY_LIMIT, SOLVING_STOPPED
 */
export function solveFields(
  system: System,
  problem: Problem,
  exits: readonly string[],
  order: number,
  hooks: (doing: string, from: number, to: number) => Hooks,
): SolvedFields {
  const moments = momentsOf(system, order, hooks('solving for the mean exit time', 0, 0.6));
  const byExit = exitShares(system, hooks('solving for the shares', 0.6, 0.8));
  const shares = new Map(byExit.map((field, exit) => [exits[exit] ?? '', field]));
  const loses = problem.media.some((medium) => medium.loss);
  if (loses) shares.set(lost, lostShare(system, hooks('solving for the share lost', 0.8, 0.8)));
  const times = timeByExit(system, [...shares.values()], hooks('solving for the times by exit', 0.8, 1));
  const meanExitTime = moments[0] ?? new Float64Array(system.freeOf.length);
  // Between one exit and nothing there is no difference to conduct by.
  const conducted = loses || exits.length < 2 ? {} : conductances(system, problem.depth, exits, byExit);
  return {
    meanExitTime,
    moments,
    shares,
    timeByExit: new Map([...shares.keys()].map((name, i) => [name, times[i] ?? meanExitTime])),
    ...(Object.keys(conducted).length > 0 && { conductance: conducted }),
  };
}

/** The moments up to the order, or up to the last that is below the largest number. */
function momentsOf(system: System, order: number, hooks: Hooks): Float64Array[] {
  try {
    return exitTimeMoments(system, order, hooks);
  } catch (error) {
    const isTooLarge = error instanceof SolverError && error.code === 'EXIT_TOO_RARE';
    if (!isTooLarge || order < 2) throw error;
    return momentsOf(system, order - 1, hooks);
  }
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
