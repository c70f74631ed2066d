import { describe, expect, it } from 'vitest';
import {
  assemble,
  evenStart,
  exitDensity,
  exitShares,
  meanExitTime,
  valueFromStart,
  type Wall,
} from '../../solver/index.ts';
import { cutMesh } from '../support/cut-mesh.ts';
import { rectangleMesh } from '../support/grid-mesh.ts';
import {
  absorbing,
  constant,
  nodeAt,
  partly,
  problem,
  reflecting,
  relativeError,
} from '../support/physics.ts';

const permeable = (permeability: number): Wall => ({ kind: 'permeable', permeability });
const strip = rectangleMesh({
  ...{ x: [0, 1], y: [0, 0.1], columns: 40, rows: 4, regionSets: [[], [0]] },
  region: (x) => (x < 0.5 ? 0 : 1),
});
const cut = cutMesh(strip, 0.5, 0, 4);
const middle = nodeAt(cut.nodes, 0.5, 0.05); // the left one of the two
const both = [constant(1), constant(1)];
const rightExit = (wall: Wall) => [reflecting, absorbing(), reflecting, reflecting, wall];

describe('a permeable wall across the strip at x = a', () => {
  it.each([0.01, 1, 1e6])(
    'P = %d, x = 0 reflecting, x = 1 absorbing: u = (1 − x²)/2 + a/P in front of it [exact]',
    (p) => {
      const u = meanExitTime(assemble(cut, problem(both, rightExit(permeable(p)))));
      expect(relativeError(u[nodeAt(cut.nodes, 0, 0.05)], 0.5 + 0.5 / p)).toBeLessThan(1e-3);
      expect(relativeError(u[middle], 0.375 + 0.5 / p)).toBeLessThan(1e-3);
      expect(relativeError(u[nodeAt(cut.nodes, 0.75, 0.05)], (1 - 0.75 ** 2) / 2)).toBeLessThan(1e-3);
    },
  );

  it('adds 1/P to the resistances in series: share of x = 1 from the left side is (a/D)/(1/D + 1/P) [exact]', () => {
    const walls = [reflecting, absorbing(1), reflecting, absorbing(0), permeable(2)];
    const shares = exitShares(assemble(cut, problem(both, walls)));
    expect(shares[1]?.[middle]).toBeCloseTo(0.5 / 1.5, 12);
    expect((shares[0]?.[middle] ?? 0) + (shares[1]?.[middle] ?? 0)).toBeCloseTo(1, 13);
  });

  it('is the way out of the piece behind it; a reflecting wall there is refused', () => {
    expect(() => assemble(cut, problem(both, rightExit(reflecting)))).toThrow(
      expect.objectContaining({ code: 'NO_WAY_OUT' }),
    );
  });

  it('says where D jumps across it under Itô, and keeps its flux J·n = P m̄(p₁/m₁ − p₂/m₂) there', () => {
    // Backward: k₁u₁' = P m̄ (u₂ − u₁), k = 1, m = 1/D: u₁(a) − u₂(a) = (a/D₁)/(P m̄), with m̄ = (1/D₁ + 1/D₂)/2.
    const system = assemble(cut, problem([constant(2), constant(0.5)], rightExit(permeable(3)), 'ito'));
    expect(system.unequalPermeableAt?.[0]).toBe(0.5);
    const u = meanExitTime(system);
    const right = cut.nodes.length / 2 - 3; // copies are appended from y = 0 up; the third of five
    const jump = 0.25 / (3 * ((0.5 + 2) / 2));
    expect(relativeError((u[middle] ?? 0) - (u[right] ?? 0), jump)).toBeLessThan(1e-3);
    expect(assemble(cut, problem(both, rightExit(permeable(3)))).unequalPermeableAt).toBeUndefined();
  });

  it('on the outline, or without a positive permeability, is refused', () => {
    const outer = [permeable(1), absorbing(), reflecting, reflecting, reflecting];
    expect(() => assemble(strip, problem(both, outer))).toThrow(
      expect.objectContaining({ code: 'WALL_NOT_INNER' }),
    );
    expect(() => assemble(cut, problem(both, rightExit(permeable(0))))).toThrow(
      expect.objectContaining({ code: 'WALL_COEFFICIENT_NOT_POSITIVE' }),
    );
  });
});

describe('an inner wall with a free tip', () => {
  const square = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 16, rows: 16 });
  const slit = cutMesh(square, 0.5, 0.5, 4);
  const walls = (inner: Wall) => [reflecting, absorbing(0), reflecting, absorbing(1), inner];

  it('permeable: between no wall and a reflecting one, and the tip is left alone', () => {
    const from = evenStart(slit, undefined);
    const left = (inner: Wall): number => {
      const u = meanExitTime(
        assemble(slit, problem(constant(1), [reflecting, absorbing(0), reflecting, reflecting, inner])),
      );
      return valueFromStart(from, u);
    };
    const times = [left(permeable(1e9)), left(permeable(1)), left(reflecting)];
    expect(times[0]).toBeCloseTo(1 / 3, 2);
    expect(times[1]).toBeGreaterThan((times[0] ?? 0) + 0.01);
    expect(times[2]).toBeGreaterThan((times[1] ?? 0) + 0.01);
  });

  it('absorbing on both sides is one exit; partly absorbing catches on both sides', () => {
    for (const inner of [absorbing(2), partly(5, 2)]) {
      const system = assemble(slit, problem(constant(1), walls(inner)));
      const { byExit, caught } = exitDensity(system, evenStart(slit));
      expect(byExit[0]).toBeCloseTo(byExit[1] ?? Number.NaN, 2); // mirror images but for the diagonals
      const node = nodeAt(slit.nodes, 0.5, 0.75);
      const copy = slit.nodes.length / 2 - 1 - 4;
      expect([slit.nodes[2 * copy], slit.nodes[2 * copy + 1]]).toEqual([0.5, 0.75]);
      expect(caught[copy]).toBeGreaterThan(0.002);
      expect(relativeError(caught[copy], caught[node] ?? Number.NaN)).toBeLessThan(0.05);
    }
  });
});
