import { describe, expect, it } from 'vitest';
import { assemble, type Problem } from '../../solver/index.ts';
import { prepareBrackets } from '../../solver/trust/brackets.ts';
import { type ConsistentSystem, consistentSystem } from '../../solver/trust/consistent-system.ts';
import { crouzeixRaviart } from '../../solver/trust/crouzeix-raviart.ts';
import { coefficientSource } from '../../solver/trust/element-sources.ts';
import { galerkinSolution } from '../../solver/trust/galerkin-solution.ts';
import { shareProblems } from '../../solver/trust/share-problems.ts';
import { rectangleMesh } from '../support/grid-mesh.ts';
import { absorbing, constant, partly, problem, reflecting, varying } from '../support/physics.ts';
import { even } from './bracket-cases.ts';

const square = (n: number) => rectangleMesh({ x: [0, 1], y: [0, 1], columns: n, rows: n });
const baseOf = (n: number, physics: Problem): ConsistentSystem =>
  consistentSystem(assemble(square(n), physics), physics);
const sum = (values: Iterable<number>): number => [...values].reduce((total, value) => total + value, 0);

/** Everything at once: D and a potential that vary, loss, walls of three kinds. */
const mixed: Problem = {
  ...problem(constant(1), [absorbing(0), partly(3, 1), reflecting, partly(0.2, 1)], 'ito'),
  media: [
    {
      diffusion: varying((x, y) => 1 + x + y * y),
      loss: varying((x) => 2 + x),
      drift: { kind: 'potential', value: varying((x, y) => x * x - y) },
    },
  ],
};

describe('the equilibrated flux', () => {
  const base = baseOf(8, mixed);
  const { coefficients, geometry, sides, system } = base;
  const source = coefficientSource(system.mesh, geometry, coefficients, coefficients.mass);
  const u = galerkinSolution(base, { source });

  it('balances f − ĉu_h in every triangle: −∇·σ = Π(f − ĉu_h) [Braess & Schöberl 2008]', () => {
    const { load } = coefficientSource(
      system.mesh,
      geometry,
      coefficients,
      coefficients.loss ?? new Float64Array(),
      u.field,
    );
    for (let t = 0; t < geometry.count; t++) {
      const wanted = sum(source.load.slice(3 * t, 3 * t + 3)) - sum(load.slice(3 * t, 3 * t + 3));
      const got = -2 * (u.parts[5 * t + 2] ?? Number.NaN) * (geometry.area[t] ?? Number.NaN);
      expect(got).toBeCloseTo(wanted, 13);
    }
  });

  it('has no normal component on reflecting walls and is the same from both sides of every edge [RT0]', () => {
    const { mesh } = system;
    let walls = 0;
    const through = new Map<string, number>();
    for (let side = 0; side < sides.kind.length; side++) {
      const [a, b] = [1, 2].map((v) => mesh.triangles[3 * Math.floor(side / 3) + ((side + v) % 3)] ?? 0);
      const flux = fluxThrough(base, u.parts, side, a ?? 0, b ?? 0);
      if (sides.kind[side] === 1) {
        walls++;
        expect(flux).toBeCloseTo(0, 12);
      } else if (sides.kind[side] === 0) {
        const key = [a, b].sort().join(' ');
        through.set(key, (through.get(key) ?? 0) + flux);
      }
    }
    expect(walls).toBe(8);
    expect(through.size).toBeGreaterThan(100);
    for (const jump of through.values()) expect(jump).toBeCloseTo(0, 12);
  });

  it('is the mean of −κ̂u_h on partly absorbing walls: what they lack has no mean', () => {
    const weights = [0.11846344252809454, 0.23931433524968324, 64 / 225];
    expect(sides.exchanges.count).toBe(16);
    for (let w = 0; w < sides.exchanges.count; w++) {
      const gap = u.wallGap.subarray(5 * w, 5 * w + 5);
      const mean = sum(gap.map((value, g) => value * (weights[Math.min(g, 4 - g)] ?? 0)));
      expect(mean).toBeCloseTo(0, 12);
      expect(Math.max(...gap)).toBeGreaterThan(1e-6);
    }
  });
});

/** Outward flux of σ through a side from node a to b, seen from its triangle. */
function fluxThrough(
  { system, geometry }: ConsistentSystem,
  parts: Float64Array,
  side: number,
  a: number,
  b: number,
): number {
  const { nodes } = system.mesh;
  const t = Math.floor(side / 3);
  const at = (values: Float64Array, q: number): number => values[q] ?? Number.NaN;
  const corner = system.mesh.triangles[3 * t] ?? 0;
  const cx = at(nodes, 2 * corner) - at(geometry.offX, 3 * t);
  const cy = at(nodes, 2 * corner + 1) - at(geometry.offY, 3 * t);
  const x = (at(nodes, 2 * a) + at(nodes, 2 * b)) / 2 - cx;
  const y = (at(nodes, 2 * a + 1) + at(nodes, 2 * b + 1)) / 2 - cy;
  const sx = at(parts, 5 * t) + at(parts, 5 * t + 2) * x;
  const sy = at(parts, 5 * t + 1) + at(parts, 5 * t + 2) * y;
  return sx * (at(nodes, 2 * b + 1) - at(nodes, 2 * a + 1)) - sy * (at(nodes, 2 * b) - at(nodes, 2 * a));
}

it('from a start ∝ f the lower end is Galerkin’s value 2∫fu_h − a(u_h, u_h) = ∫fu_h [METHODS 6]', () => {
  const physics = problem(constant(1), [absorbing(), partly(2), reflecting, absorbing()]);
  const system = assemble(square(12), physics);
  const brackets = prepareBrackets(system, physics);
  const base = brackets?.base ?? baseOf(12, physics);
  const source = coefficientSource(
    base.system.mesh,
    base.geometry,
    base.coefficients,
    base.coefficients.mass,
  );
  const { field } = galerkinSolution(base, { source });
  const value = sum(source.load.map((part, q) => part * (field[base.system.mesh.triangles[q] ?? 0] ?? 0)));
  const low = brackets?.mean(even).low ?? Number.NaN;
  expect(Math.abs(low / value - 1)).toBeLessThan(1e-12);
});

describe('the lower bound of the rate', () => {
  it('the Crouzeix–Raviart matrix takes x to its energy, ∫|∇x|² = 1, and the mass matrix 1 to the area [Crouzeix & Raviart 1973]', () => {
    const physics = problem(constant(1), [reflecting, partly(1e-9), reflecting, reflecting]);
    const base = baseOf(5, physics);
    const { size, first, second, value, diagonal, mass, interpolate } = crouzeixRaviart(base);
    const x = interpolate(base.system.mesh.nodes.filter((_, q) => q % 2 === 0));
    let energy = sum(diagonal.map((d, i) => d * (x[i] ?? 0) ** 2));
    for (let p = 0; p < value.length; p++) {
      energy += 2 * (value[p] ?? 0) * (x[first[p] ?? 0] ?? 0) * (x[second[p] ?? 0] ?? 0);
    }
    expect(size).toBe(85);
    expect(energy).toBeCloseTo(1, 8);
    expect(sum(mass)).toBeCloseTo(1, 12);
  });

  it('takes 1/8 + j₁,₁⁻² = 0.1931 times the largest squared side of the pencil’s rate [Carstensen & Gedicke 2014]', () => {
    const physics = problem(constant(1), [absorbing(), absorbing(), absorbing(), absorbing()]);
    const { lowerBound } = crouzeixRaviart(baseOf(5, physics));
    expect(lowerBound(20)).toBeCloseTo(20 / (1 + 0.1931 * (2 / 25) * 20), 3);
  });
});

it('where exits touch, wall values lie above the share’s on one side and below on the other [maximum principle]', () => {
  const physics = problem(constant(1), [absorbing(0), absorbing(1), absorbing(1), absorbing(1)]);
  const base = baseOf(32, physics);
  const { below, above } = shareProblems(base, 0, { edges: 4, length: 1 });
  const { nodes } = base.system.mesh;
  let ramps = 0;
  for (let i = 0; i < base.system.freeOf.length; i++) {
    if ((base.system.freeOf[i] ?? 0) >= 0) continue;
    const [x, y] = [nodes[2 * i] ?? Number.NaN, nodes[2 * i + 1] ?? Number.NaN];
    const [low, high] = [below.wallValues?.[i] ?? Number.NaN, above.wallValues?.[i] ?? Number.NaN];
    const inside = y === 0 && x > 0 && x < 1;
    // The share is 1 on the open bottom side and 0 on the rest.
    expect(low).toBeLessThanOrEqual(inside ? 1 : 0);
    expect(high).toBeGreaterThanOrEqual(y === 0 ? 1 : 0);
    expect(Math.min(low, high)).toBeGreaterThanOrEqual(0);
    expect(Math.max(low, high)).toBeLessThanOrEqual(1);
    if ((low > 0 && low < 1) || (high > 0 && high < 1)) ramps++;
  }
  expect(ramps).toBe(12);
});

it('asks whether to stop while it solves, equilibrates and bounds the rate, and ends with SOLVING_STOPPED', () => {
  const physics = problem(constant(1), [absorbing(0), absorbing(1), partly(2, 1), reflecting]);
  const system = assemble(square(40), physics);
  let asked = 0;
  let last = Number.POSITIVE_INFINITY;
  const brackets = prepareBrackets(system, physics, { stop: () => ++asked >= last });
  if (!brackets) throw new Error('not reversible');
  for (const figure of [
    () => brackets.mean({ kind: 'spot', x: 0.5, y: 0.5, radius: 0.2 }),
    () => brackets.share(even, 0),
    () => brackets.rate(),
  ]) {
    last = asked + 6;
    expect(figure).toThrow(expect.objectContaining({ code: 'SOLVING_STOPPED' }));
    last = Number.POSITIVE_INFINITY;
    expect(figure).not.toThrow();
  }
});
