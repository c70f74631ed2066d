import { describe, expect, it } from 'vitest';
import {
  assemble,
  type Drift,
  evenStart,
  exitDensity,
  exitShares,
  type Medium,
  meanExitTime,
  prepare,
  valueFromStart,
} from '../../solver/index.ts';
import { discMesh, rectangleMesh } from '../support/grid-mesh.ts';
import {
  absorbing,
  constant,
  partly,
  problem,
  reflecting,
  relativeError,
  varying,
} from '../support/physics.ts';

const turning = (speed: number): Drift => ({
  ...{ kind: 'components', x: varying((_, y) => -speed * y), y: varying((x) => speed * x) },
});
const withMedia = (media: readonly Medium[], walls = [absorbing(0)]) => ({
  ...problem(constant(1), walls),
  media,
});

describe('the cycle test', () => {
  it('finds a turning drift irreversible, at a triangle', () => {
    const system = assemble(
      discMesh({ radius: 1, rings: 6 }),
      withMedia([{ diffusion: constant(1), drift: turning(3) }]),
    );
    expect(system.cycle?.around).toBe('triangle');
    expect(system.symmetric).toBe(false);
    expect(Math.abs(system.cycle?.work ?? 0)).toBeGreaterThan(1e-3);
  });

  it('finds a steady wind over a jumping D irreversible, at the border', () => {
    const mesh = rectangleMesh({
      ...{ x: [0, 1], y: [0, 1], columns: 8, rows: 8, regionSets: [[], [0]] },
      region: (_, y) => (y < 0.5 ? 0 : 1),
    });
    const drift: Drift = { kind: 'components', x: constant(1), y: constant(0) };
    const media = [
      { diffusion: constant(1), drift },
      { diffusion: constant(4), drift },
    ];
    const walls = [reflecting, absorbing(), reflecting, reflecting];
    expect(assemble(mesh, withMedia(media, walls)).cycle).toMatchObject({
      around: 'border',
      at: [expect.any(Number), 0.5],
    });
    // Across the border instead of along it the same wind is reversible.
    const turned = { ...mesh, regionSet: mesh.regionSet.map((_, t) => (t % 16 < 8 ? 0 : 1)) };
    expect(assemble(turned, withMedia(media, walls)).cycle).toBeUndefined();
  });

  it('finds a vortex round a hole irreversible although every triangle is quiet', () => {
    const disc = discMesh({ radius: 1, rings: 8 });
    const keep = [...disc.regionSet.keys()].filter((t) => t >= 6 * 9); // takes out three rings
    const ring = {
      ...disc,
      triangles: Int32Array.from(keep.flatMap((t) => [...disc.triangles.subarray(3 * t, 3 * t + 3)])),
      regionSet: Int32Array.from(keep.map(() => 0)),
    };
    const vortex: Drift = {
      ...{
        kind: 'components',
        x: varying((x, y) => -y / (x * x + y * y)),
        y: varying((x, y) => x / (x * x + y * y)),
      },
    };
    const { cycle } = assemble(ring, withMedia([{ diffusion: constant(1), drift: vortex }]));
    expect(cycle?.around).toBe('hole');
    expect(Math.abs(cycle?.work ?? 0)).toBeCloseTo(2 * Math.PI, 9);
  });

  it('takes a gradient with sharp turns as reversible however it is entered', () => {
    const v = (x: number, y: number): number => 3 * Math.tanh(4 * (x - y)) + x * y;
    const sech2 = (x: number, y: number): number => 12 / Math.cosh(4 * (x - y)) ** 2;
    const drift: Drift = {
      kind: 'components',
      x: varying((x, y) => -2 * (sech2(x, y) + y)),
      y: varying((x, y) => -2 * (-sech2(x, y) + x)),
    };
    const { psi, mesh } = assemble(
      discMesh({ radius: 1, rings: 10 }),
      withMedia([{ diffusion: constant(2), drift }]),
    );
    for (let i = 1; i < mesh.nodes.length / 2; i++) {
      const expected = v(0, 0) - v(mesh.nodes[2 * i] ?? 0, mesh.nodes[2 * i + 1] ?? 0);
      expect((psi?.[i] ?? Number.NaN) - (psi?.[0] ?? Number.NaN)).toBeCloseTo(expected, 6);
    }
  });
});

describe('the irreversible process', () => {
  const mesh = discMesh({ radius: 1, rings: 24 });

  it('turning does not change the radial answer: u(0) = R²/4D [symmetry]', () => {
    const still = meanExitTime(assemble(mesh, problem(constant(1), [absorbing()])));
    const turned = meanExitTime(assemble(mesh, withMedia([{ diffusion: constant(1), drift: turning(5) }])));
    expect(relativeError(turned[0], still[0] ?? Number.NaN)).toBeLessThan(2e-3);
    expect(relativeError(turned[0], 0.25)).toBeLessThan(2e-3);
  });

  it('its adjoint gives the shares its fields give, and they sum to 1', () => {
    const half = discMesh({ radius: 1, rings: 16, tag: (x) => (x > 0 ? 0 : 1) });
    const drift = turning(20);
    const system = assemble(
      half,
      withMedia([{ diffusion: constant(1), drift, loss: constant(0.5) }], [absorbing(0), partly(2, 1)]),
    );
    const start = evenStart(half);
    const density = exitDensity(system, start);
    const shares = exitShares(system).map((field) => valueFromStart(start, field));
    expect(density.byExit[0]).toBeCloseTo(shares[0] ?? Number.NaN, 13);
    expect(density.byExit[1]).toBeCloseTo(shares[1] ?? Number.NaN, 13);
    expect(density.caught.reduce((a, b) => a + b, 0) + density.lost).toBeCloseTo(1, 13);
  });

  it('is solved by its factor, in no steps', () => {
    const system = assemble(mesh, withMedia([{ diffusion: constant(1), drift: turning(1000) }]));
    const solution = prepare(system).solve(system.load);
    expect([solution.converged, solution.iterations]).toEqual([true, 0]);
    const adjoint = prepare(system).solveAdjoint(system.load);
    expect([adjoint.converged, adjoint.iterations]).toEqual([true, 0]);
  });
});
