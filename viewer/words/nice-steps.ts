/** Steps a reader can count in: 1, 2, 2.5 and 5 times a power of ten. */

const LEADS = [1, 2, 2.5, 5] as const;

/** The smallest nice step of which at most `most` fit into `range`. */
export function niceStep(range: number, most: number): number {
  if (!(range > 0) || !Number.isFinite(range)) return 1;
  const raw = range / most;
  const power = 10 ** Math.floor(Math.log10(raw));
  for (const lead of LEADS) if (lead * power >= raw * (1 - 1e-9)) return lead * power;
  return 10 * power;
}

export interface Bands {
  /** Width of one band, in the unit shown. Every fourth edge is heavy and numbered: 4 steps are a nice number too. */
  readonly step: number;
  /** Whole number of bands from 0 to the top; a multiple of 4, so that the scale ends on a numbered edge. */
  readonly count: number;
}

/** 18 to 44 bands that reach from 0 over the longest time. */
export function bandsFor(longest: number): Bands {
  const step = niceStep(longest, 44);
  const needed = longest > 0 ? Math.ceil(longest / step - 1e-9) : 1;
  return { step, count: 4 * Math.ceil(needed / 4) };
}

/** 0, step, 2 step … up to `top`, with the decimals that step needs. */
export function ticksTo(top: number, step: number): number[] {
  const ticks: number[] = [];
  for (let i = 0; i * step <= top * (1 + 1e-9); i++) ticks.push(Number((i * step).toPrecision(12)));
  return ticks;
}

/** Decimals that a multiple of the step needs. */
export function stepDecimals(step: number): number {
  for (let decimals = 0; decimals < 12; decimals++) {
    const scaled = step * 10 ** decimals;
    if (Math.abs(scaled - Math.round(scaled)) < 1e-6 * scaled) return decimals;
  }
  return 12;
}
