import { incircle, orient2d } from 'robust-predicates';

/** Exact signs of the two determinants all decisions rest on (Shewchuk 1997, as the package robust-predicates). */

/** > 0 when a, b, c turn left (counter-clockwise, y up), 0 when they lie on one line: the sign is exact. */
export function orient(ax: number, ay: number, bx: number, by: number, cx: number, cy: number): number {
  return -orient2d(ax, ay, bx, by, cx, cy);
}

/** > 0 when d lies inside the circle through the counter-clockwise a, b, c: the sign is exact. */
export function inCircle(
  ax: number,
  ay: number,
  bx: number,
  by: number,
  cx: number,
  cy: number,
  dx: number,
  dy: number,
): number {
  return incircle(ax, ay, bx, by, cx, cy, dx, dy);
}
