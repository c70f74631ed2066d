import { type Curve, nearestParameter, type Point, pointAt } from '../../mesher/index.ts';
import { boxOf } from '../importers/found-shape.ts';

interface Line {
  readonly name: string;
  readonly shape: { readonly curves: readonly Curve[] };
}

/** Places looked at on each curve before the gap is narrowed down. */
const samples = 12;
/** Above this many pairs of place and curve the gap is not looked for: it is only a remark. */
const mostPairs = 200_000;

/** The narrowest place between two lines of a drawing, in the length unit; undefined for one line or very many. */
export function smallestGap(
  lines: readonly Line[],
): { readonly gap: number; readonly between: readonly [string, string] } | undefined {
  const all = lines.map((line) => ({ ...line, box: boxOf(line.shape.curves) }));
  const count = all.reduce((sum, { shape }) => sum + shape.curves.length, 0);
  if (count * count * samples > mostPairs) return undefined;
  let gap = Number.POSITIVE_INFINITY;
  let between: readonly [string, string] | undefined;
  all.forEach((a, i) => {
    for (const b of all.slice(i + 1)) {
      if (boxDistance(a.box, b.box) >= gap && between) continue;
      const here = distanceBetween(a.shape.curves, b.shape.curves);
      if (here < gap) [gap, between] = [here, [a.name, b.name]];
    }
  });
  return between ? { gap, between } : undefined;
}

function distanceBetween(a: readonly Curve[], b: readonly Curve[]): number {
  let best = Number.POSITIVE_INFINITY;
  for (const [from, to] of [
    [a, b],
    [b, a],
  ] as const) {
    for (const curve of from) {
      for (let i = 0; i <= samples; i++) {
        const start = pointAt(curve, i / samples);
        for (const other of to) {
          const { t, distance } = nearestParameter(other, start);
          if (distance < best) best = narrowed(curve, other, t, distance);
        }
      }
    }
  }
  return best;
}

/** Goes back and forth between two curves, each time to the nearest point: the distance falls to a local least. */
function narrowed(a: Curve, b: Curve, t: number, distance: number): number {
  let place: Point = pointAt(b, t);
  let best = distance;
  for (let i = 0; i < 40; i++) {
    const other = i % 2 === 0 ? a : b;
    const near = nearestParameter(other, place);
    place = pointAt(other, near.t);
    if (best - near.distance <= 1e-9 * best) return Math.min(best, near.distance);
    best = near.distance;
  }
  return best;
}

type Box = readonly [low: Point, high: Point];

function boxDistance(a: Box, b: Box): number {
  const apart = (i: 0 | 1): number => Math.max(0, a[0][i] - b[1][i], b[0][i] - a[1][i]);
  return Math.hypot(apart(0), apart(1));
}
