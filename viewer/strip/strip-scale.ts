import type { LoopView, WallView } from '../../src/service/contract.ts';
import { niceStep } from '../words/nice-steps.ts';

/** Where things stand on the unrolled walls: pure numbers, no drawing. */

export interface StripRow {
  readonly loops: readonly { readonly loop: LoopView; readonly left: number }[];
}

/** The loops in rows, all at one scale; posts share rows as long as they fit. `gap` and `width` in px. */
export function stripRows(
  loops: readonly LoopView[],
  width: number,
  gap: number,
): { rows: StripRow[]; scale: number } {
  const longest = loops.reduce((most, loop) => Math.max(most, loop.length), 0);
  const scale = longest > 0 ? width / longest : 1;
  const rows: { loops: { loop: LoopView; left: number }[]; end: number }[] = [];
  for (const loop of loops) {
    const size = loop.length * scale;
    const last = rows.at(-1);
    if (last !== undefined && last.end + gap + size <= width) {
      last.loops.push({ loop, left: last.end + gap });
      last.end += gap + size;
    } else rows.push({ loops: [{ loop, left: 0 }], end: size });
  }
  return { rows, scale };
}

/** Pieces of a stretch by arc length on its loop: two if it runs over the mark. */
export function spansOf(wall: WallView, length: number): readonly (readonly [number, number])[] {
  if (wall.to > wall.from) return [[wall.from, wall.to]];
  const pieces: [number, number][] = [
    [wall.from, length],
    [0, wall.to],
  ];
  return pieces.filter(([from, to]) => to > from);
}

/** Share caught per length at middles of chords: arc length from the start of the stretch, and value. */
export function fluxCurve(wall: WallView): readonly (readonly [s: number, value: number])[] {
  const { flux, points } = wall;
  if (flux === undefined) return [];
  const curve: [number, number][] = [];
  let sum = 0;
  for (let i = 0; i + 1 < points.length; i++) {
    const [a, b] = [points[i], points[i + 1]];
    const value = flux[i];
    if (a === undefined || b === undefined || value === undefined) continue;
    const chord = Math.hypot(b[0] - a[0], b[1] - a[1]);
    curve.push([sum + chord / 2, value]);
    sum += chord;
  }
  return curve;
}

/**
 * Top of the scale for the share caught per length. The flux has no bound where a pad ends at wall that turns back,
 * so the scale reaches a fifth above what all but a twelfth of the busiest stretch stays below; the rest is cut off.
 */
export function fluxTop(walls: readonly WallView[]): { readonly top: number; readonly cut: boolean } {
  let wanted = 0;
  let most = 0;
  for (const wall of walls) {
    const parts = chordFluxes(wall).sort((a, b) => a.value - b.value);
    const length = parts.reduce((sum, part) => sum + part.chord, 0);
    let below = 0;
    for (const part of parts) {
      most = Math.max(most, part.value);
      if (below < (length * 11) / 12) wanted = Math.max(wanted, 1.2 * part.value);
      below += part.chord;
    }
  }
  wanted = Math.min(most, wanted);
  // An even number of steps, so that the middle of the scale is a nice number too.
  const step = 2 * niceStep(wanted, 4);
  const top = wanted > 0 ? step * Math.ceil(wanted / step - 1e-9) : 0;
  return { top, cut: most > top };
}

function chordFluxes(wall: WallView): { chord: number; value: number }[] {
  return wall.points.slice(1).flatMap(([x, y], i) => {
    const [fx, fy] = wall.points[i] ?? [x, y];
    const value = wall.flux?.[i];
    return value === undefined ? [] : [{ chord: Math.hypot(x - fx, y - fy), value }];
  });
}
