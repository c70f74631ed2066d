import type { Walks } from './walk.ts';

/** A mean over walkers, with its standard error and what is known of the bias of the steps. */
export interface WalkMean {
  readonly value: number;
  readonly standardError: number;
  /** Difference between the two step sizes: what is left of it in `value` is less. 0 where steps are exact. */
  readonly bias: number;
}

export interface WalkSummary {
  /** Walkers of the finer step. */
  readonly count: number;
  readonly mean: WalkMean;
  /** By exit. */
  readonly shares: readonly WalkMean[];
  readonly lost: WalkMean;
  readonly steps: number;
}

/**
 * Joins ranges of walkers, given in the order of their numbers, into means. With both step sizes the value is their
 * extrapolation for an error in proportion to the time step, (4·fine − coarse)/3 (Talay & Tubaro 1990).
 *
 * @param coarse empty where all steps are exact
 */
export function summarise(fine: readonly Walks[], coarse: readonly Walks[], exitCount: number): WalkSummary {
  const both = (reading: (walks: Walks, i: number) => number): WalkMean => {
    const f = weightedMean(fine, reading);
    const c = weightedMean(coarse, reading);
    if (c.count === 0) return { value: f.value, standardError: f.error, bias: 0 };
    return {
      value: (4 * f.value - c.value) / 3,
      standardError: Math.hypot(4 * f.error, c.error) / 3,
      bias: Math.abs(f.value - c.value),
    };
  };
  return {
    count: fine.reduce((sum, { times }) => sum + times.length, 0),
    mean: both(({ times }, i) => times[i]),
    shares: Array.from({ length: exitCount }, (_, exit) => both(({ ends }, i) => (ends[i] === exit ? 1 : 0))),
    lost: both(({ ends }, i) => (ends[i] < 0 ? 1 : 0)),
    steps: [...fine, ...coarse].reduce((sum, { steps }) => sum + steps, 0),
  };
}

/**
 * Σwf/Σw and its standard error, that of a ratio of means: √(n/(n−1)·Σw²(f − mean)²)/Σw (Cochran 1977).
 */
function weightedMean(
  parts: readonly Walks[],
  reading: (walks: Walks, i: number) => number,
): { count: number; value: number; error: number } {
  let count = 0;
  let weight = 0;
  let sum = 0;
  for (const part of parts) {
    for (let i = 0; i < part.times.length; i++) {
      count++;
      weight += part.weights[i];
      sum += part.weights[i] * reading(part, i);
    }
  }
  const value = sum / weight;
  let squares = 0;
  for (const part of parts) {
    for (let i = 0; i < part.times.length; i++) {
      squares += (part.weights[i] * (reading(part, i) - value)) ** 2;
    }
  }
  return { count, value, error: Math.sqrt((count / (count - 1)) * squares) / weight };
}
