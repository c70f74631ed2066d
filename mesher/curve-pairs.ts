import { directionAt, pointAt } from './curves.ts';
import type { Curve, Point } from './domain.ts';
import type { PointIndex } from './point-index.ts';
import type { Chord } from './strands.ts';

/** Where the curves over two chords meet, and what room each may take up. */

export interface Meeting {
  /** Parameters on the first and the second curve. */
  readonly t: number;
  readonly u: number;
  readonly at: Point;
}

/** Newton's method on A(t) = B(u) from where the chords cross; undefined unless it ends inside both chords' spans. */
export function crossingOfCurves(p: Chord, q: Chord, startT: number, startU: number): Meeting | undefined {
  let t = startT;
  let u = startU;
  for (let i = 0; i < 30; i++) {
    const a = pointAt(p.strand.curve, t);
    const b = pointAt(q.strand.curve, u);
    const da = directionAt(p.strand.curve, t);
    const db = directionAt(q.strand.curve, u);
    const rx = b[0] - a[0];
    const ry = b[1] - a[1];
    const det = da[1] * db[0] - da[0] * db[1];
    const stepT = (ry * db[0] - rx * db[1]) / det;
    const stepU = (ry * da[0] - rx * da[1]) / det;
    t += stepT;
    u += stepU;
    if (!(t > p.t0 && t < p.t1 && u > q.t0 && u < q.t1)) return undefined;
    if (Math.abs(stepT) <= 1e-13 * (p.t1 - p.t0) && Math.abs(stepU) <= 1e-13 * (q.t1 - q.t0)) {
      return { t, u, at: pointAt(p.strand.curve, t) };
    }
  }
  return undefined;
}

/**
 * The place where two curves touch without crossing, inside both chords' spans, if they come within the tolerance.
 *
 * Newton's method for parallel tangents, A′ × B′ = 0, at the foot of the common normal, (B − A)·A′ = 0.
 */
export function touchOfCurves(p: Chord, q: Chord, tolerance: number): Meeting | undefined {
  const [curveA, curveB] = [p.strand.curve, q.strand.curve];
  let t = (p.t0 + p.t1) / 2;
  let u = (q.t0 + q.t1) / 2;
  for (let i = 0; i < 30; i++) {
    const a = pointAt(curveA, t);
    const b = pointAt(curveB, u);
    const da = directionAt(curveA, t);
    const db = directionAt(curveB, u);
    const dda = bending(curveA, t);
    const ddb = bending(curveB, u);
    const r: Point = [b[0] - a[0], b[1] - a[1]];
    const f = da[0] * db[1] - da[1] * db[0];
    const g = r[0] * da[0] + r[1] * da[1];
    const ft = dda[0] * db[1] - dda[1] * db[0];
    const fu = da[0] * ddb[1] - da[1] * ddb[0];
    const gt = r[0] * dda[0] + r[1] * dda[1] - da[0] * da[0] - da[1] * da[1];
    const gu = db[0] * da[0] + db[1] * da[1];
    const det = ft * gu - fu * gt;
    const stepT = (f * gu - fu * g) / det;
    const stepU = (ft * g - f * gt) / det;
    t -= stepT;
    u -= stepU;
    if (!(t > p.t0 && t < p.t1 && u > q.t0 && u < q.t1)) return undefined;
    if (Math.abs(stepT) > 1e-13 || Math.abs(stepU) > 1e-13) continue;
    const at = pointAt(curveA, t);
    const to = pointAt(curveB, u);
    if (Math.hypot(at[0] - to[0], at[1] - to[1]) > tolerance) return undefined;
    return { t, u, at };
  }
  return undefined;
}

/** Second derivative by differences: it only has to steer Newton's method. */
function bending(curve: Curve, t: number): Point {
  const low = Math.max(0, t - 1e-5);
  const high = Math.min(1, t + 1e-5);
  const d0 = directionAt(curve, low);
  const d1 = directionAt(curve, high);
  return [(d1[0] - d0[0]) / (high - low), (d1[1] - d0[1]) / (high - low)];
}

/**
 * A convex polygon that holds the curve over a chord: the chord's ends and, on the side where the curve bulges, the
 * place where its end tangents meet, which is twice the sag from the chord (a little more for safety).
 */
export function hull(chord: Chord, points: PointIndex): readonly Point[] {
  const a = points.at(chord.a);
  const b = points.at(chord.b);
  const [dx, dy] = towards(a, b);
  const length = Math.hypot(dx, dy);
  if (chord.sag === 0 || length === 0) return [a, b];
  const out = tangentFrom(chord, chord.a);
  const back = tangentFrom(chord, chord.b);
  const height = (2.2 * chord.sag) / length;
  const middle: Point = [(a[0] + b[0]) / 2, (a[1] + b[1]) / 2];
  const left: Point = [middle[0] - height * dy, middle[1] + height * dx];
  const right: Point = [middle[0] + height * dy, middle[1] - height * dx];
  const startsLeft = dx * out[1] - dy * out[0] > 0;
  const endsLeft = dx * back[1] - dy * back[0] > 0;
  if (startsLeft && endsLeft) return [a, b, left];
  if (!startsLeft && !endsLeft) return [a, right, b];
  return [a, right, b, left];
}

/** True when a line parallel or square to some side parts the two convex polygons (separating axis theorem). */
export function areApart(p: readonly Point[], q: readonly Point[]): boolean {
  for (const polygon of [p, q]) {
    for (let i = 0; i < polygon.length; i++) {
      const [dx, dy] = towards(polygon[i], polygon[(i + 1) % polygon.length]);
      if (parts(-dy, dx, p, q) || parts(dx, dy, p, q)) return true;
    }
  }
  return false;
}

function parts(nx: number, ny: number, p: readonly Point[], q: readonly Point[]): boolean {
  let [pLow, pHigh, qLow, qHigh] = [1 / 0, -1 / 0, 1 / 0, -1 / 0];
  for (const [x, y] of p) {
    pLow = Math.min(pLow, nx * x + ny * y);
    pHigh = Math.max(pHigh, nx * x + ny * y);
  }
  for (const [x, y] of q) {
    qLow = Math.min(qLow, nx * x + ny * y);
    qHigh = Math.max(qHigh, nx * x + ny * y);
  }
  return pHigh < qLow || qHigh < pLow;
}

export function towards(from: Point, to: Point): Point {
  return [to[0] - from[0], to[1] - from[1]];
}

export function tangentFrom(chord: Chord, v: number): Point {
  const curve: Curve = chord.strand.curve;
  const starts = chord.a === v;
  const d = directionAt(curve, starts ? chord.t0 : chord.t1);
  return starts ? d : [-d[0], -d[1]];
}

/** Angle from a to b, counter-clockwise, −π to π. */
export function turnBetween(a: Point, b: Point): number {
  return Math.atan2(a[0] * b[1] - a[1] * b[0], a[0] * b[0] + a[1] * b[1]);
}
