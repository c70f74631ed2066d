import type { Links } from './links.ts';
import type { Sinks } from './system.ts';
import type { AbsorbingNodes, WallRates } from './wall-terms.ts';

/** A rate per node that leads to an exit, or to nowhere (−1). */
export interface VolumeRate {
  readonly exit: number;
  readonly rate: Float64Array;
}

/** What a sink list is made from; node numbers throughout. */
export interface SinkSources {
  readonly links: Links;
  readonly absorbing: AbsorbingNodes;
  readonly partly: WallRates;
  readonly volume: readonly VolumeRate[];
  /** e^ψ per node, where rows are scaled by it; `links` already are. */
  readonly rowScale: Float64Array | undefined;
}

/**
 * A row's ways out: to each absorbing neighbour (in parts where two exits touch), through its own partly absorbing
 * wall, through the floor, and by loss.
 *
 * @param freeOf row per node, −1 on absorbing walls
 */
export function collectSinks(sources: SinkSources, freeOf: Int32Array): Sinks {
  const { links, absorbing, partly, volume, rowScale } = sources;
  const row: number[] = [];
  const node: number[] = [];
  const exit: number[] = [];
  const rate: number[] = [];
  const add = (from: number, at: number, to: number, r: number): void => {
    row.push(from);
    node.push(at);
    exit.push(to);
    rate.push(r);
  };
  for (let l = 0; l < links.first.length; l++) {
    const a = links.first[l];
    const b = links.second[l];
    if (freeOf[a] >= 0 === freeOf[b] >= 0) continue;
    const wallNode = freeOf[a] < 0 ? a : b;
    const exits = absorbing.get(wallNode) ?? [];
    const toWall = wallNode === b ? links.forth[l] : links.back[l];
    for (const to of exits) add(freeOf[a + b - wallNode], wallNode, to, toWall / exits.length);
  }
  const scaled = (at: number, r: number): number => (rowScale ? r * rowScale[at] : r);
  for (let p = 0; p < partly.node.length; p++) {
    const at = partly.node[p];
    if (freeOf[at] >= 0) add(freeOf[at], at, partly.exit[p], scaled(at, partly.rate[p]));
  }
  for (const { exit: to, rate: perNode } of volume) {
    for (let at = 0; at < perNode.length; at++) {
      if (freeOf[at] >= 0 && perNode[at] > 0) add(freeOf[at], at, to, scaled(at, perNode[at]));
    }
  }
  return {
    ...{ row: Int32Array.from(row), node: Int32Array.from(node), exit: Int32Array.from(exit) },
    rate: Float64Array.from(rate),
  };
}
