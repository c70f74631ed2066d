import { describe, expect, it } from 'vitest';
import { check, everywhere, mean, pin, point, read } from './check.ts';
import { listed, printed } from './listed.ts';
import { rectangleAverage, rectangleExitTime, rectangleFlux } from './rectangle-exit-time.ts';
import type { Setting } from './setting.ts';

/** The rectangle (0, a) × (0, 1) with its sides as walls by arc length from the lower left corner. */
function rectangle(a: number, kinds: Setting['kinds']): Setting {
  return {
    drawing: { outline: { rectangle: [0, 0, a, 1] } },
    walls: {
      bottom: { on: 'outline', from: 0, to: a },
      right: { on: 'outline', from: a, to: a + 1 },
      top: { on: 'outline', from: a + 1, to: 2 * a + 1 },
      left: { on: 'outline', from: 2 * a + 1, to: 2 * a + 2 },
    },
    kinds,
  };
}

const all = { bottom: 'absorbing', right: 'absorbing', top: 'absorbing', left: 'absorbing' };
const sides = [1, 1.5, 2, 3, 5, 8];

describe('rectangles', () => {
  for (const a of sides) {
    check(
      `rect-A-${a}`,
      'all walls absorbing: centre, quarter point, average, duct friction [Timoshenko & Goodier § 109; Shah & London 1978]',
      rectangle(a, all),
      {
        'u(centre)': mean(point(a / 2, 0.5), rectangleExitTime(a, 1, a / 2, 0.5)),
        'u(quarter point)': mean(pin(a / 4, 0.25), rectangleExitTime(a, 1, a / 4, 0.25)),
        average: mean(everywhere, rectangleAverage(a, 1)),
        'f Re = Dh²/(2·average), Dh = 2a/(a+1)': mean(
          everywhere,
          listed(`rect-A-${a}`, 'f Re (Fanning)'),
          (average) => (2 * a) ** 2 / (a + 1) ** 2 / (2 * average),
        ),
        // Printed to three decimals, up to 0.14 % from the exact factor.
        ...(a !== 8 && {
          'β = 4·average of J = β a b³, as the torsion table prints it': mean(
            everywhere,
            printed(`rect-A-${a}`, 'torsion handbook beta (J=beta a b^3)'),
            (average) => 4 * average,
          ),
        }),
      },
    );
  }

  for (const a of sides) {
    // The window is a wall of its own: its share of an even start × area ÷ width is the mean flux through it [rel-flux].
    const width = 0.06;
    const windowed: Setting = {
      ...rectangle(a, {}),
      walls: {
        window: { on: 'outline', near: [a / 2, 0], width },
        rest: { on: 'outline', from: (a + width) / 2, to: (a - width) / 2 },
      },
      kinds: { window: 'absorbing', rest: 'absorbing' },
    };
    const flux = (share: number): number => (share * a) / width;
    const window = { from: everywhere, shareOf: 'window' };
    check(
      `rect-A-${a}`,
      'the wall flux in the middle of the long side, from the share that leaves there [Timoshenko & Goodier § 109, largest shear]',
      windowed,
      {
        [`flux over the middle ${width}`]: { ...window, derived: flux, expected: rectangleFlux(a, 1, width) },
        // The largest flux is at most 0.07 % above its mean over the window; printed to three decimals.
        ...(a !== 8 && {
          'α = β/(2·largest flux) of T = α τ a b², as the torsion table prints it': {
            ...window,
            derived: (share) => (2 * rectangleAverage(a, 1)) / flux(share),
            expected: printed(`rect-A-${a}`, 'torsion handbook alpha (tau_max=T/(alpha a b^2))'),
          },
        }),
      },
    );
  }
});

describe('squares with mixed walls', () => {
  check(
    'square-mixed',
    'left side absorbing, a strip in disguise [mirror images]',
    rectangle(1, { left: 'absorbing' }),
    {
      'u(centre)': mean(point(0.5, 0.5), 3 / 8),
      average: mean(everywhere, 1 / 3),
    },
  );
  check(
    'square-mixed',
    'left and bottom absorbing, a quarter of the square of side 2 [mirror images; rel-ell]',
    rectangle(1, { left: 'absorbing', bottom: 'absorbing' }),
    {
      'u(centre)': mean(point(0.5, 0.5), rectangleExitTime(2, 2, 0.5, 0.5)),
      'u(far corner)': mean(point(1, 1), rectangleExitTime(2, 2, 1, 1)),
      average: mean(everywhere, rectangleAverage(2, 2)),
    },
  );
  check(
    'square-mixed',
    'left and right absorbing, a strip in disguise [mirror images]',
    rectangle(1, { left: 'absorbing', right: 'absorbing' }),
    { 'u(centre)': mean(point(0.5, 0.5), 1 / 8), average: mean(everywhere, 1 / 12) },
  );
  check(
    'square-mixed',
    'left, right and bottom absorbing, half of the rectangle 1 × 2 [mirror images; rel-ell]',
    rectangle(1, { left: 'absorbing', right: 'absorbing', bottom: 'absorbing' }),
    {
      'u(centre)': mean(point(0.5, 0.5), rectangleExitTime(1, 2, 0.5, 0.5)),
      average: mean(everywhere, rectangleAverage(1, 2)),
    },
  );

  it('bounds-convex: the square keeps the bounds by area A and inradius ρ: ρ²/4 ≤ max u ≤ ρ²/2, Aρ²/8 ≤ ∫u ≤ Aρ²/3 [Pólya & Szegő 1951; Sperb 1981]', () => {
    const { values } = read(rectangle(1, all), {
      max: mean(point(0.5, 0.5), 0),
      average: mean(everywhere, 0),
    });
    expect(values.get('max')).toBeGreaterThanOrEqual(1 / 16);
    expect(values.get('max')).toBeLessThanOrEqual(1 / 8);
    expect(values.get('average')).toBeGreaterThanOrEqual(1 / 32);
    expect(values.get('average')).toBeLessThanOrEqual(1 / 12);
  });
});
