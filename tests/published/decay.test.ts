import { describe } from 'vitest';
import { check, slowestRate } from './check.ts';
import { listed } from './listed.ts';
import type { Setting } from './setting.ts';

describe('the slowest rate of leaving', () => {
  for (const bi of [0.1, 1, 10]) {
    check(
      'strip-RRob-rate',
      `left end reflecting, right end with κL/D = ${bi}: ζ², ζ tan ζ = κL/D [Carslaw & Jaeger 1959, app. IV]`,
      {
        drawing: { outline: { rectangle: [0, 0, 1, 0.25] } },
        walls: { right: { on: 'outline', where: 'x == 1' } },
        kinds: { right: { partlyAbsorbing: bi } },
      },
      { rate: slowestRate(listed('strip-RRob-rate', `rate(Bi=${bi})`)) },
    );
  }

  const ring = (kinds: Setting['kinds']): Setting => ({
    drawing: { outline: { circle: [0, 0], radius: 1 }, holes: { core: { circle: [0, 0], radius: 0.5 } } },
    walls: { outer: { on: 'outline' }, inner: { on: 'core' } },
    kinds,
  });
  for (const [label, kinds] of [
    ['both absorb', { outer: 'absorbing', inner: 'absorbing' }],
    ['inner absorb, outer reflect', { inner: 'absorbing' }],
    ['inner reflect, outer absorb', { outer: 'absorbing' }],
  ] as const) {
    check('annulus-eigs', `ring ½ < r < 1, ${label} [Abramowitz & Stegun § 9.5]`, ring(kinds), {
      rate: slowestRate(listed('annulus-eigs', label)),
    });
  }

  const side = {
    left: { on: 'outline', where: 'x == 0' },
    right: { on: 'outline', where: 'x == 1' },
    bottom: { on: 'outline', where: 'y == 0' },
  };
  for (const [label, names] of [
    ['left only', ['left']],
    ['left+bottom', ['left', 'bottom']],
    ['three (left,right,bottom)', ['left', 'right', 'bottom']],
  ] as const) {
    check(
      'rect-eigs',
      `unit square, absorbing: ${label} [separation of variables, Courant & Hilbert vol. 1]`,
      {
        drawing: { outline: { rectangle: [0, 0, 1, 1] } },
        walls: side,
        kinds: Object.fromEntries(names.map((name) => [name, 'absorbing'])),
      },
      { rate: slowestRate(listed('rect-eigs', label)) },
    );
  }
});
