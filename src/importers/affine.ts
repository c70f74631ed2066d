import type { Curve, Point } from '../../mesher/index.ts';

/** Affine maps of the plane in the order of SVG's matrix(a b c d e f): x′ = ax + cy + e, y′ = bx + dy + f. */
export type Matrix = readonly [a: number, b: number, c: number, d: number, e: number, f: number];

export const identity: Matrix = [1, 0, 0, 1, 0, 0];

/** The map that applies `inner` first, then `outer`. */
export function composed(outer: Matrix, inner: Matrix): Matrix {
  const [a, b, c, d, e, f] = outer;
  return [
    a * inner[0] + c * inner[1],
    b * inner[0] + d * inner[1],
    a * inner[2] + c * inner[3],
    b * inner[2] + d * inner[3],
    a * inner[4] + c * inner[5] + e,
    b * inner[4] + d * inner[5] + f,
  ];
}

export function mapPoint(m: Matrix, p: Point): Point {
  return [m[0] * p[0] + m[2] * p[1] + m[4], m[1] * p[0] + m[3] * p[1] + m[5]];
}

/** The curve's image; a map without area (determinant 0) must be refused before. */
export function mapCurve(m: Matrix, curve: Curve): Curve {
  const from = mapPoint(m, curve.from);
  const to = mapPoint(m, curve.to);
  switch (curve.kind) {
    case 'line':
      return { kind: 'line', from, to };
    case 'cubic':
      return {
        kind: 'cubic',
        from,
        to,
        controls: [mapPoint(m, curve.controls[0]), mapPoint(m, curve.controls[1])],
      };
    case 'arc':
      return mapArc(m, curve, from, to);
  }
}

/**
 * An elliptic arc under an affine map, kept as an arc.
 *
 * The image is C′ + u cos θ + v sin θ with conjugate half axes u, v; turning the parameter by τ with
 * tan 2τ = 2u·v ÷ (|u|² − |v|²) makes them principal axes (Rytz's construction in its analytic form; recalled).
 */
function mapArc(m: Matrix, arc: Curve & { kind: 'arc' }, from: Point, to: Point): Curve {
  const cos = Math.cos(arc.turned);
  const sin = Math.sin(arc.turned);
  const linear = (x: number, y: number): Point => [m[0] * x + m[2] * y, m[1] * x + m[3] * y];
  let u = linear(arc.radii[0] * cos, arc.radii[0] * sin);
  let v = linear(-arc.radii[1] * sin, arc.radii[1] * cos);
  const dot = u[0] * v[0] + u[1] * v[1];
  const lu = Math.hypot(...u);
  const lv = Math.hypot(...v);
  const isRight = Math.abs(dot) <= 1e-14 * lu * lv;
  const tau = isRight ? 0 : Math.atan2(2 * dot, (lu - lv) * (lu + lv)) / 2;
  if (tau !== 0) {
    const c = Math.cos(tau);
    const s = Math.sin(tau);
    [u, v] = [
      [c * u[0] + s * v[0], c * u[1] + s * v[1]],
      [c * v[0] - s * u[0], c * v[1] - s * u[1]],
    ];
  }
  const hand = u[0] * v[1] - u[1] * v[0] < 0 ? -1 : 1;
  return {
    kind: 'arc',
    from,
    to,
    centre: mapPoint(m, arc.centre),
    // Of a circle under a similar map both come out equal to the digit: the same products in the same order.
    radii: [Math.hypot(...u), Math.hypot(...v)],
    turned: Math.atan2(u[1], u[0]),
    start: hand * (arc.start - tau),
    sweep: hand * arc.sweep,
  };
}

/** Mirrors a curve in the line y = `height` ÷ 2, as a page read downwards is turned upwards. */
export function turnedUp(curve: Curve, height = 0): Curve {
  return mapCurve([1, 0, 0, -1, 0, height], curve);
}

const oneTransform = /^([a-zA-Z]+)\s*\(([^()]*)\)[\s,]*/;

/** Reads an SVG `transform` attribute (SVG 1.1, 7.6); undefined where it cannot be read. */
export function readTransform(text: string): Matrix | undefined {
  let rest = text.trim();
  let result = identity;
  while (rest !== '') {
    const match = oneTransform.exec(rest);
    if (!match) return undefined;
    const written = (match[2] ?? '').trim();
    const values = written === '' ? [] : written.split(/[\s,]+/).map(Number);
    if (!values.every(Number.isFinite)) return undefined;
    const matrix = elementary(match[1] ?? '', values);
    if (!matrix) return undefined;
    result = composed(result, matrix);
    rest = rest.slice(match[0].length);
  }
  return result;
}

function elementary(name: string, v: readonly number[]): Matrix | undefined {
  const [p = 0, q = 0, r = 0, s = 0, t = 0, u = 0] = v;
  const radians = (p * Math.PI) / 180;
  const is = (...counts: number[]): boolean => counts.includes(v.length);
  switch (name) {
    case 'matrix':
      return is(6) ? [p, q, r, s, t, u] : undefined;
    case 'translate':
      return is(1, 2) ? [1, 0, 0, 1, p, q] : undefined;
    case 'scale':
      return is(1, 2) ? [p, 0, 0, v.length === 2 ? q : p, 0, 0] : undefined;
    case 'rotate': {
      if (!is(1, 3)) return undefined;
      const turn = rotation(p);
      return composed([1, 0, 0, 1, q, r], composed(turn, [1, 0, 0, 1, -q, -r]));
    }
    case 'skewX':
      return is(1) ? [1, 0, Math.tan(radians), 1, 0, 0] : undefined;
    case 'skewY':
      return is(1) ? [1, Math.tan(radians), 0, 1, 0, 0] : undefined;
    default:
      return undefined;
  }
}

/** Turn by `degrees`, exact for multiples of 90 so that such drawings keep straight edges straight. */
function rotation(degrees: number): Matrix {
  const quarters = degrees / 90;
  if (Number.isInteger(quarters)) {
    const [c, s] = (
      [
        [1, 0],
        [0, 1],
        [-1, 0],
        [0, -1],
      ] as const
    )[((quarters % 4) + 4) % 4] ?? [1, 0];
    return [c, s, -s, c, 0, 0];
  }
  const radians = (degrees * Math.PI) / 180;
  const c = Math.cos(radians);
  const s = Math.sin(radians);
  return [c, s, -s, c, 0, 0];
}
