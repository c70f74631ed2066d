import type { Hooks, Mesh } from '../../mesher/index.ts';
import { pollMask, stopIfAsked } from '../linear/stopping.ts';

/** A mesh renumbered so that near things lie near each other in memory, and the way back. */
export interface OrderedMesh {
  readonly mesh: Mesh;
  /** Old node number per new one. */
  readonly nodeOf: Int32Array;
}

const cellsBits = 12;

/**
 * Numbers the nodes along a Hilbert curve and sorts the triangles by their lowest node.
 *
 * @throws {SolverError} SOLVING_STOPPED
 * Source: Hilbert 1891; for meshes see Bader 2013, Space-Filling Curves (recalled). The bench of assembly pays for it.
 */
export function orderAlongCurve(mesh: Mesh, hooks: Hooks = {}): OrderedMesh {
  const { nodes, triangles, regionSet } = mesh;
  const count = nodes.length / 2;
  const nodeOf = sortByKey(hilbertKeys(nodes, hooks), 2 * cellsBits);
  const rank = new Int32Array(count);
  for (let i = 0; i < count; i++) rank[nodeOf[i]] = i;
  const moved = new Float64Array(2 * count);
  for (let i = 0; i < count; i++) {
    moved[2 * i] = nodes[2 * nodeOf[i]];
    moved[2 * i + 1] = nodes[2 * nodeOf[i] + 1];
  }
  stopIfAsked(hooks);
  const lowest = new Int32Array(regionSet.length);
  for (let t = 0; t < regionSet.length; t++) {
    lowest[t] = Math.min(rank[triangles[3 * t]], rank[triangles[3 * t + 1]], rank[triangles[3 * t + 2]]);
  }
  const triangleOf = sortByKey(lowest, 32 - Math.clz32(count));
  stopIfAsked(hooks);
  const sortedTriangles = new Int32Array(triangles.length);
  const sortedRegion = new Int32Array(regionSet.length);
  for (let t = 0; t < regionSet.length; t++) {
    const from = 3 * triangleOf[t];
    for (let v = 0; v < 3; v++) sortedTriangles[3 * t + v] = rank[triangles[from + v]];
    sortedRegion[t] = regionSet[triangleOf[t]];
  }
  const segments = mesh.segments.map((node) => rank[node]);
  return {
    mesh: { ...mesh, nodes: moved, triangles: sortedTriangles, regionSet: sortedRegion, segments },
    nodeOf,
  };
}

/** Place of every node along the curve through 4096 × 4096 cells. */
function hilbertKeys(nodes: Float64Array, hooks: Hooks): Int32Array {
  let lowX = Number.POSITIVE_INFINITY;
  let lowY = Number.POSITIVE_INFINITY;
  let highX = Number.NEGATIVE_INFINITY;
  let highY = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < nodes.length; i += 2) {
    lowX = Math.min(lowX, nodes[i]);
    highX = Math.max(highX, nodes[i]);
    lowY = Math.min(lowY, nodes[i + 1]);
    highY = Math.max(highY, nodes[i + 1]);
  }
  const cells = 2 ** cellsBits;
  const scale = (cells - 1) / (Math.max(highX - lowX, highY - lowY) || 1);
  const keys = new Int32Array(nodes.length / 2);
  for (let i = 0; i < keys.length; i++) {
    if ((i & pollMask) === 0) stopIfAsked(hooks);
    let x = ((nodes[2 * i] - lowX) * scale) | 0;
    let y = ((nodes[2 * i + 1] - lowY) * scale) | 0;
    let key = 0;
    for (let s = cells >> 1; s > 0; s >>= 1) {
      const right = x & s ? 1 : 0;
      const up = y & s ? 1 : 0;
      key = key * 4 + ((3 * right) ^ up);
      if (up === 0) {
        if (right === 1) {
          x = cells - 1 - x;
          y = cells - 1 - y;
        }
        const held = x;
        x = y;
        y = held;
      }
    }
    keys[i] = key;
  }
  return keys;
}

/** Indices in ascending order of their keys (≥ 0, `bits` bits), stable: radix sort by 11 bits at a time. */
function sortByKey(keys: Int32Array, bits: number): Int32Array {
  const count = keys.length;
  let order = new Int32Array(count);
  let spare = new Int32Array(count);
  for (let i = 0; i < count; i++) order[i] = i;
  const place = new Int32Array(2049);
  for (let shift = 0; shift < bits; shift += 11) {
    place.fill(0);
    for (let i = 0; i < count; i++) place[((keys[i] >>> shift) & 2047) + 1]++;
    for (let d = 0; d < 2048; d++) place[d + 1] += place[d];
    for (let i = 0; i < count; i++) spare[place[(keys[order[i]] >>> shift) & 2047]++] = order[i];
    const held = order;
    order = spare;
    spare = held;
  }
  return order;
}
