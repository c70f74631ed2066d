import type { Cavity } from './cavity.ts';
import type { HalfEdgeMesh } from './half-edge.ts';

/** The triangles that a new vertex made, for the caller to look at; reused for each. */
export interface Fan {
  list: Int32Array;
  count: number;
  /** First and last half-edge at the new vertex of an open fan: vertex → chain start, and chain end → vertex. */
  first: number;
  last: number;
}

export function makeFan(): Fan {
  return { list: new Int32Array(64), count: 0, first: -1, last: -1 };
}

/**
 * Replaces the triangles of a cavity by a fan from vertex `v` to its chain.
 *
 * @param closed whether the chain closes up round `v`, or is open because `v` lies on a segment or on the rim
 * @param regionSet of the new triangles
 * @param segmentEdge per segment, a half-edge on it; kept up to date
 */
export function fillCavity(
  mesh: HalfEdgeMesh,
  cavity: Cavity,
  v: number,
  closed: boolean,
  regionSet: number,
  segmentEdge: Int32Array,
  fan: Fan,
): void {
  const k = cavity.count;
  const extra = Math.max(0, k - cavity.deadCount);
  mesh.reserve(0, mesh.triangleCount + extra, 0);
  if (k > fan.list.length) fan.list = new Int32Array(2 * k);
  const { from, opposite, segment } = mesh;
  const list = fan.list;
  const dead = cavity.deadList;
  let fresh = mesh.triangleCount;
  for (let i = 0; i < k; i++) {
    const t = i < cavity.deadCount ? dead[i] : fresh++;
    list[i] = t;
    const e = 3 * t;
    const o = cavity.outside[i];
    const s = cavity.segment[i];
    from[e] = cavity.from[i];
    from[e + 1] = cavity.to[i];
    from[e + 2] = v;
    opposite[e] = o;
    if (o >= 0) {
      opposite[o] = e;
      // Only differs where a wall vertex lies beyond its old chord, which then is a wall no longer.
      segment[o] = s;
    }
    segment[e] = s;
    segment[e + 1] = -1;
    segment[e + 2] = -1;
    if (s >= 0) segmentEdge[s] = e;
    mesh.regionSet[t] = regionSet;
    if (i > 0) {
      // Edge (to of the one before → v) meets (v → from of this one).
      opposite[3 * list[i - 1] + 1] = e + 2;
      opposite[e + 2] = 3 * list[i - 1] + 1;
    }
  }
  mesh.triangleCount = fresh;
  fan.count = k;
  fan.first = 3 * list[0] + 2;
  fan.last = 3 * list[k - 1] + 1;
  if (closed) {
    opposite[fan.last] = fan.first;
    opposite[fan.first] = fan.last;
  } else {
    opposite[fan.last] = -1;
    opposite[fan.first] = -1;
  }
}
