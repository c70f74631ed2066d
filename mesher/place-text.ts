import type { Point } from './domain.ts';

/** A place as messages name it: six significant digits, enough to find it in the drawing. */
export function placeText([x, y]: Point): string {
  return `(${Number(x.toPrecision(6))}, ${Number(y.toPrecision(6))})`;
}
