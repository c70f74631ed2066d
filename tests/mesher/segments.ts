import type { Point } from '../../mesher/index.ts';

/** Straight pieces between points, for drawings made at random. */

export type Segment = readonly [Point, Point];

export function at(points: readonly Point[], i: number): Point {
  return points[i % points.length] ?? [0, 0];
}

export function crossing([a, b]: Segment, [c, d]: Segment): boolean {
  const side = (p: Point, q: Point, r: Point): number =>
    (q[0] - p[0]) * (r[1] - p[1]) - (q[1] - p[1]) * (r[0] - p[0]);
  return side(a, b, c) * side(a, b, d) < 0 && side(c, d, a) * side(c, d, b) < 0;
}

/** Distance between two segments. */
export function gap(s: Segment, r: Segment): number {
  if (crossing(s, r)) return 0;
  return Math.min(toSegment(s[0], r), toSegment(s[1], r), toSegment(r[0], s), toSegment(r[1], s));
}

export function toSegment(p: Point, [a, b]: Segment): number {
  const square = (b[0] - a[0]) ** 2 + (b[1] - a[1]) ** 2;
  const share = square > 0 ? ((p[0] - a[0]) * (b[0] - a[0]) + (p[1] - a[1]) * (b[1] - a[1])) / square : 0;
  return distance(p, between(a, b, Math.min(1, Math.max(0, share))));
}

export function between(p: Point, q: Point, share: number): Point {
  return [p[0] + share * (q[0] - p[0]), p[1] + share * (q[1] - p[1])];
}

export function distance(p: Point, q: Point): number {
  return Math.hypot(p[0] - q[0], p[1] - q[1]);
}
