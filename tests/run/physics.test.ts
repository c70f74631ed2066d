import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { CaseError } from '../../src/case/errors.ts';
import { firstAnswers, unitSquare } from './solve-case.ts';

const varying = (expression: string) => ({ expression, unit: '1' });
const middle = { regions: { core: { rectangle: [0.25, 0.25, 0.75, 0.75] } } };
const drawing = (parts: object) => ({ outline: { rectangle: [0, 0, 1, 1] }, ...parts });

/** The warnings that come from the physics: the rest of these cases gives none. */
const warningsOf = (parts: Record<string, unknown>) => firstAnswers(unitSquare(parts)).warnings;

describe('reversible is what the solver finds, however the drift is stated', () => {
  it('a drift by components that is the slope of a potential is reversible', () => {
    const particle = { diffusion: 2, drift: { x: varying('2*x*y'), y: varying('x^2') } };
    const answers = firstAnswers(unitSquare({ particle }));
    expect([answers.reversible, answers.warnings]).toEqual([true, []]);
  });

  it('a drift that turns is not, and the warning names the region of a way it does work on', () => {
    const particle = { diffusion: 1, driftIn: { core: { x: varying('0.5 - y'), y: varying('x - 0.5') } } };
    const answers = firstAnswers(unitSquare({ drawing: drawing(middle), particle }));
    expect(answers.reversible).toBe(false);
    expect(answers.warnings[0]).toMatch(
      /^not reversible: round a closed way across the border of "core" at \(.*\) the drift does work/,
    );
    const everywhere = firstAnswers(
      unitSquare({ particle: { diffusion: 1, drift: { x: varying('-y'), y: varying('x') } } }),
    );
    expect(everywhere.warnings[0]).toMatch(/^not reversible: round a small closed way outside every region/);
  });

  it('a smooth drift over a D that jumps is not, and the border is named', () => {
    const particle = {
      diffusion: 1,
      diffusionIn: { core: 2 },
      noise: 'isothermal',
      drift: { x: 0, y: 1 },
    };
    const [warning] = warningsOf({ drawing: drawing(middle), particle });
    // On the upright sides of the core b/D along the border is 1 outside and ½ inside.
    expect(warning).toMatch(/across the border of "core" at \(0\.(25|75)00, 0\.\d+\)/);
  });

  it('a whirl round a hole is not, by its circulation 2π over D [Kolmogorov 1936]', () => {
    const r2 = '((x - 0.5)^2 + (y - 0.5)^2)';
    const particle = {
      diffusion: 1,
      drift: { x: varying(`(0.5 - y)/${r2}`), y: varying(`(x - 0.5)/${r2}`) },
    };
    const holes = { holes: { post: { circle: [0.5, 0.5], radius: 0.2 } } };
    const [warning] = warningsOf({ drawing: drawing(holes), particle });
    expect(warning).toMatch(/round a hole, or through a permeable wall .* does work, (6\.283|−6\.283) kT/);
  });

  it('only a flow brings the caution about flow', () => {
    const flow = /averaged over the depth/;
    const cautionsOf = (particle: object) => firstAnswers(unitSquare({ particle })).cautions.join(' ');
    expect(cautionsOf({ diffusion: 1, drift: { x: 1, y: 0 } })).toMatch(flow);
    expect(cautionsOf({ diffusion: 1, drift: { potential: { expression: 'x' } } })).not.toMatch(flow);
  });
});

describe('the numbers that rule a case', () => {
  const long = (particle: object) =>
    firstAnswers(
      unitSquare({
        drawing: { outline: { rectangle: [0, 0, 2, 1] } },
        particle,
        walls: { left: { on: 'outline', where: 'x == 0' }, right: { on: 'outline', where: 'x == 2' } },
        layouts: { only: { left: 'absorbing', right: { partlyAbsorbing: 2 } } },
      }),
    ).numbers;

  it('are vL/D, κL/D and cL²/D, L the longest extent', () => {
    const numbers = long({ diffusion: 0.5, drift: { x: 0, y: -3 }, loss: 0.25 });
    expect(numbers).toMatchObject({ longestExtent: 2, peclet: 12, kappaLOverD: 8, cL2OverD: 2 });
    expect(numbers.roundingFloor).toBeGreaterThan(0);
    expect(numbers.negativeRates).toBe(0);
  });

  it('take D along the drift, across the wall and at its smallest where it is a tensor', () => {
    const diffusion = { principal: [4, 0.5] };
    const numbers = long({ diffusion, drift: { x: 0, y: -3 }, loss: 0.25 });
    expect(numbers).toMatchObject({ peclet: 12, kappaLOverD: 1, cL2OverD: 2 });
  });

  it('know the drift of a potential by its slope, and are absent where nothing of the kind is', () => {
    const numbers = firstAnswers(
      unitSquare({ particle: { diffusion: 5, drift: { potential: { expression: '3*x + 4*y' } } } }),
    ).numbers;
    expect(numbers.peclet).toBeCloseTo(5, 9);
    expect(Object.keys(numbers)).toEqual([
      'longestExtent',
      'peclet',
      'lowestTime',
      'roundingFloor',
      'negativeRates',
    ]);
  });
});

describe('conductance', () => {
  const ends = { only: { left: 'absorbing', right: 'absorbing' } };
  const of = (parts: Record<string, unknown>) => firstAnswers(unitSquare(parts)).conductance;

  it('of a bar between two ends is D·width/length, whatever its noise and its depth [Incropera et al., table 4.1]', () => {
    for (const parts of [
      { particle: { diffusion: 3 } },
      { particle: { diffusion: 3, noise: 'ito' }, drawing: drawing({ depth: 0.1 }) },
    ]) {
      const found = of({ layouts: ends, ...parts });
      expect(found?.['left']?.value).toBeCloseTo(3, 10);
      expect(found?.['right']?.value).toBeCloseTo(3, 10);
    }
  });

  it('is left out with drift, with loss, with a depth that varies, and where two exits touch', () => {
    expect(of({ layouts: ends, particle: { diffusion: 1, drift: { x: 1, y: 0 } } })).toBeUndefined();
    expect(of({ layouts: ends, particle: { diffusion: 1, loss: 1 } })).toBeUndefined();
    expect(of({ layouts: ends, drawing: drawing({ depth: varying('1 + x') }) })).toBeUndefined();
    const walls = {
      left: { on: 'outline', where: 'x == 0' },
      right: { on: 'outline', where: 'x == 1' },
      top: { on: 'outline', where: 'y == 1 and x < 0.5' },
    };
    const found = of({ walls, layouts: { only: { ...ends.only, top: 'absorbing' } } });
    expect(Object.keys(found ?? {})).toEqual(['right']);
  });
});

describe('what a person should know of the physics is a warning', () => {
  it('edges with a rate below zero are counted, with a place', () => {
    const answers = firstAnswers(
      unitSquare({ particle: { diffusion: { principal: [1, 0.001], turned: '30 deg' } } }),
    );
    expect(answers.numbers.negativeRates).toBeGreaterThan(0);
    expect(answers.warnings[0]).toMatch(
      new RegExp(`^${answers.numbers.negativeRates} of the mesh's edges .* at \\(0\\.\\d+, 0\\.\\d+\\)`),
    );
  });

  it('a potential that jumps between regions is not felt', () => {
    const particle = {
      diffusion: 1,
      drift: { potential: { expression: 'x^2' } },
      driftIn: { core: { potential: { expression: 'x^2 + 3' } } },
    };
    const answers = firstAnswers(unitSquare({ drawing: drawing(middle), particle }));
    expect(answers.warnings[0]).toMatch(/^the potential jumps by 3.000 kT between two regions at/);
    const smooth = { ...particle, driftIn: { core: { potential: { expression: 'x*x' } } } };
    expect(warningsOf({ drawing: drawing(middle), particle: smooth })).toEqual([]);
  });
});

describe('a permeable inner wall', () => {
  const half = (baffle: object, particle: object = { diffusion: 1 }) =>
    unitSquare({
      drawing: drawing({
        innerWalls: {
          baffle: {
            line: [
              [0.5, 0],
              [0.5, 1],
            ],
          },
        },
        regions: { far: { rectangle: [0, 0, 0.5, 1] } },
      }),
      particle,
      walls: { right: { on: 'outline', where: 'x == 1' }, baffle: { on: 'baffle' } },
      layouts: { only: { right: 'absorbing', baffle } },
      starts: { far: { point: [0, 0.4] } },
    });

  it('half way along a strip adds what starts behind it over P: u(0) = ½ + ½/P [flux balance]', () => {
    expect(firstAnswers(half({ permeable: 0.2 })).mean.value).toBeCloseTo(0.5 + 0.5 / 0.2, 5);
  });

  it('between two D is told how it is taken, unless the noise is isothermal', () => {
    const parts = (noise: string) => ({ diffusion: 1, diffusionIn: { far: 2 }, noise });
    expect(firstAnswers(half({ permeable: 1 }, parts('ito'))).warnings[0]).toMatch(
      /^D differs on the two sides of a permeable wall at \(0\.5000, .*J·n = P m̄/,
    );
    expect(firstAnswers(half({ permeable: 1 }, parts('isothermal'))).warnings).toEqual([]);
  });

  it('of the example of the case page is solved, and lets through what a reflecting one does not', () => {
    const example = JSON.parse(
      readFileSync(new URL('../data/case-md-example.case.json', import.meta.url), 'utf8'),
    ) as { layouts: Record<string, Record<string, unknown>> };
    const open = firstAnswers(example, 'coated post');
    const sum = Object.values(open.shares).reduce((total, { value }) => total + value, 0);
    expect(Object.keys(open.shares)).toEqual(['left pad', 'coat 1']);
    expect(Math.abs(sum - 1)).toBeLessThan(1e-12);
    (example.layouts['coated post'] ?? {})['baffle'] = 'reflecting';
    const shut = firstAnswers(example, 'coated post');
    expect(open.mean.value).toBeGreaterThan(0);
    expect(Math.abs(open.mean.value / shut.mean.value - 1)).toBeGreaterThan(1e-3);
  });
});

describe('a refusal of the physics names its key and its place as the case writes it', () => {
  const refusal = (parts: Record<string, unknown>): CaseError => {
    try {
      firstAnswers(unitSquare(parts));
    } catch (error) {
      if (error instanceof CaseError) return error;
      throw error;
    }
    throw new Error('the case was not refused');
  };
  const down = { y: 'down', outline: { rectangle: [0, 0, 1, 1] } };

  it.each([
    [
      { particle: { diffusion: varying('y - 0.3'), noise: 'ito' } },
      'DIFFUSION_NOT_POSITIVE',
      'particle.diffusion',
      /^The diffusion coefficient is −?-?0\.\d+ at \(\S+, (\S+)\)$/,
    ],
    [
      { particle: { diffusion: { principal: [varying('y - 0.3'), 1] }, noise: 'ito' } },
      'DIFFUSION_NOT_POSITIVE',
      'particle.diffusion',
      /not positive definite$/,
    ],
    [
      { particle: { diffusion: 1, loss: varying('y - 0.3') } },
      'LOSS_NEGATIVE',
      'particle.loss',
      /^The loss rate is/,
    ],
    [{ drawing: { ...down, depth: varying('y - 0.3') } }, 'DEPTH_NOT_POSITIVE', 'drawing.depth', /depth/],
    [
      { particle: { diffusion: 1, drift: { x: varying('1/(y - y)'), y: 0 } } },
      'DRIFT_NOT_FINITE',
      'particle.drift',
      /drift/,
    ],
  ])('%j', (parts, code, key, words) => {
    const error = refusal({ drawing: down, ...parts });
    expect(error).toMatchObject({ code, where: { key } });
    expect(error.what).toMatch(words);
    const [x = Number.NaN, y = Number.NaN] = error.where.at?.[0] ?? [];
    expect(x).toBeGreaterThanOrEqual(0);
    expect(y).toBeGreaterThanOrEqual(0);
    expect(y).toBeLessThanOrEqual(code === 'DRIFT_NOT_FINITE' ? 1 : 0.3);
  });
});
