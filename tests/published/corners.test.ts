import { describe, expect, it } from 'vitest';
import { check, everywhere, mean, pin, point, read, slowestRate, tolerance } from './check.ts';
import { listed } from './listed.ts';
import { sectorExitTime, wedgeExitTime } from './sector-exit-time.ts';
import type { Setting } from './setting.ts';

const absorbing = (outline: object): Setting => ({
  drawing: { y: 'up', outline },
  walls: { rim: { on: 'all' } },
  kinds: { rim: 'absorbing' },
});
const polygon = (...points: readonly (readonly [number, number])[]): Setting =>
  absorbing({ polygon: points });

/** The sector of radius R about the x axis, all walls absorbing. */
function sector(opening: number, radius: number): Setting {
  const x = radius * Math.cos(opening / 2);
  const y = radius * Math.sin(opening / 2);
  return absorbing({ path: `M 0 0 L ${x} ${-y} A ${radius} ${radius} 0 0 1 ${x} ${y} Z` });
}

/** Duct friction f Re = Dh²/(2·average), Dh = 4·area/perimeter [Shah & London 1978]. */
const friction =
  (area: number, perimeter: number) =>
  (average: number): number =>
    (4 * area) ** 2 / perimeter ** 2 / (2 * average);

const lShape: readonly (readonly [number, number])[] = [
  [0, 0],
  [1, 0],
  [1, 1],
  [-1, 1],
  [-1, -1],
  [0, -1],
];

describe('triangles', () => {
  check(
    'tri-equi-A',
    'equilateral triangle, u = product of the distances to the walls ÷ height [Timoshenko & Goodier § 106; Shah & London 1978]',
    polygon([0, 0], [1, 0], [0.5, Math.sqrt(3) / 2]),
    {
      'u(centroid) = 1/36': mean(point(0.5, Math.sqrt(3) / 6), 1 / 36),
      average: mean(everywhere, 1 / 80),
      'slowest rate 16π²/3 [Lamé 1852; Pinsky 1980]': slowestRate((16 * Math.PI ** 2) / 3),
      'f Re = 40/3': mean(everywhere, 40 / 3, friction(Math.sqrt(3) / 4, 3)),
      'torsion J = √3/80': mean(everywhere, Math.sqrt(3) / 80, (u) => Math.sqrt(3) * u),
    },
  );
  check(
    'tri-right-A',
    'right isosceles triangle [Timoshenko & Goodier; Roark J = 0.0261 a⁴; Shah & London 1978]',
    polygon([0, 0], [1, 0], [0, 1]),
    {
      average: mean(everywhere, listed('tri-right-A', 'avg')),
      'slowest rate 5π²': slowestRate(5 * Math.PI ** 2),
      'torsion J = 2·average': mean(everywhere, listed('tri-right-A', 'torsion J'), (u) => 2 * u),
      'f Re': mean(everywhere, listed('tri-right-A', 'f Re (Fanning)'), friction(0.5, 2 + Math.SQRT2)),
    },
  );
  for (const apex of [30, 90]) {
    const id = `tri-iso-${apex}`;
    const b = Math.tan((apex * Math.PI) / 360);
    check(
      id,
      `isosceles triangle, apex ${apex} degrees, height 1 [Shah & London 1978]`,
      polygon([-b, 0], [b, 0], [0, 1]),
      {
        average: mean(everywhere, listed(id, 'avg')),
        'u(0, 1/3)': mean(point(0, 1 / 3), listed(id, 'u(0,1/3)')),
        'f Re': mean(everywhere, listed(id, 'f Re (Fanning)'), friction(b, 2 * b + 2 * Math.hypot(b, 1))),
      },
    );
  }
});

describe('sectors', () => {
  check(
    'sector-A-60deg',
    'sector of 60 degrees [Timoshenko & Goodier § 110; Shah & London 1978]',
    sector(Math.PI / 3, 1),
    {
      'u on the axis at 1/2': mean(point(0.5, 0), sectorExitTime(Math.PI / 3, 1, 0.5)),
      average: mean(everywhere, listed('sector-A-60deg', 'avg')),
      'slowest rate': slowestRate(listed('sector-A-60deg', 'rate')),
      'f Re': mean(
        everywhere,
        listed('sector-A-60deg', 'f Re (Fanning)'),
        friction(Math.PI / 6, 2 + Math.PI / 3),
      ),
      'torsion J': mean(everywhere, listed('sector-A-60deg', 'torsion J'), (u) => ((4 * Math.PI) / 6) * u),
    },
  );
  check(
    'sector-A-semicircle',
    'half disc, torsion J = π/2 − 4/π [Timoshenko & Goodier § 110; Shah & London 1978]',
    sector(Math.PI, 1),
    {
      'u on the axis at 1/2': mean(point(0.5, 0), sectorExitTime(Math.PI, 1, 0.5)),
      average: mean(everywhere, (Math.PI / 2 - 4 / Math.PI) / (2 * Math.PI)),
      'slowest rate': slowestRate(listed('sector-A-semicircle', 'rate')),
      'f Re': mean(
        everywhere,
        listed('sector-A-semicircle', 'f Re (Fanning)'),
        friction(Math.PI / 2, 2 + Math.PI),
      ),
    },
  );
  it('wedge-fact: near the tip of a 60 degree wedge cut ever further out u rises to that of the wedge without an end, 1/4 at distance 1 [Spitzer 1958]', () => {
    const opening = Math.PI / 3;
    const times = [2, 4, 8].map((radius) => {
      const { values } = read(sector(opening, radius), { tip: mean(point(1, 0), 0) });
      const time = values.get('tip') ?? Number.NaN;
      expect(Math.abs(time / sectorExitTime(opening, radius, 1) - 1)).toBeLessThan(tolerance);
      return time;
    });
    expect(times).toEqual([...times].sort((a, b) => a - b));
    expect(times.at(-1)).toBeLessThan(wedgeExitTime(opening, 1));
    expect(times.at(-1)).toBeGreaterThan(0.85 * wedgeExitTime(opening, 1));
  });
});

describe('polygons with corners inwards and outwards', () => {
  check(
    'L-A',
    'L of three unit squares, ∫u = 0.2140758 [recomputed by the method of particular solutions]',
    polygon(...lShape),
    {
      average: mean(everywhere, listed('L-A', 'avg')),
      'slowest rate [L-eig: Fox, Henrici & Moler 1967; Betcke & Trefethen 2005]': slowestRate(
        listed('L-eig', 'rate 1'),
      ),
      'u(−0.5, 0.5)': mean(point(-0.5, 0.5), listed('L-A', 'u(-0.5,0.5)')),
      'u(0.5, 0.5)': mean(pin(0.5, 0.5), listed('L-A', 'u(0.5,0.5)')),
      'torsion J = 4 ∫u': mean(everywhere, listed('L-A', 'torsion J'), (u) => 12 * u),
    },
  );
  it('bounds-L and rel-eps: ∫u of the L lies between that of an inscribed 2 × 1 rectangle and Saint-Venant’s A²/8π, max u below A/4π, and Galerkin’s ∫u below the exact one [Pólya & Szegő 1951; Talenti 1976]', () => {
    const { values } = read(polygon(...lShape), {
      average: mean(everywhere, 0),
      bend: mean(point(-0.4, 0.4), 0),
    });
    const integral = 3 * (values.get('average') ?? Number.NaN);
    expect(integral).toBeGreaterThan(listed('bounds-L', 'lower (2x1 rectangle)'));
    expect(integral).toBeLessThan(9 / (8 * Math.PI));
    expect(values.get('bend')).toBeLessThan(3 / (4 * Math.PI));
    // With D = 1 and no partly absorbing wall the edge-averaged matrix and the lumped load are the Galerkin ones, and
    // Galerkin's ∫u_h = ∫|∇u_h|² is the largest the trial space allows, never above ∫u [rel-eps].
    expect(integral).toBeLessThan(listed('L-A', 'integral of u'));
  });
  check(
    'plus-A',
    'cross of five unit squares [recomputed; a classical example for torsion bounds, Pólya & Szegő 1951]',
    polygon(
      [1.5, -0.5],
      [1.5, 0.5],
      [0.5, 0.5],
      [0.5, 1.5],
      [-0.5, 1.5],
      [-0.5, 0.5],
      [-1.5, 0.5],
      [-1.5, -0.5],
      [-0.5, -0.5],
      [-0.5, -1.5],
      [0.5, -1.5],
      [0.5, -0.5],
    ),
    {
      average: mean(everywhere, listed('plus-A', 'avg')),
      'u(0, 0)': mean(point(0, 0), listed('plus-A', 'u(centre)')),
      'u in the middle of an arm': mean(pin(1, 0), listed('plus-A', 'u(1,0) arm centre')),
      'u in the middle of another arm': mean(pin(0, -1), listed('plus-A', 'u(1,0) arm centre')),
    },
  );
  check(
    'octagon-A',
    'regular octagon, 1 across flats [Roark; Shah & London 1978]',
    polygon(
      ...Array.from({ length: 8 }, (_, k): readonly [number, number] => {
        const angle = ((2 * k + 1) * Math.PI) / 8;
        const reach = 0.5 / Math.cos(Math.PI / 8);
        return [reach * Math.cos(angle), reach * Math.sin(angle)];
      }),
    ),
    {
      average: mean(everywhere, listed('octagon-A', 'avg')),
      'u(0, 0)': mean(point(0, 0), listed('octagon-A', 'u(centre)')),
      'torsion J = 4 ∫u': mean(
        everywhere,
        listed('octagon-A', 'torsion J/d^4'),
        (u) => 4 * 2 * Math.tan(Math.PI / 8) * u,
      ),
      'f Re': mean(
        everywhere,
        listed('octagon-A', 'f Re (Fanning)'),
        friction(2 * Math.tan(Math.PI / 8), 8 * Math.tan(Math.PI / 8)),
      ),
    },
  );
  check(
    'sqring-inA',
    'square ring, inner wall absorbing, outer reflecting [recomputed by the method of particular solutions]',
    {
      drawing: {
        outline: { rectangle: [-1, -1, 1, 1] },
        holes: { core: { rectangle: [-0.5, -0.5, 0.5, 0.5] } },
      },
      walls: { core: { on: 'core' } },
      kinds: { core: 'absorbing' },
    },
    {
      average: mean(everywhere, listed('sqring-inA', 'avg')),
      'u(1, 0)': mean(point(1, 0), listed('sqring-inA', 'u(1,0)')),
      'u(1, 1)': mean(point(1, 1), listed('sqring-inA', 'u(1,1)')),
    },
  );
});
