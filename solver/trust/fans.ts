import type { Hooks, Mesh } from '../../mesher/index.ts';
import { pollMask, stopIfAsked } from '../linear/stopping.ts';
import { sideKind, type WallSides } from './wall-sides.ts';

/** The triangles round every vertex, counter-clockwise from wall to wall, or all the way round. */
export interface Fans {
  readonly count: number;
  /** Fan f holds corners start[f] … start[f + 1] − 1. */
  readonly start: Int32Array;
  /** Corner 3t + v: vertex v of triangle t. */
  readonly corner: Int32Array;
  /** Whether a flux may circulate: closed fans, and open ones that end on absorbing walls both ways. */
  readonly turns: Uint8Array;
  readonly closed: Uint8Array;
}

/**
 * Walks round every vertex. A vertex with several fans (touched by walls from several sides) gives one entry for each.
 *
 * @throws {SolverError} SOLVING_STOPPED
 */
export function fansOf(mesh: Mesh, { across, kind }: WallSides, hooks: Hooks = {}): Fans {
  const corners = mesh.triangles.length;
  const start: number[] = [0];
  const corner = new Int32Array(corners);
  const turns: number[] = [];
  const closed: number[] = [];
  const seen = new Uint8Array(corners);
  let at = 0;
  for (let from = 0; from < corners; from++) {
    if ((from & pollMask) === 0) stopIfAsked(hooks);
    if (seen[from]) continue;
    let first = from;
    for (let back = across[startSide(first)]; back >= 0; back = across[startSide(first)]) {
      first = back % 3 === 0 ? back + 2 : back - 1;
      if (first === from) break;
    }
    const begin = at;
    let last = first;
    for (let q = first; ; ) {
      seen[q] = 1;
      corner[at++] = q;
      last = q;
      const next = across[endSide(q)];
      if (next < 0) break;
      q = next % 3 === 2 ? next - 2 : next + 1;
      if (q === first) break;
    }
    const round = across[endSide(last)] >= 0;
    const absorbing = (side: number): boolean => kind[side] === sideKind.absorbing;
    closed.push(round ? 1 : 0);
    turns.push(round || (absorbing(startSide(corner[begin])) && absorbing(endSide(last))) ? 1 : 0);
    start.push(at);
  }
  return {
    ...{ count: turns.length, start: Int32Array.from(start), corner },
    ...{ turns: Uint8Array.from(turns), closed: Uint8Array.from(closed) },
  };
}

/** The side from corner 3t + v to the next vertex: where the fan enters its triangle. */
export function startSide(corner: number): number {
  return corner % 3 === 0 ? corner + 2 : corner - 1;
}

/** The side from the previous vertex to corner 3t + v: where the fan leaves its triangle. */
export function endSide(corner: number): number {
  return corner % 3 === 2 ? corner - 2 : corner + 1;
}
