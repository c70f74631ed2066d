import { type MeasureProgram, type Multipliers, solveMeasureProgram } from './linear-program.ts';

/** What is known of a positive measure μ on λ ≥ `least`: intervals of its total and of some of its integrals. */
export interface KnownMeasure {
  readonly least: number;
  readonly total: { readonly low: number; readonly high: number };
  readonly integrals: readonly KnownIntegral[];
}

/** low ≤ ∫dμ/(λ + shift)^power ≤ high. */
export interface KnownIntegral {
  readonly shift: number;
  readonly power: 1 | 2;
  readonly low: number;
  readonly high: number;
}

/** Points of the linear program: λ/least = e^x, x up to `reach`, and infinity. */
const programPoints = 400;
const programReach = Math.log(1e5);
/** The multipliers are checked at so many points, up to where they can no longer change. */
const checkPoints = 20_000;
const checkReach = Math.log(1e9);

/** Where a program has no answer on its points, intervals are widened by these parts in turn to find multipliers. */
const widenings = [0, 1e-7, 1e-5, 1e-3] as const;

/**
 * The largest (sign 1) or smallest (sign −1) value ∫e^(−λt)dμ can have, from above (below): the multipliers of a linear
 * program give a₀ + Σa_k/(λ + s_k)^p ≥ ±e^(−λt), checked between grid points too and repaired by a₀. Any multipliers
 * will do for that, however they were found.
 *
 * Between points e^x: second derivatives in x are at most 0.31 for e^(−λt) (the largest |τ² − τ|e^(−τ), τ = λt) and
 * p² for ((least + s)/(λ + s))^p.
 *
 * @returns the bound as a function of t and sign; the total, or 0, when the program has no answer
 * Source: METHODS 6; Krein & Nudelman 1977 (Markov–Krein, recalled).
 */
export function survivalBound(known: KnownMeasure): (t: number, sign: 1 | -1) => number {
  const { least, total, integrals } = known;
  const scale = integrals.map(({ shift, power }) => (least + shift) ** power);
  const tabulate = (lambdas: Float64Array): Float64Array[] =>
    integrals.map(({ shift, power }) =>
      lambdas.map((lambda) => {
        const part = (least + shift) / (lambda + shift);
        return power === 2 ? part * part : part;
      }),
    );
  const points = Float64Array.from({ length: programPoints }, (_, j) =>
    j === programPoints - 1
      ? Number.POSITIVE_INFINITY
      : least * Math.exp(programReach * (j / (programPoints - 2)) ** 2),
  );
  const rows = [points.map(() => 1), ...tabulate(points)];
  const low = [total.low, ...integrals.map((one, k) => one.low * scale[k])];
  const high = [total.high, ...integrals.map((one, k) => one.high * scale[k])];
  const step = checkReach / checkPoints;
  const checked = Float64Array.from({ length: checkPoints + 1 }, (_, j) => least * Math.exp(step * j));
  const checkedRows = tabulate(checked);
  return (t, sign) => {
    const objective = points.map((lambda) => sign * Math.exp(-lambda * t));
    const found = multipliersOf({ objective, rows, low, high });
    if (!found) return sign > 0 ? total.high : 0;
    const { ofLow, ofHigh } = found;
    const [ofTotal, ...weight] = ofLow.map((value, k) => value + ofHigh[k]);
    const value = new Float64Array(checked.length).fill(ofTotal);
    // Between the points, and beyond the last one, where every term is less than it was there.
    let between = 0.31;
    for (let k = 0; k < weight.length; k++) {
      between += Math.abs(weight[k]) * integrals[k].power ** 2;
      const row = checkedRows[k];
      for (let j = 0; j < value.length; j++) value[j] += weight[k] * row[j];
    }
    let lacking = Math.max(0, -ofTotal);
    for (let j = 0; j < value.length; j++) {
      lacking = Math.max(lacking, sign * Math.exp(-checked[j] * t) - value[j]);
    }
    lacking += between * ((step * step) / 8 + 2 * Math.exp(-checkReach));
    let bound = lacking * total.high;
    for (let k = 0; k < ofLow.length; k++) bound += ofHigh[k] * high[k] + ofLow[k] * low[k];
    return sign * bound;
  };
}

function multipliersOf(program: MeasureProgram): Multipliers | undefined {
  for (const part of widenings) {
    const found = solveMeasureProgram({
      ...program,
      low: program.low.map((value) => value - part * Math.abs(value)),
      high: program.high.map((value) => value + part * Math.abs(value)),
    });
    if (found) return found;
  }
  return undefined;
}

/** Bounds of the time by which the share `left` of all is left, from bounds of the survival. */
export function timeBounds(
  upper: (t: number) => number,
  lower: (t: number) => number,
  left: number,
  guess: number,
): { readonly low: number; readonly high: number } {
  return { low: lastAbove(lower, left, guess), high: firstBelow(upper, left, guess) };
}

const places = 1e-5;

/** A time at which the survival is at least `left`, as late as can be shown. */
function lastAbove(lower: (t: number) => number, left: number, guess: number): number {
  let good = 0;
  let bad = guess;
  for (let tries = 0; lower(bad) >= left && tries < 60; tries++) {
    good = bad;
    bad *= 1.5;
  }
  while (bad - good > places * bad) {
    const middle = (good + bad) / 2;
    if (lower(middle) >= left) good = middle;
    else bad = middle;
  }
  return good;
}

/** A time at which it is at most `left`, as early as can be shown. */
function firstBelow(upper: (t: number) => number, left: number, guess: number): number {
  let good = guess;
  let bad = 0;
  for (let tries = 0; upper(good) > left; tries++) {
    if (tries === 60) return Number.POSITIVE_INFINITY;
    bad = good;
    good *= 1.5;
  }
  while (good - bad > places * good) {
    const middle = (good + bad) / 2;
    if (upper(middle) <= left) good = middle;
    else bad = middle;
  }
  return good;
}
