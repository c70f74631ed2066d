import { describe, expect, it } from 'vitest';
import type { Answers } from '../../src/run/answers.ts';
import { withDifferences } from '../../src/run/differences.ts';
import { firstAnswers, solveCase, unitSquare } from './solve-case.ts';

/** Chance of being inside still in the strip 0 < x < 1, both ends absorbing, D = 1 [Carslaw & Jaeger 1959, § 3.3]. */
function inside(x: number, t: number): number {
  let sum = 0;
  for (let n = 1; n < 400; n += 2) {
    sum += (4 / (n * Math.PI)) * Math.sin(n * Math.PI * x) * Math.exp(-((n * Math.PI) ** 2) * t);
  }
  return sum;
}

/** Share from x that has left by the left end by t: 1 − x less its part still to come [the same, § 3.4]. */
function leftBy(x: number, t: number): number {
  let sum = 1 - x;
  for (let n = 1; n < 400; n++) {
    sum -= (2 / (n * Math.PI)) * Math.sin(n * Math.PI * x) * Math.exp(-((n * Math.PI) ** 2) * t);
  }
  return sum;
}

/** The time at which a rising share reaches a part. */
function timeWhen(share: (t: number) => number, part: number): number {
  let [low, high] = [0, 50];
  for (let k = 0; k < 80; k++) {
    const middle = (low + high) / 2;
    if (share(middle) < part) low = middle;
    else high = middle;
  }
  return low;
}

const x = 0.25;
/** Mean and second moment in the strip: x(1−x)/2 and x(1−x)(1+x−x²)/12 [L u₂ = −2u₁]. */
const mean = (x * (1 - x)) / 2;
const second = (x * (1 - x) * (1 + x * (1 - x))) / 12;

const strip = (parts: Record<string, unknown> = {}) =>
  unitSquare({
    drawing: {
      outline: { rectangle: [0, 0, 1, 0.25] },
      regions: { 'left half': { rectangle: [-1, -1, 0.5, 2] }, rest: { rectangle: [0.5, -1, 2, 2] } },
    },
    layouts: { only: { left: 'absorbing', right: 'absorbing' } },
    starts: { quarter: { point: [x, 0.1] } },
    pins: { quarter: [x, 0.2] },
    ...parts,
  });

const off = (value: number | null | undefined, exact: number) => Math.abs((value ?? Number.NaN) / exact - 1);

describe('what is always answered, from a start and at a pin alike', () => {
  const answers = firstAnswers(strip());

  it('standard deviation, the four times and the mean time by each exit are those of the strip', () => {
    for (const reading of [answers, answers.pins['quarter']]) {
      expect(off(reading?.sd?.value, Math.sqrt(second - mean ** 2))).toBeLessThan(1e-3);
      for (const percent of [50, 90, 95, 99]) {
        const exact = timeWhen((t) => 1 - inside(x, t), percent / 100);
        expect(off(reading?.times?.[`${percent} %`]?.value, exact)).toBeLessThan(1e-3);
      }
      // Mean time of those that leave at distance y: (1 − (1−y)²)/6 with y = ¼, ¾ [Redner 2001, § 2.2.2].
      expect(off(reading?.shares['left']?.meanTime, (1 - 0.75 ** 2) / 6)).toBeLessThan(1e-3);
      expect(off(reading?.shares['right']?.meanTime, (1 - 0.25 ** 2) / 6)).toBeLessThan(1e-3);
    }
    expect(Object.keys(answers.times ?? {})).toEqual(['50 %', '90 %', '95 %', '99 %']);
  });

  it('two moments, the mean first, and the decay time 1/π²; nothing that was not asked for', () => {
    expect(answers.moments[0]).toEqual(answers.mean);
    expect(answers.moments).toHaveLength(2);
    expect(off(answers.moments[1]?.value, second)).toBeLessThan(1e-3);
    expect(off(answers.decayTime?.value, 1 / Math.PI ** 2)).toBeLessThan(1e-3);
    expect(answers).not.toHaveProperty('survival');
    expect(answers).not.toHaveProperty('occupation');
  });

  it('mean times by exit, weighted by the shares, are the mean', () => {
    const sum = Object.values(answers.shares).reduce(
      (total, share) => total + share.value * (share.meanTime ?? 0),
      0,
    );
    expect(off(sum, answers.mean.value)).toBeLessThan(1e-9);
  });
});

it('what the report asks for comes in its order: survival, occupation with its part of the mean, moments', () => {
  const report = { survivalAt: [0.1, 0.01], occupationOf: ['rest', 'left half'], moments: 3 };
  const answers = firstAnswers(strip({ report }));
  expect(answers.survival?.map(({ t }) => t)).toEqual([0.1, 0.01]);
  for (const { t, value } of answers.survival ?? []) expect(off(value, inside(x, t))).toBeLessThan(1e-3);
  expect(Object.keys(answers.occupation ?? {})).toEqual(['rest', 'left half']);
  // Green's function x(1−y) for y > x: its integral over y > ½ is x/8.
  const { rest, 'left half': half } = answers.occupation ?? {};
  expect(off(rest?.value, x / 8)).toBeLessThan(1e-3);
  expect(off((rest?.value ?? 0) + (half?.value ?? 0), answers.mean.value)).toBeLessThan(1e-9);
  expect((rest?.fraction ?? 0) + (half?.fraction ?? 0)).toBeCloseTo(1, 9);
  expect(answers.moments).toHaveLength(3);
  // E[τ³] ≥ E[τ²]^(3/2).
  expect(answers.moments[2]?.value).toBeGreaterThan((answers.moments[1]?.value ?? 0) ** 1.5);
  expect(firstAnswers(strip({ report: { moments: 1 } })).moments).toHaveLength(1);
});

describe('figures that are asked for', () => {
  const value = (figure: string, parts: object = {}, asked: object = {}) =>
    firstAnswers(strip({ asked: [{ figure, ...asked }], ...parts })).asked[0];

  it.each([
    ['mean', mean],
    ['standard deviation', Math.sqrt(second - mean ** 2)],
    ['median', timeWhen((t) => 1 - inside(x, t), 0.5)],
    ['time to 99.9 %', timeWhen((t) => 1 - inside(x, t), 0.999)],
    ['share of left', 1 - x],
    ['share of left by 0.05', leftBy(x, 0.05)],
    ['share of right by 0.05', leftBy(1 - x, 0.05)],
    ['time for 20 % to leave by right', timeWhen((t) => leftBy(1 - x, t), 0.2)],
    ['still inside at 0.05', inside(x, 0.05)],
    ['time in rest', x / 8],
    ['decay time', 1 / Math.PI ** 2],
  ])('%s', (figure, exact) => {
    const answer = value(figure);
    expect(answer).toMatchObject({ figure, kind: 'estimate' });
    expect(off(answer?.value, exact)).toBeLessThan(2e-3);
  });

  it('a time that is never reached has no value, the part that ever gets there, a verdict and no difference', () => {
    const answer = value('time for 30 % to leave by right', {}, { under: 7 });
    expect(answer).toMatchObject({ value: null, verdict: 'misses', under: 7 });
    expect(answer?.never?.atMost).toBeCloseTo(x, 6);
    expect(answer).not.toHaveProperty('margin');
    expect(value('time for 30 % to leave by right', {}, { atLeast: 7 })?.verdict).toBe('meets');
    const never = firstAnswers(strip({ asked: [{ figure: 'time for 30 % to leave by right' }] }));
    const known: Answers = {
      ...never,
      layout: 'other',
      asked: [{ figure: 'mean', value: 1, kind: 'estimate' }],
    };
    expect(withDifferences('only', [never, known]).map(({ difference }) => difference)).toEqual([
      undefined,
      undefined,
    ]);
  });

  it('a wall that catches nothing in a layout gets a share of 0 by any time, and no time is ever reached', () => {
    const layouts = { only: { left: 'absorbing' } };
    expect(value('share of right by 0.05', { layouts })?.value).toBe(0);
    expect(value('time for 1 % to leave by right', { layouts })).toMatchObject({
      value: null,
      never: { atMost: 0 },
    });
  });
});

describe('with loss', () => {
  /** In a closed box with a rate c everything is lost: S = e^{−ct}. */
  const c = 4;
  const lossy = { particle: { diffusion: 1, loss: c } };
  const p = Math.cosh(2 * (x - 0.5)) / Math.cosh(1);

  it('times are of leaving or being lost, those counted as caught of leaving alone', () => {
    const { asked } = firstAnswers(
      strip({
        ...lossy,
        asked: [
          { figure: 'median' },
          { figure: 'median', counts: 'caught' },
          { figure: 'time to 95 %', counts: 'caught' },
          { figure: 'share of lost by 0.05' },
        ],
      }),
    );
    expect(
      off(
        asked[0]?.value,
        timeWhen((t) => 1 - inside(x, t) * Math.exp(-c * t), 0.5),
      ),
    ).toBeLessThan(2e-3);
    // Caught by t: ∫₀ᵗ e^{−cs} dF(s) with F = 1 − S of the strip without loss, by parts.
    const caught = (t: number) => {
      const n = 2000;
      let sum = 0;
      for (let k = 0; k < n; k++) {
        const s = ((k + 0.5) * t) / n;
        sum += (Math.exp(-c * s) * c * (1 - inside(x, s)) * t) / n;
      }
      return sum + Math.exp(-c * t) * (1 - inside(x, t));
    };
    expect(asked[1]).toMatchObject({ counts: 'caught' });
    const time = asked[1]?.value ?? Number.NaN;
    expect(off(caught(time), 0.5)).toBeLessThan(2e-3);
    expect(asked[2]?.value).toBeNull();
    expect(off(asked[2]?.never?.atMost, p)).toBeLessThan(1e-3);
    // All that has gone by t is caught or lost.
    expect(off(asked[3]?.value, 1 - inside(x, 0.05) * Math.exp(-c * 0.05) - caught(0.05))).toBeLessThan(5e-3);
  });

  it('without exits the decay time is 1/c, the median ln 2/c, and the standard deviation 1/c', () => {
    const answers = firstAnswers(strip({ ...lossy, layouts: { only: {} } }));
    expect(off(answers.decayTime?.value, 1 / c)).toBeLessThan(1e-9);
    expect(off(answers.times?.['50 %']?.value, Math.LN2 / c)).toBeLessThan(1e-9);
    expect(off(answers.sd?.value, 1 / c)).toBeLessThan(1e-9);
    expect(off(answers.shares['lost']?.meanTime, 1 / c)).toBeLessThan(1e-9);
  });

  it('"counts": "caught" of a figure that counts nothing is refused with its key', () => {
    const solve = () => solveCase(strip({ asked: [{ figure: 'mean', counts: 'caught' }] }));
    expect(solve).toThrow(/it is for "median" and "time to N %"/);
    expect(solve).toThrow(
      expect.objectContaining({ code: 'CASE_VALUE_WRONG', where: { key: 'asked.0.counts', line: 1 } }),
    );
  });
});

describe('times before the lowest that the mesh resolves', () => {
  const one = (parts: Record<string, unknown>) => firstAnswers(strip(parts));

  it('is the square of the longest chord of catching wall over D', () => {
    const { lowestTime = 0 } = one({ particle: { diffusion: 4 } }).numbers;
    const { lowestTime: slower = 0 } = one({ particle: { diffusion: 1 } }).numbers;
    expect(lowestTime).toBeCloseTo(slower / 4, 12);
    // A side of length ¼ in at least five chords and at most a thousand.
    expect(slower).toBeLessThan(0.05 ** 2);
    expect(slower).toBeGreaterThan(0.00025 ** 2);
    expect(one({ particle: { diffusion: 1, loss: 1 }, layouts: { only: {} } }).numbers).not.toHaveProperty(
      'lowestTime',
    );
  });

  it('bring a warning where they are asked for or come out, and only there', () => {
    const words = /^the mesh resolves no times before .*: earlier ones, and what is said of them, are rough$/;
    expect(one({}).warnings).toEqual([]);
    for (const parts of [
      { report: { survivalAt: [1e-9] } },
      { asked: [{ figure: 'still inside at 1e-9' }] },
      { asked: [{ figure: 'share of left by 1e-9' }] },
      { starts: { near: { point: [0.0001, 0.1] } } },
    ]) {
      const { warnings } = one(parts);
      expect([warnings.length, words.test(warnings[0] ?? '')]).toEqual([1, true]);
    }
  });
});

describe('wells', () => {
  /** Up a slope of `depth` kT to the only exit: V = depth·x. */
  const well = (depth: number) =>
    firstAnswers(
      strip({
        particle: { diffusion: 1, drift: { potential: { expression: `${depth}*x` } } },
        layouts: { only: { right: 'absorbing' } },
      }),
    );

  it('of 20 kT have the times of an exponential with the mean, and no warning [Kramers 1940]', () => {
    const { mean: found, sd, times, decayTime, warnings } = well(20);
    expect(off(sd?.value, found.value)).toBeLessThan(1e-4);
    expect(off(times?.['50 %']?.value, Math.LN2 * found.value)).toBeLessThan(1e-4);
    expect(off(decayTime?.value, found.value)).toBeLessThan(1e-4);
    expect(warnings).toEqual([]);
  });

  it('too deep for early losses to be seen in the times bring a warning', () => {
    expect(well(60).warnings.join(' ')).toMatch(/^the potential ranges over 60\.0 kT: times to N %/);
  });

  it('so deep that the second moment is beyond the largest number still have their mean', () => {
    const answers = well(500);
    // ∫∫ e^{V(y) − V(z)} dz dy from x to 1 with z < y: e^500/500² but for terms e^−500 smaller.
    expect(off(answers.mean.value, Math.exp(500) / 500 ** 2)).toBeLessThan(0.05);
    expect(answers.moments).toHaveLength(1);
    expect(answers).not.toHaveProperty('sd');
    expect(answers).not.toHaveProperty('times');
    expect(answers.warnings.join(' ')).toMatch(/standard deviation is left out.*times to N % are left out/);
  });
});
