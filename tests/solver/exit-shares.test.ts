import { describe, expect, it } from 'vitest';
import {
  assemble,
  evenStart,
  exitDensity,
  exitShares,
  meanExitTime,
  pointStart,
  valueFromStart,
} from '../../solver/index.ts';
import { discMesh, rectangleMesh } from '../support/grid-mesh.ts';
import {
  absorbing,
  constant,
  nodeAt,
  partly,
  problem,
  reflecting,
  relativeError,
} from '../support/physics.ts';

describe('exit shares', () => {
  it('strip, x = 0 absorbing, x = 1 partly absorbing: κx/(D + κL) [Collins & Kimball 1949; exact]', () => {
    const mesh = rectangleMesh({ x: [0, 1], y: [0, 0.25], columns: 16, rows: 4 });
    const walls = [reflecting, partly(3, 1), reflecting, absorbing(0)];
    const shares = exitShares(assemble(mesh, problem(constant(1), walls)));
    expect(shares[1]?.[nodeAt(mesh.nodes, 0.5, 0.125)]).toBeCloseTo(0.375, 12);
    expect(shares[1]?.[nodeAt(mesh.nodes, 1, 0)]).toBeCloseTo(0.75, 12); // from the wall itself only 75 % leave there
    expect(shares[0]?.[nodeAt(mesh.nodes, 0, 0)]).toBe(1);
  });

  it('2 × 1 rectangle: chance to leave through the bottom side [Carslaw & Jaeger 1959, sec. 5.2]', () => {
    const mesh = rectangleMesh({ x: [0, 2], y: [0, 1], columns: 120, rows: 60 });
    const walls = [absorbing(0), absorbing(1), absorbing(1), absorbing(1)];
    const p = exitShares(assemble(mesh, problem(constant(1), walls)))[0];
    expect(relativeError(p?.[nodeAt(mesh.nodes, 1, 0.5)], 0.445115100292896)).toBeLessThan(1e-3);
    expect(relativeError(p?.[nodeAt(mesh.nodes, 0.5, 0.25)], 0.63747478784172)).toBeLessThan(1e-3);
    expect(relativeError(p?.[nodeAt(mesh.nodes, 1.9, 0.5)], 0.0976366177464729)).toBeLessThan(1e-3);
  });

  it('10 × 1 rectangle: 3.8376e-7 through the ends, in relative accuracy [Trefethen 2002, problem 10]', () => {
    const mesh = rectangleMesh({ x: [0, 10], y: [0, 1], columns: 800, rows: 80 });
    const walls = [absorbing(0), absorbing(1), absorbing(0), absorbing(1)];
    const p = exitShares(assemble(mesh, problem(constant(1), walls)))[1];
    // Along x the five-point scheme decays with cosh κh = 2 − cos πh instead of κ = π: relative error 5·π³h²/12 = 2.0e-3.
    expect(relativeError(p?.[nodeAt(mesh.nodes, 5, 0.5)], 3.837587979251226e-7)).toBeLessThan(3e-3);
  });

  it('disc: chance to leave through an arc is its harmonic measure [Ahlfors; Doob]', () => {
    const rings = 64;
    const mesh = discMesh({
      radius: 1,
      rings,
      tag: (x, y) => (Math.abs(Math.atan2(y, x)) < Math.PI / 4 ? 0 : 1),
    });
    const p = exitShares(assemble(mesh, problem(constant(1), [absorbing(0), absorbing(1)])))[0];
    const exact = (x: number): number =>
      (2 / Math.PI) * Math.atan(((1 + x) / (1 - x)) * Math.tan(Math.PI / 8));
    expect(relativeError(p?.[0], 0.25)).toBeLessThan(1e-3);
    expect(relativeError(p?.[nodeAt(mesh.nodes, 0.5, 0)], exact(0.5))).toBeLessThan(1e-3);
    expect(relativeError(p?.[nodeAt(mesh.nodes, -0.5, 0)], exact(-0.5))).toBeLessThan(1e-3);
  });

  it('a node where two exits touch belongs half to each', () => {
    const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 4, rows: 4 });
    const walls = [absorbing(0), absorbing(1), reflecting, reflecting];
    const shares = exitShares(assemble(mesh, problem(constant(1), walls)));
    const corner = nodeAt(mesh.nodes, 1, 0);
    expect([shares[0]?.[corner], shares[1]?.[corner]]).toEqual([0.5, 0.5]);
    const middle = nodeAt(mesh.nodes, 0.5, 0.5); // mirror line of the two exits
    expect(relativeError(shares[0]?.[middle], 0.5)).toBeLessThan(1e-12);
  });
});

describe('exit density', () => {
  const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 24, rows: 24 });
  const walls = [absorbing(0), partly(0.8, 1), reflecting, absorbing(2)];
  const system = assemble(mesh, problem(constant(0.3), walls));

  it('sums to 1 and agrees with the shares of the same start', () => {
    for (const start of [evenStart(mesh), pointStart(mesh, 700, [0.2, 0.3, 0.5])]) {
      const density = exitDensity(system, start);
      expect(density.caught.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 13);
      const shares = exitShares(system).map((field) => valueFromStart(start, field));
      shares.forEach((share, exit) => {
        expect(density.byExit[exit]).toBeCloseTo(share, 13);
      });
    }
  });

  it('is nothing off the catching walls', () => {
    const { caught } = exitDensity(system, evenStart(mesh));
    let off = 0;
    for (let i = 0; i < caught.length; i++) {
      const [x, y] = [mesh.nodes[2 * i], mesh.nodes[2 * i + 1]];
      if (x === 0 || y === 0 || x === 1) continue;
      off++;
      expect(caught[i]).toBe(0);
    }
    expect(off).toBe(23 * 24);
  });

  it('from the centre of a disc is even along the rim by symmetry', () => {
    const disc = discMesh({ radius: 1, rings: 12 });
    const rim = assemble(disc, problem(constant(1), [absorbing()]));
    const { caught } = exitDensity(rim, pointStart(disc, 0, [1, 0, 0]));
    const quarter = nodeAt(disc.nodes, 0.5, Math.sqrt(0.75));
    expect(caught[nodeAt(disc.nodes, 1, 0)]).toBeCloseTo(caught[quarter] ?? Number.NaN, 14);
    expect(meanExitTime(rim)[0]).toBeCloseTo(0.25, 3);
  });
});
