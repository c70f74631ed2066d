import { describe, expect, it } from 'vitest';
import { check, everywhere, mean, point, share } from './check.ts';
import { listed } from './listed.ts';
import { type Setting, solved } from './setting.ts';

/** Loss is held to a tenth of a per cent (issue 4). */
const within = 0.001;

const strip = (particle: object, kinds: Setting['kinds'], drawing: object = {}): Setting => ({
  drawing: { outline: { rectangle: [0, 0, 1, 0.25] }, ...drawing },
  walls: { left: { on: 'outline', where: 'x == 0' }, right: { on: 'outline', where: 'x == 1' } },
  kinds,
  particle: { diffusion: 1, ...particle },
});

/** Chance to reach an end of the strip before being lost at rate c: cosh(√c(x − ½))/cosh(√c/2). */
const reach = (c: number, x: number): number =>
  Math.cosh(Math.sqrt(c) * (x - 0.5)) / Math.cosh(Math.sqrt(c) / 2);

describe('loss on the way', () => {
  check(
    'strip-AA-kill1',
    'both ends absorbing, loss rate 1: u = 1 − p, p = cosh(x − ½)/cosh(½) [Feynman–Kac; Thiele 1939; Redner 2001]',
    strip({ loss: 1 }, { left: 'absorbing', right: 'absorbing' }),
    {
      'u(1/2)': mean(point(0.5, 0.1), 1 - reach(1, 0.5)),
      'u(1/2), as listed': mean(point(0.5, 0.2), listed('strip-AA-kill1', 'u(0.5)')),
      'share of the left end': share('left', point(0.5, 0.1), listed('strip-AA-kill1', 'p_wall(0.5)') / 2),
      'share lost': share('lost', point(0.5, 0.1), 1 - reach(1, 0.5)),
      'share lost from 0.2': share('lost', point(0.2, 0.1), 1 - reach(1, 0.2)),
      average: mean(everywhere, listed('strip-AA-kill1', 'avg')),
    },
    within,
  );

  check(
    'strip-AA-kill1',
    'the same rate as a floor of reactivity 0.1 under a depth of 0.1, which is an exit [catch rate κ/depth]',
    strip(
      {},
      { left: 'absorbing', right: 'absorbing', bed: { floor: 0.1 } },
      {
        regions: { bed: { rectangle: [-1, -1, 2, 2] } },
        depth: 0.1,
      },
    ),
    {
      'u(1/2)': mean(point(0.5, 0.1), listed('strip-AA-kill1', 'u(0.5)')),
      'share of the floor': share('bed', point(0.5, 0.1), 1 - reach(1, 0.5)),
    },
    within,
  );

  it('shares and lost sum to 1, and without exits everything is lost after 1/c', () => {
    const [open] = solved(strip({ loss: { expression: '1 + x', unit: '1' } }, { left: 'absorbing' })).answers;
    const total = Object.values(open?.shares ?? {}).reduce((sum, { value }) => sum + value, 0);
    expect(Object.keys(open?.shares ?? {})).toEqual(['left', 'lost']);
    expect(Math.abs(total - 1)).toBeLessThan(1e-12);
    const [closed] = solved(strip({ loss: 4 }, {})).answers;
    expect(closed?.mean.value).toBeCloseTo(1 / 4, 12);
    expect(closed?.shares['lost']?.value).toBeCloseTo(1, 12);
  });
});

describe('a depth that varies', () => {
  check(
    'strip-RA',
    'h = 1 + x counts like an area: (h u′)′ = −h gives u(0) = 3/4 − ½ ln 2 with the left end reflecting [Fick–Jacobs, Jacobs 1967]',
    strip({}, { right: 'absorbing' }, { depth: { expression: '1 + x', unit: '1' } }),
    { 'u(0)': mean(point(0, 0.1), 3 / 4 - Math.LN2 / 2) },
    within,
  );
});
