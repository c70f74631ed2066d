import Flatbush from 'flatbush';
import type { Mesh } from './mesh.ts';

/** A place in the mesh: the triangle and the weights of its three corners, ≥ 0, with sum 1. */
export interface Located {
  readonly triangle: number;
  readonly weights: readonly [number, number, number];
}

/** A place on the nearest wall. */
export interface NearestWall {
  /** Wall segment number. */
  readonly segment: number;
  readonly distance: number;
  /** 0 at the segment's first node, 1 at its second. */
  readonly along: number;
}

export interface Locator {
  /** The triangle that holds (x, y), the one with the smallest number on a common edge; undefined outside. */
  find(x: number, y: number): Located | undefined;
  /** The wall segment nearest to (x, y), by straight distance. */
  nearestWall(x: number, y: number): NearestWall;
}

/** Builds an index for finding places in a mesh; each look-up then takes about the logarithm of its size. */
export function locate(mesh: Mesh): Locator {
  const { nodes, triangles, segments } = mesh;
  const count = triangles.length / 3;
  const boxes = new Flatbush(count);
  for (let t = 0; t < count; t++) {
    const a = 2 * triangles[3 * t];
    const b = 2 * triangles[3 * t + 1];
    const c = 2 * triangles[3 * t + 2];
    boxes.add(
      Math.min(nodes[a], nodes[b], nodes[c]),
      Math.min(nodes[a + 1], nodes[b + 1], nodes[c + 1]),
      Math.max(nodes[a], nodes[b], nodes[c]),
      Math.max(nodes[a + 1], nodes[b + 1], nodes[c + 1]),
    );
  }
  boxes.finish();
  let walls: Flatbush | undefined;
  return {
    find: (x, y) => {
      const found = boxes.search(x, y, x, y).sort((p, q) => p - q);
      for (const t of found) {
        const weights = weightsIn(mesh, t, x, y);
        if (weights) return { triangle: t, weights };
      }
      return undefined;
    },
    nearestWall: (x, y) => {
      walls ??= wallBoxes(nodes, segments);
      return nearest(mesh, walls, x, y);
    },
  };
}

function weightsIn(mesh: Mesh, t: number, x: number, y: number): [number, number, number] | undefined {
  const { nodes, triangles } = mesh;
  const a = 2 * triangles[3 * t];
  const b = 2 * triangles[3 * t + 1];
  const c = 2 * triangles[3 * t + 2];
  const ax = nodes[a] - x;
  const ay = nodes[a + 1] - y;
  const bx = nodes[b] - x;
  const by = nodes[b + 1] - y;
  const cx = nodes[c] - x;
  const cy = nodes[c + 1] - y;
  const wa = bx * cy - by * cx;
  const wb = cx * ay - cy * ax;
  const wc = ax * by - ay * bx;
  const sum = wa + wb + wc;
  // A place on an edge belongs to both triangles, whatever rounding makes of it.
  const least = -1e-12 * sum;
  if (wa < least || wb < least || wc < least) return undefined;
  const [p, q, r] = [Math.max(0, wa), Math.max(0, wb), Math.max(0, wc)];
  const total = p + q + r;
  return [p / total, q / total, r / total];
}

function wallBoxes(nodes: Float64Array, segments: Int32Array): Flatbush {
  const index = new Flatbush(segments.length / 2);
  for (let i = 0; i < segments.length; i += 2) {
    const a = 2 * segments[i];
    const b = 2 * segments[i + 1];
    index.add(
      Math.min(nodes[a], nodes[b]),
      Math.min(nodes[a + 1], nodes[b + 1]),
      Math.max(nodes[a], nodes[b]),
      Math.max(nodes[a + 1], nodes[b + 1]),
    );
  }
  index.finish();
  return index;
}

/** Boxes come nearest first, so the search ends once a box is farther than the best segment. */
function nearest(mesh: Mesh, walls: Flatbush, x: number, y: number): NearestWall {
  let best: NearestWall = { segment: -1, distance: Number.POSITIVE_INFINITY, along: 0 };
  for (let asked = 8; ; asked *= 4) {
    const found = walls.neighbors(x, y, asked);
    for (const segment of found) {
      const { distance, along } = toWall(mesh, segment, x, y);
      if (distance < best.distance) best = { segment, distance, along };
    }
    const last = found.at(-1);
    if (found.length < asked || last === undefined) return best;
    if (boxDistance(mesh, last, x, y) >= best.distance) return best;
  }
}

function toWall(mesh: Mesh, segment: number, x: number, y: number): { distance: number; along: number } {
  const { nodes, segments } = mesh;
  const a = 2 * segments[2 * segment];
  const b = 2 * segments[2 * segment + 1];
  const dx = nodes[b] - nodes[a];
  const dy = nodes[b + 1] - nodes[a + 1];
  const at = ((x - nodes[a]) * dx + (y - nodes[a + 1]) * dy) / (dx * dx + dy * dy);
  const along = Math.min(1, Math.max(0, at));
  return { distance: Math.hypot(nodes[a] + along * dx - x, nodes[a + 1] + along * dy - y), along };
}

function boxDistance(mesh: Mesh, segment: number, x: number, y: number): number {
  const { nodes, segments } = mesh;
  const a = 2 * segments[2 * segment];
  const b = 2 * segments[2 * segment + 1];
  const dx = Math.max(Math.min(nodes[a], nodes[b]) - x, x - Math.max(nodes[a], nodes[b]), 0);
  const dy = Math.max(Math.min(nodes[a + 1], nodes[b + 1]) - y, y - Math.max(nodes[a + 1], nodes[b + 1]), 0);
  return Math.hypot(dx, dy);
}
