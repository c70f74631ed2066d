import { type Curve, chordSag, type Point, pointAt } from '../../mesher/index.ts';

/** Boxes compared before giving up: two curves that run along each other would never end. */
const mostBoxes = 4000;

interface Part {
  readonly curve: Curve;
  readonly t0: number;
  readonly t1: number;
}

/**
 * Places where two curves cross, to about the tolerance; of curves that run along each other only some.
 *
 * For grading a mesh, not for deciding what is inside: halving of boxes around chords (Lane & Riesenfeld 1980), the
 * box of a chord widened by the curve's distance from it.
 */
export function crossings(a: Curve, b: Curve, tolerance: number): Point[] {
  const found: Point[] = [];
  const close = Math.max(tolerance, 1e-14 * (sizeOf(a) + sizeOf(b)));
  const stack: (readonly [Part, Part])[] = [
    [
      { curve: a, t0: 0, t1: 1 },
      { curve: b, t0: 0, t1: 1 },
    ],
  ];
  for (let count = 0; count < mostBoxes; count++) {
    const pair = stack.pop();
    if (!pair) break;
    const boxes = pair.map(boxOf);
    const [p, q] = boxes;
    if (!p || !q || apart(p, q)) continue;
    const straight = crossingOfLines(pair);
    if (straight !== 'curved') {
      if (straight) found.push(straight);
    } else if (Math.max(p[2] - p[0], p[3] - p[1]) <= close && Math.max(q[2] - q[0], q[3] - q[1]) <= close) {
      found.push([(p[0] + p[2]) / 2, (p[1] + p[3]) / 2]);
    } else {
      for (const one of halves(pair[0])) for (const other of halves(pair[1])) stack.push([one, other]);
    }
  }
  return found;
}

/** Where the chords cross, if both parts are straight to rounding. */
function crossingOfLines([one, other]: readonly [Part, Part]): Point | undefined | 'curved' {
  const [a, b] = [pointAt(one.curve, one.t0), pointAt(one.curve, one.t1)];
  const [c, d] = [pointAt(other.curve, other.t0), pointAt(other.curve, other.t1)];
  const flat = (part: Part, from: Point, to: Point): boolean =>
    part.curve.kind === 'line' ||
    chordSag(part.curve, part.t0, part.t1) <= 1e-13 * Math.hypot(to[0] - from[0], to[1] - from[1]);
  if (!flat(one, a, b) || !flat(other, c, d)) return 'curved';
  const [ux, uy] = [b[0] - a[0], b[1] - a[1]];
  const [vx, vy] = [d[0] - c[0], d[1] - c[1]];
  const cross = ux * vy - uy * vx;
  if (Math.abs(cross) <= 1e-12 * Math.hypot(ux, uy) * Math.hypot(vx, vy)) return undefined;
  const s = ((c[0] - a[0]) * vy - (c[1] - a[1]) * vx) / cross;
  const t = ((c[0] - a[0]) * uy - (c[1] - a[1]) * ux) / cross;
  const over = 1e-9;
  return s >= -over && s <= 1 + over && t >= -over && t <= 1 + over
    ? [a[0] + s * ux, a[1] + s * uy]
    : undefined;
}

function halves(part: Part): readonly Part[] {
  if (part.curve.kind === 'line') return [part];
  const middle = (part.t0 + part.t1) / 2;
  return [
    { ...part, t1: middle },
    { ...part, t0: middle },
  ];
}

type Box = readonly [x0: number, y0: number, x1: number, y1: number];

function boxOf({ curve, t0, t1 }: Part): Box {
  const [a, b] = [pointAt(curve, t0), pointAt(curve, t1)];
  const around = chordSag(curve, t0, t1);
  return [
    Math.min(a[0], b[0]) - around,
    Math.min(a[1], b[1]) - around,
    Math.max(a[0], b[0]) + around,
    Math.max(a[1], b[1]) + around,
  ];
}

function apart(p: Box, q: Box): boolean {
  return p[2] < q[0] || q[2] < p[0] || p[3] < q[1] || q[3] < p[1];
}

function sizeOf({ from, to }: Curve): number {
  return Math.hypot(to[0] - from[0], to[1] - from[1]);
}
