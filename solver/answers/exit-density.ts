import type { Hooks } from '../../mesher/index.ts';
import { solveAdjointOrThrow } from '../linear/prepare.ts';
import type { System } from '../operator/system.ts';

/** Where a start's particles are caught. */
export interface ExitDensity {
  /** One entry per mesh node: the share caught there; all and `lost` sum to 1 to rounding. */
  readonly caught: Float64Array;
  /** The shares of the exits, sums of `caught` (a node of two exits counts half for each). */
  readonly byExit: Float64Array;
  /** What is lost on the way; `caught` sums to 1 less this. */
  readonly lost: number;
}

/**
 * The share of particles caught at each node (of walls, and of a catching floor), from nodal reactions of the adjoint Aᵀz = ρ: what flows from row i
 * into a sink is z_i times its rate. Since Σ_i ρ_i = Σ_i (Aᵀz)_i = Σ_i slack_i z_i, the shares sum to 1; no gradient
 * is taken.
 *
 * @param weights start weights, one per mesh node, sum 1; what starts on an absorbing node is caught there at once
 * @throws {SolverError} NOT_CONVERGED, SOLVING_STOPPED
 * Source: METHODS 3 (nodal reactions, Wheeler 1974, recalled).
 */
export function exitDensity(system: System, weights: Float64Array, hooks: Hooks = {}): ExitDensity {
  const rhs = new Float64Array(system.size);
  for (let i = 0; i < system.size; i++) rhs[i] = weights[system.nodeOf[i]];
  const z = solveAdjointOrThrow(system, rhs, hooks);
  const caught = new Float64Array(weights.length);
  const byExit = new Float64Array(system.exitCount);
  const { row, node, exit, rate } = system.sinks;
  let lost = 0;
  for (let s = 0; s < row.length; s++) {
    const flow = z[row[s]] * rate[s];
    if (exit[s] < 0) {
      lost += flow;
      continue;
    }
    caught[node[s]] += flow;
    byExit[exit[s]] += flow;
  }
  const wall = system.absorbing;
  for (let q = 0; q < wall.node.length; q++) {
    const here = weights[wall.node[q]] * wall.part[q];
    caught[wall.node[q]] += here;
    byExit[wall.exit[q]] += here;
  }
  return { caught, byExit, lost };
}
