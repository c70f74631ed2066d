import { fromHex, fromOklab, type Triple, toOklab } from './oklab.ts';

/** The wash of times, 0 to long, for both schemes; zero sinks into the sheet. Stops as chosen in the design. */

export type Scheme = 'light' | 'dark';

export const WASH: Readonly<Record<Scheme, readonly string[]>> = {
  light: ['#F5F3E8', '#CEDBCA', '#A0C5B8', '#74ADAB', '#53929F', '#3E7592', '#33587F', '#2B3E66', '#22254B'],
  dark: ['#1F2534', '#2B3A52', '#335271', '#3C6D88', '#4D8899', '#66A3A5', '#8FBBAC', '#BCD1B8', '#EBE5CF'],
};

/** The colour at t (0 to 1) of the wash, straight in OKLab between two stops; sRGB channels from 0 to 1. */
export function washAt(scheme: Scheme, t: number): Triple {
  const stops = WASH[scheme];
  const place = Math.min(1, Math.max(0, t)) * (stops.length - 1);
  const index = Math.min(stops.length - 2, Math.floor(place));
  const from = toOklab(fromHex(stops[index] ?? '#000000'));
  const to = toOklab(fromHex(stops[index + 1] ?? '#000000'));
  const part = place - index;
  return fromOklab([
    from[0] + part * (to[0] - from[0]),
    from[1] + part * (to[1] - from[1]),
    from[2] + part * (to[2] - from[2]),
  ]);
}

/** One colour per band, taken at the middle of the band. */
export function bandColours(scheme: Scheme, count: number): Triple[] {
  return Array.from({ length: count }, (_, band) => washAt(scheme, (band + 0.5) / count));
}

/** Whether writing and lines on this colour are to be light. */
export function wantsLightInk(rgb: Triple): boolean {
  return toOklab(rgb)[0] < 0.63;
}
