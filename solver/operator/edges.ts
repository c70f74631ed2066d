import type { Hooks } from '../../mesher/index.ts';
import { pollMask, stopIfAsked } from '../linear/stopping.ts';

/** The edges of a mesh, each once, and the edge on every side of every triangle. */
export interface EdgeList {
  readonly count: number;
  /** Node numbers per edge, `first` < `second`. */
  readonly first: Int32Array;
  readonly second: Int32Array;
  /** 3 per triangle: the edge opposite to its vertex 0, 1, 2. */
  readonly ofSide: Int32Array;
}

/**
 * Finds the edges by sorting the triangles' sides into one bucket per lower node number, linear in the mesh.
 *
 * @param triangles 3 node numbers per triangle
 * @param nodeCount numbers are below this
 * @throws {SolverError} SOLVING_STOPPED
 */
export function listEdges(triangles: Int32Array, nodeCount: number, hooks: Hooks = {}): EdgeList {
  const sides = triangles.length;
  const start = new Int32Array(nodeCount + 1);
  const low = (side: number): number => Math.min(triangles[sideStart(side)], triangles[sideEnd(side)]);
  for (let side = 0; side < sides; side++) start[low(side) + 1]++;
  for (let node = 0; node < nodeCount; node++) start[node + 1] += start[node];
  const sideAt = new Int32Array(sides);
  const next = start.slice(0, nodeCount);
  for (let side = 0; side < sides; side++) sideAt[next[low(side)]++] = side;
  stopIfAsked(hooks);

  const first = new Int32Array(sides);
  const second = new Int32Array(sides);
  const ofSide = new Int32Array(sides);
  const lastEdgeTo = new Int32Array(nodeCount).fill(-1);
  let count = 0;
  for (let node = 0; node < nodeCount; node++) {
    if ((node & pollMask) === 0) stopIfAsked(hooks);
    const firstOfNode = count;
    for (let q = start[node]; q < start[node + 1]; q++) {
      const side = sideAt[q];
      const a = triangles[sideStart(side)];
      const other = a === node ? triangles[sideEnd(side)] : a;
      if (lastEdgeTo[other] < firstOfNode) {
        first[count] = node;
        second[count] = other;
        lastEdgeTo[other] = count++;
      }
      ofSide[side] = lastEdgeTo[other];
    }
  }
  return { count, first: first.slice(0, count), second: second.slice(0, count), ofSide };
}

/** Index into `triangles` of the node where a side begins, counter-clockwise; the side lies opposite to `side`. */
function sideStart(side: number): number {
  return side % 3 === 2 ? side - 2 : side + 1;
}

function sideEnd(side: number): number {
  return side % 3 === 0 ? side + 2 : side - 1;
}
