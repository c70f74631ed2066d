import { pointAt } from './curves.ts';
import type { Curve, Point } from './domain.ts';
import type { HalfEdgeMesh } from './half-edge.ts';

/** Where on its curve a segment is split. */
export interface SplitPlace {
  readonly t: number;
  readonly at: Point;
}

/**
 * The middle of a segment, or, where one end is a sharp corner, the place at reach·2^k from that corner nearest to
 * the middle (concentric shells: Ruppert 1995).
 *
 * @param reach per vertex: shell unit of a sharp corner, 0 elsewhere; vertices beyond its end are no corners
 */
export function splitPlace(mesh: HalfEdgeMesh, s: number, reach: Float64Array): SplitPlace {
  const { xy, segmentSpan, segmentFrom, segmentTo } = mesh;
  const curve = mesh.curves[mesh.segmentCurve[s]];
  const t0 = segmentSpan[2 * s];
  const t1 = segmentSpan[2 * s + 1];
  const a = segmentFrom[s];
  const b = segmentTo[s];
  const unitA = a < reach.length ? reach[a] : 0;
  const unitB = b < reach.length ? reach[b] : 0;
  let share = 0.5;
  if (unitA > 0 !== unitB > 0) {
    const length = Math.hypot(xy[2 * a] - xy[2 * b], xy[2 * a + 1] - xy[2 * b + 1]);
    const unit = Math.max(unitA, unitB);
    // The one power of two with unit·2^k between a third and two thirds of the length.
    const radius = unit * 2 ** Math.floor(Math.log2(((2 / 3) * length * (1 + 1e-9)) / unit));
    if (curve.kind === 'line') share = unitA > 0 ? radius / length : 1 - radius / length;
    else
      return onShell(curve, t0, t1, unitA > 0, radius, [xy[2 * a], xy[2 * a + 1], xy[2 * b], xy[2 * b + 1]]);
  }
  const t = t0 + share * (t1 - t0);
  if (curve.kind !== 'line') return { t, at: pointAt(curve, t) };
  // From the ends as they are, not from the curve: points moved together within the tolerance stay in line.
  const x = xy[2 * a] + share * (xy[2 * b] - xy[2 * a]);
  const y = xy[2 * a + 1] + share * (xy[2 * b + 1] - xy[2 * a + 1]);
  return { t, at: [x, y] };
}

/** The place between t0 and t1 at straight distance `radius` from the corner, by bisection. */
function onShell(
  curve: Curve,
  t0: number,
  t1: number,
  cornerFirst: boolean,
  radius: number,
  ends: readonly [number, number, number, number],
): SplitPlace {
  let near = cornerFirst ? t0 : t1;
  let far = cornerFirst ? t1 : t0;
  const x = cornerFirst ? ends[0] : ends[2];
  const y = cornerFirst ? ends[1] : ends[3];
  for (let i = 0; i < 52; i++) {
    const t = (near + far) / 2;
    const p = pointAt(curve, t);
    if (Math.hypot(p[0] - x, p[1] - y) < radius) near = t;
    else far = t;
  }
  const t = (near + far) / 2;
  return { t, at: pointAt(curve, t) };
}
