import { describe } from 'vitest';
import { check, everywhere, mean, pin, point, share } from './check.ts';
import { listed } from './listed.ts';
import type { Setting } from './setting.ts';

/** The rectangle 0 < x < a, 0 < y < b with the named sides absorbing. */
function rectangle(a: number, b: number, walls: Setting['walls']): Setting {
  return {
    drawing: { outline: { rectangle: [0, 0, a, b] } },
    walls,
    kinds: Object.fromEntries(Object.keys(walls).map((name) => [name, 'absorbing'])),
  };
}

const angle = Math.PI / 4;
/** Harmonic measure of the arc |θ| < π/4 from (r, 0): (2/π) atan((1+r)/(1−r) tan(π/8)). */
const harmonic = (r: number): number => (2 / Math.PI) * Math.atan(((1 + r) / (1 - r)) * Math.tan(angle / 2));

/** (2/π) asin k, k = [(3−2√2)(2+√5)(√10−3)(5^¼−√2)²]². */
const endsShare = (): number => {
  const root = Math.sqrt;
  const k = ((3 - 2 * root(2)) * (2 + root(5)) * (root(10) - 3) * (5 ** 0.25 - root(2)) ** 2) ** 2;
  return (2 / Math.PI) * Math.asin(k);
};

describe('shares of parts of the outline', () => {
  check(
    'disk-harm',
    'chance to leave a disc through the quarter of its rim about angle 0 [Poisson kernel]',
    {
      drawing: { outline: { circle: [0, 0], radius: 1 } },
      walls: {
        quarter: { on: 'outline', angles: [-45, 45] },
        rest: { on: 'outline', angles: [45, 315] },
      },
      kinds: { quarter: 'absorbing', rest: 'absorbing' },
    },
    {
      'p(0, 0)': share('quarter', point(0, 0), 1 / 4),
      'p(0.5, 0)': share('quarter', point(0.5, 0), harmonic(0.5)),
      'p(−0.5, 0)': share('quarter', point(-0.5, 0), harmonic(-0.5)),
      'p(0.9, 0)': share('quarter', pin(0.9, 0), harmonic(0.9)),
      'p(0.9, 0), the rest': share('rest', pin(0.9, 0), 1 - harmonic(0.9)),
      'even start, by symmetry of the average over circles': share('quarter', everywhere, 1 / 4),
    },
  );
  check(
    'rect-one-side',
    'chance to leave a 2 × 1 rectangle through the bottom [Carslaw & Jaeger § 5.2]',
    rectangle(2, 1, {
      bottom: { on: 'outline', from: 0, to: 2 },
      others: { on: 'outline', from: 2, to: 6 },
    }),
    {
      'p(1, 0.5)': share('bottom', point(1, 0.5), listed('rect-one-side', 'p(1,0.5)')),
      'p(0.5, 0.25)': share('bottom', point(0.5, 0.25), listed('rect-one-side', 'p(0.5,0.25)')),
      'p(1.9, 0.5)': share('bottom', pin(1.9, 0.5), listed('rect-one-side', 'p(1.9,0.5)')),
    },
  );
  check(
    'rect-10x1-ends',
    'chance to leave a 10 × 1 rectangle through an end, 3.84e-7 from its middle [Bornemann, Laurie, Wagon & Waldvogel 2004, problem 10]',
    rectangle(10, 1, {
      ends: { on: 'outline', where: 'x == 0 or x == 10' },
      sides: { on: 'outline', where: 'y == 0 or y == 1' },
    }),
    {
      p: share('ends', point(5, 0.5), endsShare()),
    },
  );
  check(
    'motz',
    'chance to leave by the right side: u/500 of the Motz problem [Motz 1947; Li, Mathon & Sermer 1987]',
    {
      drawing: { outline: { rectangle: [-1, 0, 1, 1] } },
      walls: { right: { on: 'outline', where: 'x == 1' }, bottom: { on: 'outline', from: 0, to: 1 } },
      kinds: { right: 'absorbing', bottom: 'absorbing' },
    },
    {
      'p(0, 0.5)': share('right', point(0, 0.5), listed('motz', 'pA(0,0.5)')),
      'p(−0.5, 0.5)': share('right', point(-0.5, 0.5), listed('motz', 'pA(-0.5,0.5)')),
      'p(0.5, 0), on a reflecting wall': share('right', point(0.5, 0), listed('motz', 'pA(0.5,0)')),
      'p(−1, 1), in a reflecting corner': share('right', pin(-1, 1), listed('motz', 'pA(-1,1)')),
    },
  );
});

describe('shares of holes and of partly absorbing walls', () => {
  check(
    'ecc-0.4',
    'eccentric ring: chance to end on the inner circle [Möbius map; Incropera et al. table 4.1 case 7]',
    {
      drawing: {
        outline: { circle: [0, 0], radius: 1 },
        holes: { inner: { circle: [0.4, 0], radius: 0.3 } },
      },
      walls: { outer: { on: 'outline' }, core: { on: 'inner' } },
      kinds: { outer: 'absorbing', core: 'absorbing' },
    },
    {
      'p(−0.5, 0)': share('core', point(-0.5, 0), listed('ecc-0.4', 'pA(-0.5,0)')),
      'p(0, 0.5)': share('core', point(0, 0.5), listed('ecc-0.4', 'pA(0,0.5)')),
      'p(0, 0)': share('core', pin(0, 0), listed('ecc-0.4', 'pA(0,0)')),
    },
  );
  check(
    'circle-in-square',
    'round hole in a square, D/w = 0.25: chance to end on the circle [Incropera et al. table 4.1 case 6, recomputed]',
    {
      drawing: {
        outline: { rectangle: [-1, -1, 1, 1] },
        holes: { hole: { circle: [0, 0], radius: 0.25 } },
      },
      walls: { square: { on: 'outline' }, circle: { on: 'hole' } },
      kinds: { square: 'absorbing', circle: 'absorbing' },
    },
    {
      'p(0.5, 0)': share('circle', point(0.5, 0), listed('circle-in-square', 'pCircle(0.5,0) D/w=0.25')),
      'p(0.5, 0.5)': share('circle', pin(0.5, 0.5), listed('circle-in-square', 'pCircle(0.5,0.5) D/w=0.25')),
      'p(−0.5, 0)': share('circle', pin(-0.5, 0), listed('circle-in-square', 'pCircle(0.5,0) D/w=0.25')),
    },
  );
  check(
    'rel-flux',
    'the share of an even start is the flux of the mean exit time through the exit ÷ area, here κ·u(1) [adjoint identity]',
    {
      drawing: { outline: { rectangle: [0, 0, 1, 0.25] } },
      walls: { left: { on: 'outline', where: 'x == 0' }, right: { on: 'outline', where: 'x == 1' } },
      kinds: { left: 'absorbing', right: { partlyAbsorbing: 3 } },
    },
    {
      'share of the right end': share('right', everywhere, 3 / 8),
      'κ·u(1)': mean(point(1, 0.125), 3 / 8, (u) => 3 * u),
    },
  );
});
