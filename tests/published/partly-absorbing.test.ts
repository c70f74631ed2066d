import { describe, expect, it } from 'vitest';
import { check, everywhere, mean, pin, point, read, share, slowestRate, tolerance } from './check.ts';
import { listed } from './listed.ts';
import type { Setting } from './setting.ts';

function strip(kinds: Setting['kinds']): Setting {
  return {
    drawing: { outline: { rectangle: [0, 0, 1, 0.25] } },
    walls: { left: { on: 'outline', where: 'x == 0' }, right: { on: 'outline', where: 'x == 1' } },
    kinds,
  };
}

const disc = (kappa: number): Setting => ({
  drawing: { outline: { circle: [0, 0], radius: 1 } },
  walls: { rim: { on: 'outline' } },
  kinds: { rim: { partlyAbsorbing: kappa } },
});

describe('partly absorbing walls', () => {
  check(
    'strip-RRob-1',
    'left end reflecting, right end with κ = 1: (1−x²)/2 + 1/κ [Collins & Kimball 1949; Redner 2001 ch. 2]',
    strip({ right: { partlyAbsorbing: 1 } }),
    {
      'u(0)': mean(point(0, 0.1), 3 / 2),
      'u(1), on the wall itself': mean(point(1, 0.1), 1),
      average: mean(everywhere, 4 / 3),
    },
  );
  check(
    'strip-ARob-3',
    'left end absorbing, right end with κ = 3 [Collins & Kimball 1949]',
    strip({ left: 'absorbing', right: { partlyAbsorbing: 3 } }),
    {
      'u(1/2)': mean(point(0.5, 0.1), 3 / 16),
      'u(1)': mean(pin(1, 0.1), 1 / 8),
      'share of the right end from 1/2': share('right', point(0.5, 0.1), 3 / 8),
      'share of the right end from the wall itself': share('right', pin(1, 0.1), 3 / 4),
    },
  );
  check('disk-Rob2', 'disc, rim with κ = 2: (1−r²)/4 + 1/(2κ) [Carslaw & Jaeger § 7.7]', disc(2), {
    'u(0)': mean(point(0, 0), 1 / 2),
    'u on the rim': mean(point(Math.cos(1), Math.sin(1)), 1 / 4),
    average: mean(everywhere, 3 / 8),
    'slowest rate': slowestRate(listed('disk-Rob2', 'rate')),
  });
  check(
    'square-Rob2',
    'square, all sides with κ = 2 [product solution, Carslaw & Jaeger §§ 3.11, 5.6]',
    {
      drawing: { outline: { rectangle: [0, 0, 1, 1] } },
      walls: { sides: { on: 'all' } },
      kinds: { sides: { partlyAbsorbing: 2 } },
    },
    {
      'u(centre)': mean(point(0.5, 0.5), listed('square-Rob2', 'u(centre)')),
      'u(corner)': mean(point(0, 0), listed('square-Rob2', 'u(corner)')),
      'u(mid side)': mean(pin(0.5, 0), listed('square-Rob2', 'u(mid side)')),
      average: mean(everywhere, listed('square-Rob2', 'avg')),
      'slowest rate': slowestRate(listed('square-Rob2', 'rate')),
    },
  );
  check(
    'thermal-plate',
    'plate with convection: temperature ÷ 100 °C is the share of the hot side, κ/D = h/k = 750/52 per metre [NAFEMS test T4, 18.3 °C printed]',
    {
      drawing: { outline: { rectangle: [0, 0, 0.6, 1] } },
      walls: {
        hot: { on: 'outline', from: 0, to: 0.6 },
        cooled: { on: 'outline', from: 0.6, to: 2.2 },
      },
      kinds: { hot: 'absorbing', cooled: { partlyAbsorbing: 750 / 52 } },
    },
    {
      'p(0.6, 0.2)': share('hot', point(0.6, 0.2), listed('thermal-plate', 'pA(0.6,0.2)')),
      'p(0, 0.5)': share('hot', point(0, 0.5), listed('thermal-plate', 'pA(0,0.5)')),
      'p(0.6, 0.5)': share('hot', point(0.6, 0.5), listed('thermal-plate', 'pA(0.6,0.5)')),
      'p(0, 1)': share('hot', pin(0, 1), listed('thermal-plate', 'pA(0,1)')),
    },
  );
  it('rel-robin-limits: κ → ∞ tends to the absorbing wall from above, κ → 0 to area/(κ·length), and a compartment without an exit is refused', () => {
    const kappas = [1e-6, 1e-3, 1, 1e3, 1e6];
    const times = kappas.map((kappa) => {
      const { values } = read(disc(kappa), { u: mean(point(0, 0), 0) });
      const time = values.get('u') ?? Number.NaN;
      // Exactly (1−r²)/4 + 1/(2κ), and area/(κ·length) = 1/(2κ).
      expect(Math.abs(time / (1 / 4 + 1 / (2 * kappa)) - 1)).toBeLessThan(tolerance);
      return time;
    });
    expect(times).toEqual([...times].sort((a, b) => b - a));
    expect(() => read(strip({}), { u: mean(point(0, 0.1), 0) })).toThrow(/exit|out|catch/i);
  });
});
