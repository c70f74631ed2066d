import type { Hooks } from '../../mesher/index.ts';
import { solveManyOrThrow } from '../linear/prepare.ts';
import type { System } from '../operator/system.ts';
import { overAllNodes } from './fields.ts';

/**
 * For each exit the chance to leave through it: L p_i = 0 with p_i = 1 on absorbing walls of exit i, 0 on those of the
 * others, n·D∇p_i + κ(p_i − δ) = 0 on partly absorbing ones. A node where two exits touch belongs half to each.
 *
 * On the discrete process p_i is the chance of its jumps, so at every node the fields sum to 1 (to rounding).
 *
 * @returns one field per exit, each with one entry per mesh node
 * @throws {SolverError} NOT_CONVERGED, SOLVING_STOPPED
 * Source: METHODS 3; Redner 2001 (splitting probabilities, recalled).
 */
export function exitShares(system: System, hooks: Hooks = {}): Float64Array[] {
  return sharesOf(system, [...Array(system.exitCount).keys()], hooks);
}

/**
 * The chance to be lost on the way (loss c) before leaving; with the shares it sums to 1 at every node.
 *
 * @returns one entry per mesh node
 * @throws {SolverError} NOT_CONVERGED, SOLVING_STOPPED
 */
export function lostShare(system: System, hooks: Hooks = {}): Float64Array {
  return sharesOf(system, [-1], hooks)[0];
}

function sharesOf(system: System, exits: readonly number[], hooks: Hooks): Float64Array[] {
  const { row, exit, rate } = system.sinks;
  const wall = system.absorbing;
  const rates = exits.map((through) => {
    const rhs = new Float64Array(system.size);
    for (let s = 0; s < row.length; s++) if (exit[s] === through) rhs[row[s]] += rate[s];
    return rhs;
  });
  return solveManyOrThrow(system, rates, hooks).map((free, e) => {
    const field = overAllNodes(system, free);
    for (let q = 0; q < wall.node.length; q++) {
      if (wall.exit[q] === exits[e]) field[wall.node[q]] += wall.part[q];
    }
    return field;
  });
}
