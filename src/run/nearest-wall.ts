import type { Mesh, Point } from '../../mesher/index.ts';

/** The place on the meshed walls nearest to a point. */
export interface NearestWall {
  readonly distance: number;
  readonly at: Point;
  /** Number of the wall segment in the mesh, and how far along it the place is, 0 to 1. */
  readonly segment: number;
  readonly along: number;
}

/** Looks through every wall segment of the mesh; for a handful of starts and pins. */
export function nearestWall(mesh: Mesh, [x, y]: Point): NearestWall {
  const { nodes, segments } = mesh;
  let nearest: NearestWall = { distance: Number.POSITIVE_INFINITY, at: [x, y], segment: -1, along: 0 };
  for (let s = 0; s < segments.length / 2; s++) {
    const a = 2 * (segments[2 * s] ?? 0);
    const b = 2 * (segments[2 * s + 1] ?? 0);
    const ax = nodes[a] ?? 0;
    const ay = nodes[a + 1] ?? 0;
    const dx = (nodes[b] ?? 0) - ax;
    const dy = (nodes[b + 1] ?? 0) - ay;
    const along = Math.min(1, Math.max(0, ((x - ax) * dx + (y - ay) * dy) / (dx * dx + dy * dy)));
    const at: Point = [ax + along * dx, ay + along * dy];
    const distance = Math.hypot(x - at[0], y - at[1]);
    if (distance < nearest.distance) nearest = { distance, at, segment: s, along };
  }
  return nearest;
}
