import fc from 'fast-check';
import { expect, it } from 'vitest';
import {
  assemble,
  type Coefficient,
  evenStart,
  exitDensity,
  exitShares,
  lostShare,
  meanExitTime,
  type Problem,
  valueFromStart,
  type Wall,
} from '../../solver/index.ts';
import { rectangleMesh } from '../support/grid-mesh.ts';
import {
  absorbing,
  constant,
  conventions,
  partly,
  problem,
  reflecting,
  varying,
} from '../support/physics.ts';

const positive = fc.double({ min: 0.01, max: 100, noNaN: true });
const wall = (exit: number): fc.Arbitrary<Wall> =>
  fc.oneof(
    fc.constant(absorbing(exit)),
    fc.constant(reflecting),
    positive.map((kappa) => partly(kappa, exit)),
  );
const walls = fc
  .tuple(wall(0), wall(1), wall(2), wall(3))
  .filter((all) => all.some((w) => w.kind !== 'reflecting'));
/** Not so small that the drift below holds particles back by 700 kT: then there is no number for the time. */
const diffusion = fc.double({ min: 0.5, max: 100, noNaN: true });
const diffusions = fc
  .tuple(diffusion, diffusion, fc.double({ min: -3, max: 3, noNaN: true }))
  .map(([left, right, slope]) => [varying((x) => left * Math.exp(slope * x)), constant(right)] as const);
const small = fc.double({ min: -20, max: 20, noNaN: true });
/** A linear drift, in general irreversible, and a loss. */
const extras = fc.record({
  push: fc.tuple(small, small, small, small, small, small),
  loss: fc.oneof(fc.constant(0), fc.double({ min: 1e-6, max: 5, noNaN: true })),
});
const cases = fc.record({
  ...{
    walls,
    diffusions,
    extras: fc.option(extras, { nil: undefined }),
    noise: fc.constantFrom(...conventions),
    height: fc.double({ min: 0.3, max: 3, noNaN: true }),
  },
  ...{ columns: fc.integer({ min: 2, max: 9 }), rows: fc.integer({ min: 2, max: 9 }) },
});
type Drawn = typeof cases extends fc.Arbitrary<infer T> ? T : never;
const options = { seed: 20261201, numRuns: 60 };

const meshOf = (c: Drawn) =>
  rectangleMesh({
    ...{ x: [0, 1], y: [0, c.height], columns: c.columns, rows: c.rows, regionSets: [[], [0]] },
    region: (x) => (x < 0.5 ? 0 : 1),
  });
/** The drawn problem with every rate, D, b, κ and c, multiplied. */
function problemOf(c: Drawn, times = 1): Problem {
  const media = c.diffusions.map((d) => {
    const diffusion: Coefficient =
      d.kind === 'constant' ? constant(times * d.value) : varying((x, y) => times * d.at(x, y));
    if (!c.extras) return { diffusion };
    const [a, b, e, f, g, h] = c.extras.push;
    const x = varying((px, py) => times * (a + b * px + e * py));
    const y = varying((px, py) => times * (f + g * px + h * py));
    return { diffusion, drift: { kind: 'components' as const, x, y }, loss: constant(times * c.extras.loss) };
  });
  const faster = (w: Wall): Wall => (w.kind === 'partlyAbsorbing' ? partly(times * w.kappa, w.exit) : w);
  return { ...problem(constant(1), c.walls.map(faster), c.noise), media, exitCount: 4 };
}

// The discrete operator is the generator of a jump process: rates ≥ 0, rows sum to −slack. Eliminating without
// subtraction keeps every entry's relative error near n·2⁻⁵³; 1e-11 leaves a wide margin for these small meshes.
const near = (value: number | undefined, expected: number): void => {
  expect(Math.abs((value ?? Number.NaN) - expected)).toBeLessThanOrEqual(1e-11 * Math.abs(expected));
};

it('shares lie in [0, 1] and sum to 1 at every node: each jump path ends in exactly one sink', () => {
  fc.assert(
    fc.property(cases, (c) => {
      const system = assemble(meshOf(c), problemOf(c));
      const shares = [...exitShares(system), lostShare(system)];
      for (let i = 0; i < (shares[0]?.length ?? 0); i++) {
        let sum = 0;
        for (const field of shares) {
          expect(field[i]).toBeGreaterThanOrEqual(0);
          sum += field[i] ?? Number.NaN;
        }
        near(sum, 1);
      }
    }),
    options,
  );
});

it('u > 0 off the absorbing walls: A is a non-singular M-matrix, its inverse has no negative entry', () => {
  fc.assert(
    fc.property(cases, (c) => {
      const system = assemble(meshOf(c), problemOf(c));
      const u = meanExitTime(system);
      for (let i = 0; i < u.length; i++) {
        if ((system.freeOf[i] ?? -1) >= 0) expect(u[i]).toBeGreaterThan(0);
        else expect(u[i]).toBe(0);
      }
    }),
    options,
  );
});

it('raising κ or making a wall absorbing never raises u at any node: A grows on the diagonal, A⁻¹ ≥ 0 falls', () => {
  // (A + E)⁻¹ = A⁻¹ − (A + E)⁻¹ E A⁻¹ with E ≥ 0 diagonal; an absorbing wall is the limit κ → ∞.
  const harder = (w: Wall, factor: number): Wall =>
    w.kind === 'partlyAbsorbing' ? (factor > 3 ? absorbing(w.exit) : partly(w.kappa * factor, w.exit)) : w;
  fc.assert(
    fc.property(cases, fc.double({ min: 1, max: 4, noNaN: true }), (c, factor) => {
      const mesh = meshOf(c);
      const before = meanExitTime(assemble(mesh, problemOf(c)));
      const after = meanExitTime(
        assemble(
          mesh,
          problemOf({ ...c, walls: [...c.walls].map((w) => harder(w, factor)) as Drawn['walls'] }),
        ),
      );
      for (let i = 0; i < before.length; i++) {
        expect(after[i]).toBeLessThanOrEqual((before[i] ?? Number.NaN) * (1 + 1e-11));
      }
    }),
    options,
  );
});

it('D, b, κ and c times 2 halve u: β and the ratio of A to the load are unchanged', () => {
  fc.assert(
    fc.property(cases, (c) => {
      const mesh = meshOf(c);
      const u = meanExitTime(assemble(mesh, problemOf(c)));
      meanExitTime(assemble(mesh, problemOf(c, 2))).forEach((value, i) => {
        near(value, (u[i] ?? Number.NaN) / 2);
      });
    }),
    options,
  );
});

it('lengths times s, κ divided by s: u times s²', () => {
  fc.assert(
    fc.property(cases, fc.constantFrom(1e-6, 0.125, 3, 1e5), (c, s) => {
      const mesh = meshOf(c);
      const plain = { ...problem([constant(2), constant(0.3)], c.walls, c.noise), exitCount: 4 };
      const u = meanExitTime(assemble(mesh, plain));
      const scaled = { ...mesh, nodes: mesh.nodes.map((v) => v * s) };
      const scaledWalls = c.walls.map((w) =>
        w.kind === 'partlyAbsorbing' ? partly(w.kappa / s, w.exit) : w,
      );
      const larger = { ...problem([constant(2), constant(0.3)], scaledWalls, c.noise), exitCount: 4 };
      meanExitTime(assemble(scaled, larger)).forEach((value, i) => {
        near(value, (u[i] ?? Number.NaN) * s * s);
      });
    }),
    options,
  );
});

it('renumbering the nodes changes u by rounding only: the process does not know its numbers', () => {
  fc.assert(
    fc.property(cases, fc.integer(), (c, seed) => {
      const mesh = meshOf(c);
      const n = mesh.nodes.length / 2;
      const to = [...Array(n).keys()];
      let state = seed >>> 0;
      for (let i = n - 1; i > 0; i--) {
        state = (Math.imul(state, 1664525) + 1013904223) >>> 0; // Numerical Recipes' generator, recalled
        const j = state % (i + 1);
        [to[i], to[j]] = [to[j] ?? 0, to[i] ?? 0];
      }
      const nodes = new Float64Array(2 * n);
      to.forEach((target, i) => {
        nodes.set(mesh.nodes.subarray(2 * i, 2 * i + 2), 2 * target);
      });
      const renumber = (v: number): number => to[v] ?? -1;
      const other = {
        ...mesh,
        nodes,
        triangles: mesh.triangles.map(renumber),
        segments: mesh.segments.map(renumber),
      };
      const u = meanExitTime(assemble(mesh, problemOf(c)));
      const v = meanExitTime(assemble(other, problemOf(c)));
      to.forEach((target, i) => {
        near(v[target], u[i] ?? Number.NaN);
      });
    }),
    options,
  );
});

it('shares from the adjoint equal shares from the fields, and sum to 1: ρᵀA⁻¹s = (A⁻ᵀρ)ᵀs', () => {
  fc.assert(
    fc.property(cases, (c) => {
      const mesh = meshOf(c);
      const system = assemble(mesh, problemOf(c));
      const start = evenStart(mesh, (set) => set === 0);
      const density = exitDensity(system, start);
      near(density.caught.reduce((a, b) => a + b, 0) + density.lost, 1);
      exitShares(system).forEach((field, exit) => {
        near(density.byExit[exit], valueFromStart(start, field));
      });
    }),
    options,
  );
});
