import { type Curve, pointAt } from '../../mesher/index.ts';
import { lengthAt, type Ruler } from './arc-length.ts';
import type { Intervals } from './spans.ts';

/** Places looked at on a loop in all, and at least on each piece; a change between two of them is found exactly. */
const onLoop = 4096;
const onPiece = 64;

/**
 * Where along a loop a condition holds; the places where it changes are found by bisection to rounding.
 *
 * A change and back between neighbouring samples (length ÷ 4096, or a 64th of a piece) is not seen.
 *
 * @returns intervals of arc length, not joined over the mark
 */
export function whereHolds(ruler: Ruler, condition: (x: number, y: number) => boolean): Intervals {
  const found: [number, number][] = [];
  ruler.chain.pieces.forEach(({ curve }, piece) => {
    const share = ((ruler.joints[piece + 1] ?? 0) - (ruler.joints[piece] ?? 0)) / ruler.length;
    const steps = Math.max(onPiece, Math.ceil(onLoop * share));
    const holds = (t: number): boolean => condition(...pointAt(curve, t));
    let before = holds(0);
    let start = 0;
    for (let i = 1; i <= steps; i++) {
      const t = i / steps;
      const now = holds(t);
      if (now === before) continue;
      const change = changeBetween(curve, holds, (i - 1) / steps, t);
      if (now) start = change;
      else found.push([lengthAt(ruler, piece, start), lengthAt(ruler, piece, change)]);
      before = now;
    }
    if (before) found.push([lengthAt(ruler, piece, start), lengthAt(ruler, piece, 1)]);
  });
  return found;
}

function changeBetween(curve: Curve, holds: (t: number) => boolean, from: number, to: number): number {
  const first = holds(from);
  let low = from;
  let high = to;
  for (let i = 0; i < 60; i++) {
    const middle = (low + high) / 2;
    if (middle === low || middle === high) break;
    if (holds(middle) === first) low = middle;
    else high = middle;
  }
  // On a line the parameter is the place: nothing is lost by taking the middle of the last two.
  return curve.kind === 'line' ? (low + high) / 2 : high;
}
