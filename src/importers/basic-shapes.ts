import type { Curve, Point } from '../../mesher/index.ts';

/** Circles, ellipses, rectangles and chains of lines as curves, counter-clockwise in a frame with y upwards. */

/** Starts at the +x point; four quarters whose joints are stored exactly. */
export function circleCurves(centre: Point, radius: number): Curve[] {
  return ellipseCurves(centre, [radius, radius], 0);
}

/** Starts at the end of the first half axis, which is +x turned counter-clockwise by `turned` radians. */
export function ellipseCurves(centre: Point, radii: readonly [number, number], turned: number): Curve[] {
  const c = Math.cos(turned);
  const s = Math.sin(turned);
  const place = (x: number, y: number): Point => [centre[0] + c * x - s * y, centre[1] + s * x + c * y];
  const [a, b] = radii;
  const joints: readonly Point[] = [place(a, 0), place(0, b), place(-a, 0), place(0, -b)];
  return joints.map((from, i) => ({
    kind: 'arc',
    from,
    to: joints[(i + 1) % 4] ?? from,
    centre,
    radii,
    turned,
    start: (i * Math.PI) / 2,
    sweep: Math.PI / 2,
  }));
}

/**
 * Starts in the corner `first` and goes along x first; `opposite` may lie on any side, so the sense is its business.
 *
 * @param round half axes of the corners' quarter ellipses, 0 for sharp corners; the start is then past that corner
 */
export function rectangleCurves(
  first: Point,
  opposite: Point,
  round: readonly [number, number] = [0, 0],
): Curve[] {
  const [x0, y0] = first;
  const [x1, y1] = opposite;
  if (round[0] <= 0 || round[1] <= 0) {
    return linesThrough([
      [x0, y0],
      [x1, y0],
      [x1, y1],
      [x0, y1],
      [x0, y0],
    ]);
  }
  const dx = Math.sign(x1 - x0) * round[0];
  const dy = Math.sign(y1 - y0) * round[1];
  const sense = dx * dy > 0 ? 1 : -1;
  const curves: Curve[] = [];
  const edge = (from: Point, to: Point): void => {
    if (from[0] !== to[0] || from[1] !== to[1]) curves.push({ kind: 'line', from, to });
  };
  const corner = (from: Point, to: Point, centre: Point): void => {
    const start = Math.atan2((from[1] - centre[1]) / round[1], (from[0] - centre[0]) / round[0]);
    curves.push({
      kind: 'arc',
      from,
      to,
      centre,
      radii: round,
      turned: 0,
      start,
      sweep: (sense * Math.PI) / 2,
    });
  };
  edge([x0 + dx, y0], [x1 - dx, y0]);
  corner([x1 - dx, y0], [x1, y0 + dy], [x1 - dx, y0 + dy]);
  edge([x1, y0 + dy], [x1, y1 - dy]);
  corner([x1, y1 - dy], [x1 - dx, y1], [x1 - dx, y1 - dy]);
  edge([x1 - dx, y1], [x0 + dx, y1]);
  corner([x0 + dx, y1], [x0, y1 - dy], [x0 + dx, y1 - dy]);
  edge([x0, y1 - dy], [x0, y0 + dy]);
  corner([x0, y0 + dy], [x0 + dx, y0], [x0 + dx, y0 + dy]);
  return curves;
}

/** Straight lines from point to point; repeated points give lines without length, for healing to report. */
export function linesThrough(points: readonly Point[]): Curve[] {
  const curves: Curve[] = [];
  for (let i = 1; i < points.length; i++) {
    const from = points[i - 1];
    const to = points[i];
    if (from && to) curves.push({ kind: 'line', from, to });
  }
  return curves;
}
