import type { Curve, Point } from './domain.ts';

/** Lines, elliptic arcs and cubic Bézier curves: places, lengths, parts. Parameters run from 0 to 1. */

/** The point at parameter `t`; exactly `from` at 0 and `to` at 1. */
export function pointAt(curve: Curve, t: number): Point {
  if (t === 0) return curve.from;
  if (t === 1) return curve.to;
  switch (curve.kind) {
    case 'line':
      return [
        curve.from[0] + t * (curve.to[0] - curve.from[0]),
        curve.from[1] + t * (curve.to[1] - curve.from[1]),
      ];
    case 'arc': {
      const angle = curve.start + t * curve.sweep;
      const a = curve.radii[0] * Math.cos(angle);
      const b = curve.radii[1] * Math.sin(angle);
      const c = Math.cos(curve.turned);
      const s = Math.sin(curve.turned);
      return [curve.centre[0] + c * a - s * b, curve.centre[1] + s * a + c * b];
    }
    case 'cubic': {
      const w = bernstein(t);
      const [c1, c2] = curve.controls;
      return [
        w[0] * curve.from[0] + w[1] * c1[0] + w[2] * c2[0] + w[3] * curve.to[0],
        w[0] * curve.from[1] + w[1] * c1[1] + w[2] * c2[1] + w[3] * curve.to[1],
      ];
    }
  }
}

/** The derivative with respect to the parameter at `t`, length unit; its length is the speed. */
export function directionAt(curve: Curve, t: number): Point {
  switch (curve.kind) {
    case 'line':
      return [curve.to[0] - curve.from[0], curve.to[1] - curve.from[1]];
    case 'arc': {
      const angle = curve.start + t * curve.sweep;
      const a = -curve.radii[0] * Math.sin(angle) * curve.sweep;
      const b = curve.radii[1] * Math.cos(angle) * curve.sweep;
      const c = Math.cos(curve.turned);
      const s = Math.sin(curve.turned);
      return [c * a - s * b, s * a + c * b];
    }
    case 'cubic': {
      const [c1, c2] = curve.controls;
      const u = 1 - t;
      const w0 = 3 * u * u;
      const w1 = 6 * u * t;
      const w2 = 3 * t * t;
      const along = (i: 0 | 1): number =>
        w0 * (c1[i] - curve.from[i]) + w1 * (c2[i] - c1[i]) + w2 * (curve.to[i] - c2[i]);
      return [along(0), along(1)];
    }
  }
}

/**
 * Length of the curve from `t0` to `t1` ≥ `t0`, to about 1e-13 of itself.
 *
 * Source: arc length integral of the speed by Gauss–Legendre quadrature with halving (Davis & Rabinowitz 1984).
 */
export function curveLength(curve: Curve, t0 = 0, t1 = 1): number {
  if (curve.kind === 'line') return (t1 - t0) * Math.hypot(...directionAt(curve, 0));
  if (curve.kind === 'arc' && curve.radii[0] === curve.radii[1]) {
    return (t1 - t0) * Math.abs(curve.sweep) * curve.radii[0];
  }
  return halvedLength(curve, t0, t1, gaussLength(curve, t0, t1), 0);
}

/** The parameter at which the length from the start of the curve is `s`, clamped to 0..1. */
export function parameterAtLength(curve: Curve, s: number): number {
  const whole = curveLength(curve);
  if (s <= 0) return 0;
  if (s >= whole) return 1;
  if (curve.kind === 'line' || (curve.kind === 'arc' && curve.radii[0] === curve.radii[1])) return s / whole;
  let low = 0;
  let high = 1;
  let t = s / whole;
  for (let i = 0; i < 60; i++) {
    const error = curveLength(curve, 0, t) - s;
    if (Math.abs(error) <= 1e-14 * whole) return t;
    if (error > 0) high = t;
    else low = t;
    const speed = Math.hypot(...directionAt(curve, t));
    const newton = t - error / speed;
    t = newton > low && newton < high ? newton : (low + high) / 2;
  }
  return t;
}

/** The part of the curve from `t0` to `t1` > `t0`, as a curve of its own; ends are `pointAt` of the whole. */
export function partOf(curve: Curve, t0: number, t1: number): Curve {
  if (t0 === 0 && t1 === 1) return curve;
  const from = pointAt(curve, t0);
  const to = pointAt(curve, t1);
  switch (curve.kind) {
    case 'line':
      return { kind: 'line', from, to };
    case 'arc':
      return { ...curve, from, to, start: curve.start + t0 * curve.sweep, sweep: (t1 - t0) * curve.sweep };
    case 'cubic': {
      // A Bézier curve's control point is its start plus a third of the derivative there.
      const d0 = directionAt(curve, t0);
      const d1 = directionAt(curve, t1);
      const third = (t1 - t0) / 3;
      return {
        kind: 'cubic',
        from,
        to,
        controls: [
          [from[0] + third * d0[0], from[1] + third * d0[1]],
          [to[0] - third * d1[0], to[1] - third * d1[1]],
        ],
      };
    }
  }
}

/** The same curve run the other way. */
export function reversed(curve: Curve): Curve {
  switch (curve.kind) {
    case 'line':
      return { kind: 'line', from: curve.to, to: curve.from };
    case 'arc':
      return {
        ...curve,
        from: curve.to,
        to: curve.from,
        start: curve.start + curve.sweep,
        sweep: -curve.sweep,
      };
    case 'cubic':
      return { ...curve, from: curve.to, to: curve.from, controls: [curve.controls[1], curve.controls[0]] };
  }
}

/** The point of the curve nearest to `point`, and how far it is. */
export function nearestParameter(curve: Curve, point: Point): { t: number; distance: number } {
  if (curve.kind === 'line') {
    const d = directionAt(curve, 0);
    const square = d[0] * d[0] + d[1] * d[1];
    const along = (point[0] - curve.from[0]) * d[0] + (point[1] - curve.from[1]) * d[1];
    const t = square > 0 ? Math.min(1, Math.max(0, along / square)) : 0;
    return { t, distance: distanceAt(curve, t, point) };
  }
  const samples = 64;
  let best = 0;
  let bestDistance = Number.POSITIVE_INFINITY;
  for (let i = 0; i <= samples; i++) {
    const distance = distanceAt(curve, i / samples, point);
    if (distance < bestDistance) {
      best = i;
      bestDistance = distance;
    }
  }
  return goldenSection(curve, point, Math.max(0, best - 1) / samples, Math.min(samples, best + 1) / samples);
}

/**
 * Largest distance between the part of the curve from `t0` to `t1` and the chord across it, in the length unit.
 *
 * An arc of at most half a turn is farthest from its chord at its middle parameter (an affine image of a circle);
 * a cubic where the derivative of its height over the chord, a quadratic, is zero.
 */
export function chordSag(curve: Curve, t0: number, t1: number): number {
  if (curve.kind === 'line') return 0;
  const a = pointAt(curve, t0);
  const b = pointAt(curve, t1);
  if (curve.kind === 'arc') return heightOver(a, b, pointAt(curve, (t0 + t1) / 2));
  const part = partOf(curve, t0, t1);
  if (part.kind !== 'cubic') return 0;
  const dx = b[0] - a[0];
  const dy = b[1] - a[1];
  const over = (p: Point): number => dx * (p[1] - a[1]) - dy * (p[0] - a[0]);
  const h1 = over(part.controls[0]);
  const h2 = over(part.controls[1]);
  // Height ∝ 3u²t·h1 + 3ut²·h2 with u = 1 − t; derivative/3 = h1 + 2(h2 − 2h1)t + 3(h1 − h2)t².
  let sag = 0;
  for (const t of quadraticRoots(3 * (h1 - h2), 2 * (h2 - 2 * h1), h1)) {
    if (t > 0 && t < 1) sag = Math.max(sag, heightOver(a, b, pointAt(part, t)));
  }
  return sag;
}

function bernstein(t: number): readonly [number, number, number, number] {
  const u = 1 - t;
  return [u * u * u, 3 * u * u * t, 3 * u * t * t, t * t * t];
}

function distanceAt(curve: Curve, t: number, point: Point): number {
  const p = pointAt(curve, t);
  return Math.hypot(p[0] - point[0], p[1] - point[1]);
}

/** Distance of `p` from the chord a–b, or from `a` where the chord has no length. */
function heightOver(a: Point, b: Point, p: Point): number {
  const length = Math.hypot(b[0] - a[0], b[1] - a[1]);
  if (length === 0) return Math.hypot(p[0] - a[0], p[1] - a[1]);
  return Math.abs((b[0] - a[0]) * (p[1] - a[1]) - (b[1] - a[1]) * (p[0] - a[0])) / length;
}

function quadraticRoots(a: number, b: number, c: number): readonly number[] {
  if (a === 0) return b === 0 ? [] : [-c / b];
  const discriminant = b * b - 4 * a * c;
  if (discriminant < 0) return [];
  // The stable pair of formulas: no cancellation in either root.
  const q = -0.5 * (b + (b < 0 ? -1 : 1) * Math.sqrt(discriminant));
  return q === 0 ? [0] : [q / a, c / q];
}

function goldenSection(
  curve: Curve,
  point: Point,
  from: number,
  to: number,
): { t: number; distance: number } {
  const ratio = (Math.sqrt(5) - 1) / 2;
  let low = from;
  let high = to;
  for (let i = 0; i < 70 && high - low > 1e-15; i++) {
    const t1 = high - ratio * (high - low);
    const t2 = low + ratio * (high - low);
    if (distanceAt(curve, t1, point) <= distanceAt(curve, t2, point)) high = t2;
    else low = t1;
  }
  // The distance is flat to second order there; one step on its derivative gives the rest of the digits.
  let t = (low + high) / 2;
  for (const end of [from, to]) if (distanceAt(curve, end, point) < distanceAt(curve, t, point)) t = end;
  return { t: polishNearest(curve, point, t), distance: distanceAt(curve, t, point) };
}

/** Secant steps on (p(t) − point)·p′(t) = 0, kept only while they stay inside and close in. */
function polishNearest(curve: Curve, point: Point, start: number): number {
  const slope = (t: number): number => {
    const p = pointAt(curve, t);
    const d = directionAt(curve, t);
    return (p[0] - point[0]) * d[0] + (p[1] - point[1]) * d[1];
  };
  let t = start;
  for (let i = 0; i < 4; i++) {
    const h = 1e-5;
    const curvature =
      (slope(Math.min(1, t + h)) - slope(Math.max(0, t - h))) / (Math.min(1, t + h) - Math.max(0, t - h));
    const next = t - slope(t) / curvature;
    if (!(curvature > 0 && next >= 0 && next <= 1) || Math.abs(next - t) > 1e-3) return t;
    t = next;
  }
  return t;
}

/** Nodes and weights of the 8-point Gauss–Legendre rule on [−1, 1] (Abramowitz & Stegun 1964, table 25.4). */
const gaussNodes = [0.1834346424956498, 0.525532409916329, 0.7966664774136267, 0.9602898564975363] as const;
const gaussWeights = [0.362683783378362, 0.3137066458778873, 0.2223810344533745, 0.1012285362903763] as const;

function gaussLength(curve: Curve, t0: number, t1: number): number {
  const middle = (t0 + t1) / 2;
  const half = (t1 - t0) / 2;
  let sum = 0;
  for (let i = 0; i < 4; i++) {
    const offset = half * (gaussNodes[i] ?? 0);
    const speed =
      Math.hypot(...directionAt(curve, middle - offset)) + Math.hypot(...directionAt(curve, middle + offset));
    sum += (gaussWeights[i] ?? 0) * speed;
  }
  return half * sum;
}

function halvedLength(curve: Curve, t0: number, t1: number, whole: number, depth: number): number {
  const middle = (t0 + t1) / 2;
  const first = gaussLength(curve, t0, middle);
  const second = gaussLength(curve, middle, t1);
  if (depth >= 24 || Math.abs(first + second - whole) <= 1e-14 * whole) return first + second;
  return (
    halvedLength(curve, t0, middle, first, depth + 1) + halvedLength(curve, middle, t1, second, depth + 1)
  );
}
