import { describe, expect, it } from 'vitest';
import { assemble, type Problem } from '../../solver/index.ts';
import { type BracketStart, prepareBrackets } from '../../solver/trust/brackets.ts';
import { solveMeasureProgram } from '../../solver/trust/linear-program.ts';
import { survivalBound } from '../../solver/trust/survival-bounds.ts';
import { prepareSurvivalBrackets } from '../../solver/trust/survival-brackets.ts';
import { listed } from '../published/listed.ts';
import { rectangleMesh } from '../support/grid-mesh.ts';
import { absorbing, constant, partly, problem, reflecting, varying } from '../support/physics.ts';
import { even, point } from './bracket-cases.ts';

/** Survival of an even start in a < x < b of the strip 0 < x < 1, both ends absorbing, D = 1 [Carslaw & Jaeger § 3.3]. */
function stripSurvival(t: number, a: number, b: number): number {
  let sum = 0;
  for (let m = 1; m < 200; m += 2) {
    const k = Math.PI * m;
    sum += ((4 / k ** 2) * (Math.cos(k * a) - Math.cos(k * b)) * Math.exp(-k * k * t)) / (b - a);
  }
  return sum;
}

const box = { from: 0.25, to: 0.5 };
const n = 32;
const square = rectangleMesh({
  ...{ x: [0, 1], y: [0, 1], columns: n, rows: n, regionSets: [[], [0]] },
  region: (x, y) => (Math.min(x, y) > box.from && Math.max(x, y) < box.to ? 1 : 0),
});
const all = [absorbing(), absorbing(), absorbing(), absorbing()];
const boxStart: BracketStart = { kind: 'even', inside: (r) => r === 1 };

function timesOf(mesh: typeof square, physics: Problem) {
  const brackets = prepareBrackets(assemble(mesh, physics), physics);
  const times = brackets && prepareSurvivalBrackets(brackets, physics);
  if (!times) throw new Error('no brackets');
  return times;
}

describe('times to any share, guaranteed', () => {
  const times = timesOf(square, problem([constant(1), constant(1)], all));

  // Sides are independent: the survival in the square is the product of those along x and y.
  it.each([
    ['everywhere', even, 0, 1, 0.02],
    ['a box off the middle', boxStart, box.from, box.to, 0.06],
  ] as const)(
    'unit square, even start %s: S at both ends of each bracket [product of strips]',
    (_, start, from, to, wide) => {
      const exact = (t: number): number => stripSurvival(t, from, to) ** 2;
      for (const left of [0.5, 0.05, 0.01]) {
        const { low, high, kind } = times.timeTo(start, left);
        expect(exact(low)).toBeGreaterThanOrEqual(left);
        expect(exact(high)).toBeLessThanOrEqual(left);
        expect(kind).toBe('guaranteed');
        if (left < 0.5) expect(high / low - 1).toBeLessThan(wide);
      }
      for (const t of [0.01, 0.05, 0.2]) {
        const { low, high } = times.survival(start, t);
        expect(low <= exact(t) && exact(t) <= high).toBe(true);
        expect(high - low).toBeLessThan(0.15);
      }
    },
  );

  it('survival is 1 at first, and a point is only an estimate', () => {
    expect(times.survival(even, 0)).toMatchObject({ low: 1, high: 1 });
    expect(times.survival(point(0.5, 0.5), 0.1).kind).toBe('estimate');
  });

  it('a partly absorbing end, x = 0 reflecting: even start, Σ 2Bi²/(ζ²(ζ² + Bi² + Bi)) e^(−ζ²t) [Carslaw & Jaeger § 3.11]', () => {
    const strip = rectangleMesh({ x: [0, 1], y: [0, 0.125], columns: 32, rows: 4 });
    const own = timesOf(strip, problem(constant(1), [reflecting, partly(1), reflecting, reflecting]));
    const exact = (t: number): number => {
      let sum = 0;
      for (let k = 0; k < 40; k++) {
        const zeta = rootOf(k);
        sum += (2 / (zeta ** 2 * (zeta ** 2 + 2))) * Math.exp(-(zeta ** 2) * t);
      }
      return sum;
    };
    expect(rootOf(0)).toBeCloseTo(listed('strip-RRob-rate', 'zeta1(Bi=1)'), 12);
    for (const left of [0.5, 0.05]) {
      const { low, high } = own.timeTo(even, left);
      expect(exact(low)).toBeGreaterThanOrEqual(left);
      expect(exact(high)).toBeLessThanOrEqual(left);
      expect(high / low - 1).toBeLessThan(0.01);
    }
  });

  it('with loss at rate 3 everywhere the survival is e^(−3t) times that without [Feynman–Kac]', () => {
    const strip = rectangleMesh({ x: [0, 1], y: [0, 0.125], columns: 32, rows: 4 });
    const physics: Problem = {
      ...problem(constant(1), [reflecting, absorbing(), reflecting, absorbing()]),
      media: [{ diffusion: constant(1), loss: constant(3) }],
    };
    const own = timesOf(strip, physics);
    for (const left of [0.5, 0.05]) {
      const { low, high } = own.timeTo(even, left);
      expect(stripSurvival(low, 0, 1) * Math.exp(-3 * low)).toBeGreaterThanOrEqual(left);
      expect(stripSurvival(high, 0, 1) * Math.exp(-3 * high)).toBeLessThanOrEqual(left);
      expect(high / low - 1).toBeLessThan(0.15);
    }
  });

  it('with variable D under Itô, where an even start is not ∝ m̂, coarse and fine brackets overlap', () => {
    const physics = problem(
      varying((x, y) => 1 + x + y),
      all,
      'ito',
    );
    const [coarse, fine] = [8, 24].map((cells) =>
      timesOf(rectangleMesh({ x: [0, 1], y: [0, 1], columns: cells, rows: cells }), physics).timeTo(
        even,
        0.05,
      ),
    );
    if (!coarse || !fine) throw new Error('two meshes');
    expect(coarse.low <= fine.high && fine.low <= coarse.high).toBe(true);
    expect(fine.high - fine.low).toBeLessThan((coarse.high - coarse.low) / 2);
  });
});

/** k-th root of ζ tan ζ = 1. */
function rootOf(k: number): number {
  let [low, high] = [k * Math.PI, (k + 0.5) * Math.PI];
  for (let round = 0; round < 60; round++) {
    const middle = (low + high) / 2;
    if (middle * Math.sin(middle) > Math.cos(middle) === (k % 2 === 0)) high = middle;
    else low = middle;
  }
  return (low + high) / 2;
}

describe('bounds from moments of a measure', () => {
  it('a measure at one rate is found: total 1, ∫dμ/λ = 1/3 and ∫dμ/λ² = 1/9 leave about λ = 3 only [equality in Jensen]', () => {
    const known = {
      ...{ least: 1, total: { low: 1, high: 1 } },
      integrals: [
        { shift: 0, power: 1 as const, low: 0.3333, high: 0.3334 },
        { shift: 0, power: 2 as const, low: 0.1111, high: 0.1112 },
      ],
    };
    for (const t of [0.1, 1, 3]) {
      expect(survivalBound(known)(t, 1)).toBeGreaterThanOrEqual(Math.exp(-3 * t));
      expect(survivalBound(known)(t, -1)).toBeLessThanOrEqual(Math.exp(-3 * t));
      expect(survivalBound(known)(t, 1) - survivalBound(known)(t, -1)).toBeLessThan(0.05);
    }
  });

  it('knowing the total alone, S lies between 0 and e^(−λ₁t)', () => {
    const known = { least: 2, total: { low: 1, high: 1 }, integrals: [] };
    expect(survivalBound(known)(1, 1)).toBeCloseTo(Math.exp(-2), 6);
    expect(survivalBound(known)(1, -1)).toBeCloseTo(0, 6);
    expect(survivalBound(known)(1, 1)).toBeGreaterThanOrEqual(Math.exp(-2));
    expect(survivalBound(known)(1, -1)).toBeLessThanOrEqual(0);
  });

  it('the program’s multipliers bound the objective at every column, and add up to its maximum [duality, Dantzig 1963]', () => {
    const columns = Float64Array.from({ length: 50 }, (_, j) => j / 49);
    const squares = columns.map((x) => x * x);
    const objective = columns.map((x) => Math.cos(3 * x));
    const found = solveMeasureProgram({
      objective,
      rows: [columns.map(() => 1), columns, squares],
      low: [1, 0.39, 0.2],
      high: [1, 0.41, 0.25],
    });
    if (!found) throw new Error('no solution');
    const weight = found.ofHigh.map((value, k) => value + (found.ofLow[k] ?? 0));
    let tight = 0;
    for (let j = 0; j < columns.length; j++) {
      const [x, xx, c] = [columns[j] ?? 0, squares[j] ?? 0, objective[j] ?? 0];
      const bound = (weight[0] ?? 0) + (weight[1] ?? 0) * x + (weight[2] ?? 0) * xx;
      expect(bound).toBeGreaterThanOrEqual(c - 1e-9);
      if (bound < c + 1e-9) tight++;
    }
    expect(tight).toBeGreaterThanOrEqual(2);
    expect(Math.max(...found.ofLow)).toBeLessThanOrEqual(0);
    expect(Math.min(...found.ofHigh)).toBeGreaterThanOrEqual(0);
  });

  it('says so when no measure meets the conditions', () => {
    const ones = new Float64Array(3).fill(1);
    expect(
      solveMeasureProgram({ objective: ones, rows: [ones, ones], low: [1, 2], high: [1, 3] }),
    ).toBeUndefined();
  });
});
