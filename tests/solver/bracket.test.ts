import { describe, expect, it } from 'vitest';
import { assemble, type Problem, type Wall } from '../../solver/index.ts';
import type { Bracketed } from '../../solver/trust/bracketed.ts';
import { type Brackets, prepareBrackets } from '../../solver/trust/brackets.ts';
import { listed } from '../published/listed.ts';
import { cutMesh } from '../support/cut-mesh.ts';
import { rectangleMesh } from '../support/grid-mesh.ts';
import { absorbing, constant, partly, problem, reflecting, varying } from '../support/physics.ts';
import { type ExactFigure, even, point } from './bracket-cases.ts';
import { bracketCases } from './bracket-polygons.ts';

type Given = Parameters<typeof assemble>[0];

function bracketsOf(mesh: Given, physics: Problem): Brackets {
  const brackets = prepareBrackets(assemble(mesh, physics), physics);
  if (!brackets) throw new Error('no brackets for a reversible process');
  return brackets;
}

function bracketOf(brackets: Brackets, { figure, start }: ExactFigure): Bracketed {
  if (figure === 'mean') return brackets.mean(start);
  if (figure === 'secondMoment') return brackets.secondMoment(start);
  if (figure === 'rate') {
    const { low, high } = brackets.rate();
    return { value: (low + high) / 2, low, high, kind: 'guaranteed' };
  }
  return brackets.share(start, figure.shareOf);
}

function expectHeld({ low, high, value, kind }: Bracketed, exact: number, words: string): void {
  const found = `${words}: [${low}, ${high}] for ${exact}`;
  expect(low <= exact && exact <= high, found).toBe(true);
  expect(value, found).toBe((low + high) / 2);
  expect(kind).toBe('guaranteed');
}

const width = ({ low, high, value }: Bracketed): number => (high - low) / value;

describe('figures that are known exactly lie in their brackets [sources in tests/data/checks.json]', () => {
  for (const one of bracketCases) {
    it(`${one.name}: low ≤ exact ≤ high`, () => {
      const brackets = bracketsOf(one.mesh(0.1), one.problem);
      expect(one.figures.length).toBeGreaterThan(0);
      for (const figure of one.figures) {
        const bracket = bracketOf(brackets, figure);
        expectHeld(bracket, figure.exact, `${JSON.stringify(figure.figure)} from ${figure.start.kind}`);
        // A bracket as wide as the figure would hold anything.
        expect(width(bracket)).toBeLessThan(0.3);
      }
    });
  }
});

const square = (n: number): Given => rectangleMesh({ x: [0, 1], y: [0, 1], columns: n, rows: n });
const allAbsorbing = problem(constant(1), [absorbing(), absorbing(), absorbing(), absorbing()]);

describe('the width of a bracket', () => {
  it('is 0.24 % at most for the average over the unit square on 2,116 even nodes [METHODS 6: 0.21 % on 2,113]', () => {
    const bracket = bracketsOf(square(45), allAbsorbing).mean(even);
    expectHeld(bracket, listed('rect-A-1', 'avg'), 'average');
    expect(width(bracket)).toBeLessThan(0.0024);
  });

  it('falls by about 4 when edges are halved [Ciarlet 1978: energy of the error ∝ h²]', () => {
    const [coarse, fine] = [10, 20].map((n) => bracketsOf(square(n), allAbsorbing));
    for (const start of [even, point(0.5, 0.5), point(0.25, 0.4)]) {
      const ratio = width(coarse?.mean(start) ?? failed()) / width(fine?.mean(start) ?? failed());
      expect(ratio).toBeGreaterThan(3.4);
      expect(ratio).toBeLessThan(5);
    }
  });
});

function failed(): never {
  throw new Error('nothing to compare');
}

const permeable = (permeability: number): Wall => ({ kind: 'permeable', permeability });
const halves = rectangleMesh({
  ...{ x: [0, 1], y: [0, 0.25], columns: 20, rows: 5, regionSets: [[], [0]] },
  region: (x) => (x < 0.5 ? 0 : 1),
});
const cut = cutMesh(halves, 0.5, 0, 4);

describe('walls inside the compartment', () => {
  it.each([0.1, 1, 1e4])(
    'permeable with P = %d at x = 1/2, x = 0 reflecting, x = 1 absorbing: the average is 1/3 + 1/(4P) [exact]',
    (p) => {
      const walls = [reflecting, absorbing(), reflecting, reflecting, permeable(p)];
      const brackets = bracketsOf(cut, problem([constant(1), constant(1)], walls));
      expectHeld(brackets.mean(even), 1 / 3 + 1 / (4 * p), `P = ${p}`);
      expectHeld(brackets.mean({ kind: 'even', inside: (r) => r === 0 }), 11 / 24 + 1 / (2 * p), 'left half');
      // sin(k/2)² k = P(…): λ₁ of the two halves lies below that of the strip without a wall.
      expect(brackets.rate().low).toBeLessThan(Math.PI ** 2 / 4);
      expect(brackets.rate().low).toBeGreaterThan(0);
    },
  );

  it('a point on an inner wall has no disc; its figures are estimates from a spot, and said to be', () => {
    const walls = [reflecting, absorbing(), reflecting, reflecting, permeable(1)];
    const brackets = bracketsOf(cut, problem([constant(1), constant(1)], walls));
    expect(brackets.takenAs(point(0.5, 0.1))).toBe('spot');
    expect(brackets.mean(point(0.5, 0.1)).kind).toBe('estimate');
    expect(brackets.takenAs(point(0.4, 0.1))).toBe('disc');
  });

  it('a slit that reflects, open at one end, changes nothing along the strip [exact]', () => {
    const slit = rectangleMesh({ x: [0, 1], y: [0, 0.25], columns: 20, rows: 10 });
    const walls = [reflecting, absorbing(), reflecting, absorbing(), reflecting];
    const turned = { ...slit, nodes: slit.nodes.map((_, q) => slit.nodes[q ^ 1] ?? 0) };
    // Mirrored at x = y: the slit runs along y, in the direction u depends on.
    const mirrored = { ...turned, triangles: flipped(turned.triangles), segments: swapped(turned.segments) };
    const brackets = bracketsOf(cutMesh(mirrored, 0.125, 0.5, 4), problem(constant(1), walls));
    expectHeld(brackets.mean(even), 1 / 12, 'average');
    expectHeld(brackets.mean({ kind: 'point', x: 0.05, y: 0.5 }), 1 / 8, 'beside the tip');
  });
});

function flipped(triangles: Int32Array): Int32Array {
  return triangles.map((_, q) => triangles[q % 3 === 0 ? q : q % 3 === 1 ? q + 1 : q - 1] ?? 0);
}

function swapped(segments: Int32Array): Int32Array {
  return segments.map((_, q) => segments[q ^ 1] ?? 0);
}

describe('starts and labels', () => {
  it('a spot and the disc of a point with its radius differ by r²/8D [mean value property]', () => {
    const brackets = bracketsOf(square(16), allAbsorbing);
    const spot = brackets.mean({ kind: 'spot', x: 0.4, y: 0.5, radius: 0.4 });
    const disc = brackets.mean(point(0.4, 0.5));
    expect(disc.value - spot.value).toBeCloseTo(0.4 ** 2 / 8, 12);
  });

  it('a density twice as high on the right half: 1/3 of the left average and 2/3 of the right', () => {
    const walls = [reflecting, absorbing(), reflecting, reflecting];
    const brackets = bracketsOf(halves, problem([constant(1), constant(1)], walls));
    expectHeld(
      brackets.mean({ kind: 'density', density: (x) => (x < 0.5 ? 1 : 2) }),
      (11 / 24 + (2 * 5) / 24) / 3,
      'mixed',
    );
  });

  it('with a drift or variable D a point becomes a spot and an estimate', () => {
    const walls = [reflecting, absorbing(), reflecting, reflecting];
    const brackets = bracketsOf(
      square(8),
      problem(
        varying((x) => 1 + x),
        walls,
      ),
    );
    expect(brackets.mean(point(0.5, 0.5)).kind).toBe('estimate');
    expect(brackets.mean(even).kind).toBe('guaranteed');
  });

  it('an irreversible process has no guaranteed bracket', () => {
    const spin: Problem = {
      ...allAbsorbing,
      media: [
        {
          diffusion: constant(1),
          drift: { kind: 'components', x: varying((_, y) => -y), y: varying((x) => x) },
        },
      ],
    };
    expect(prepareBrackets(assemble(square(8), spin), spin)).toBeUndefined();
  });
});

describe('figures beside the mean', () => {
  it('standard deviation: √(u₂ − u²) lies in its bracket for the strip, 1/12·√(7/5) from everywhere [exact]', () => {
    const walls = [reflecting, absorbing(), reflecting, absorbing()];
    const strip = rectangleMesh({ x: [0, 1], y: [0, 0.25], columns: 40, rows: 10 });
    const brackets = bracketsOf(strip, problem(constant(1), walls));
    expectHeld(brackets.standardDeviation(even), Math.sqrt(1 / 60 - 1 / 144), 'even');
    expectHeld(brackets.standardDeviation(point(0.5, 0.1)), Math.sqrt(5 / 192 - 1 / 64), 'middle');
  });

  it('the shares of three exits that touch, and what is lost, sum to 1 within their brackets', () => {
    const physics: Problem = {
      ...problem(constant(1), [absorbing(0), absorbing(1), partly(3, 2), absorbing(1)]),
      media: [{ diffusion: constant(1), loss: constant(2) }],
    };
    const brackets = bracketsOf(square(16), physics);
    const shares = [0, 1, 2, -1].map((exit) => brackets.share(even, exit));
    const low = shares.reduce((sum, one) => sum + one.low, 0);
    const high = shares.reduce((sum, one) => sum + one.high, 0);
    expect(low).toBeLessThan(1);
    expect(high).toBeGreaterThan(1);
    expect(high - low).toBeLessThan(0.3);
  });

  it('a floor that catches is an exit: even start, all other walls reflecting, its share is 1 and the time h/κ', () => {
    const physics: Problem = {
      ...problem(constant(1), [reflecting, reflecting, reflecting, reflecting]),
      ...{
        media: [{ diffusion: constant(1), floor: { kappa: 0.5, exit: 0 } }],
        exitCount: 1,
        depth: constant(0.2),
      },
    };
    const brackets = bracketsOf(square(6), physics);
    expectHeld(brackets.mean(even), 0.4, 'mean');
    expectHeld(brackets.share(even, 0), 1, 'share');
    expect(brackets.rate().low).toBeLessThanOrEqual(2.5);
    expect(brackets.rate().high).toBeCloseTo(2.5, 10);
  });

  it.each([
    [-20, 'guaranteed'],
    [-40, 'estimate'],
  ] as const)(
    'against a drift of %d kT: where rounding acts like a sink, the bracket is an estimate and the rate has no lower bound above the upper',
    (v, kind) => {
      const strip = rectangleMesh({ x: [0, 1], y: [0, 0.1], columns: 40, rows: 4 });
      const physics: Problem = {
        ...problem(constant(1), [reflecting, absorbing(), reflecting, reflecting]),
        media: [{ diffusion: constant(1), drift: { kind: 'components', x: constant(v), y: constant(0) } }],
      };
      const brackets = bracketsOf(strip, physics);
      const { low, high } = brackets.rate();
      expect(low).toBeLessThanOrEqual(high);
      expect(brackets.mean(even).kind).toBe(kind);
      // u = (e^a − e^(ax))/a² − (1 − x)/a, a = −v, by substitution; its average.
      const a = -v;
      const average = (Math.exp(a) - (Math.exp(a) - 1) / a) / a ** 2 - 1 / (2 * a);
      if (kind === 'guaranteed') expectHeld(brackets.mean(even), average, 'average');
    },
  );
});
