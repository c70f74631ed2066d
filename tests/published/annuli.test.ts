import { describe } from 'vitest';
import { check, everywhere, mean, pin, point } from './check.ts';
import { listed } from './listed.ts';
import type { Setting } from './setting.ts';

/** The unit disc with a round hole of radius a at (x, 0). */
function annulus(a: number, kinds: Setting['kinds'], x = 0): Setting {
  return {
    drawing: {
      outline: { circle: [0, 0], radius: 1 },
      holes: { hole: { circle: [x, 0], radius: a } },
    },
    walls: { outer: { on: 'outline' }, inner: { on: 'hole' } },
    kinds,
  };
}

/** The square |x|, |y| < 1 with a round hole of radius a in the middle. */
function squareWithHole(a: number, kinds: Setting['kinds']): Setting {
  return {
    drawing: { outline: { rectangle: [-1, -1, 1, 1] }, holes: { hole: { circle: [0, 0], radius: a } } },
    walls: { square: { on: 'outline' }, circle: { on: 'hole' } },
    kinds,
  };
}

const both = { outer: 'absorbing', inner: 'absorbing' };

/** Average over a < r < 1 with both walls absorbing: (1 + a² − (1−a²)/ln(1/a))/8 (annulus flow, Bird, Stewart & Lightfoot). */
const annulusAverage = (a: number): number => (1 + a * a - (1 - a * a) / Math.log(1 / a)) / 8;

describe('rings and holes', () => {
  check(
    'annulus-inA-outR-a',
    'inner wall absorbing, outer reflecting, u = (a²−r²+2 ln(r/a))/4 [Berg & Purcell 1977; Krogh cylinder]',
    annulus(0.5, { inner: 'absorbing' }),
    {
      'u(1), on the wall': mean(point(0, 1), (0.25 - 1 + 2 * Math.log(2)) / 4),
      'u(0.75)': mean(pin(-0.75, 0), (0.25 - 0.5625 + 2 * Math.log(1.5)) / 4),
      average: mean(everywhere, listed('annulus-inA-outR-a', 'avg')),
    },
  );
  check(
    'annulus-AA-a',
    'both walls absorbing [Redner 2001 ch. 6; Bird, Stewart & Lightfoot]',
    annulus(0.5, both),
    {
      'u(3/4)': mean(point(0, 0.75), listed('annulus-AA-a', 'u(r_mid)')),
      average: mean(everywhere, annulusAverage(0.5)),
      'share of the inner wall from 3/4: ln(r)/ln(a)': {
        from: point(0.75, 0),
        shareOf: 'inner',
        expected: Math.log(0.75) / Math.log(0.5),
      },
      'share of the inner wall, even start': {
        from: everywhere,
        shareOf: 'inner',
        expected: listed('annulus-AA-a', 'pInner uniform start'),
      },
    },
  );
  check(
    'annulus-inR-outA-b',
    'small reflecting hole, outer wall absorbing, u = (1−r²−2a² ln(1/r))/4 [Redner 2001 ch. 6]',
    annulus(0.1, { outer: 'absorbing' }),
    {
      'u(a), on the hole': mean(point(0.1, 0), (1 - 0.01 - 0.02 * Math.log(10)) / 4),
      average: mean(everywhere, listed('annulus-inR-outA-b', 'avg')),
    },
  );
  for (const a of [0.05, 0.1, 0.25, 0.5, 0.8]) {
    check(
      'annulus-duct',
      `friction of an annular duct with radius ratio ${a}: f Re = 2(1−a)²/average [Shah & London 1978 table 86; Lundberg et al. 1963]`,
      annulus(a, both),
      {
        average: mean(everywhere, annulusAverage(a)),
        'f Re': mean(
          everywhere,
          listed('annulus-duct', `f Re r*=${a}`),
          (average) => (2 * (1 - a)) ** 2 / (2 * average),
        ),
      },
    );
  }
  check(
    'ecc-exit-AA',
    'eccentric ring, both walls absorbing [Snyder & Goldstein 1965, recomputed]',
    annulus(0.3, both, 0.4),
    {
      'u(−0.5, 0)': mean(point(-0.5, 0), listed('ecc-exit-AA', 'u(-0.5)')),
      'u(0, 0)': mean(pin(0, 0), listed('ecc-exit-AA', 'u(0)')),
      'u(0, 0.5)': mean(pin(0, 0.5), listed('ecc-exit-AA', 'u(0.5j)')),
      'u(−0.3, 0)': mean(pin(-0.3, 0), listed('ecc-exit-AA', 'u(-0.3)')),
    },
  );
  check(
    'trap-cell-0.1',
    'round trap in a reflecting square cell [Hasimoto 1959; Torney & Goldstein 1987]',
    squareWithHole(0.1, { circle: 'absorbing' }),
    {
      average: mean(everywhere, listed('trap-cell-0.1', 'avg')),
      'u(1, 0)': mean(point(1, 0), listed('trap-cell-0.1', 'u(1,0)')),
      'u(1, 1)': mean(point(1, 1), listed('trap-cell-0.1', 'u(1,1)')),
      // (L²/2π)(ln(L/a) − 1.3105 + πa²/L²) with L = 2, over the full cell.
      'average with the trap counted as 0: the lattice expansion': mean(
        everywhere,
        (2 / Math.PI) * (Math.log(20) - 1.3105 + (Math.PI * 0.01) / 4),
        (average) => average * (1 - (Math.PI * 0.01) / 4),
      ),
    },
  );
  check(
    'sq-round-core-AA',
    'square duct with a round core, all walls absorbing [Shah & London 1978; Cheng & Jamil 1970]',
    squareWithHole(0.5, { circle: 'absorbing', square: 'absorbing' }),
    {
      average: mean(everywhere, listed('sq-round-core-AA', 'avg')),
      'u(0.75, 0)': mean(point(0.75, 0), listed('sq-round-core-AA', 'u(0.75,0)')),
      'u(0.75, 0.75)': mean(point(0.75, 0.75), listed('sq-round-core-AA', 'u(0.75,0.75)')),
      'f Re': mean(everywhere, listed('sq-round-core-AA', 'f Re (Fanning)'), (average) => {
        const diameter = (4 * (4 - Math.PI / 4)) / (8 + Math.PI);
        return diameter ** 2 / (2 * average);
      }),
    },
  );
});
