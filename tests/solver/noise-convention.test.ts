import { describe, expect, it } from 'vitest';
import { assemble, evenStart, exitShares, meanExitTime, valueFromStart } from '../../solver/index.ts';
import { discMesh, rectangleMesh } from '../support/grid-mesh.ts';
import {
  absorbing,
  constant,
  conventions,
  nodeAt,
  problem,
  reflecting,
  relativeError,
  varying,
} from '../support/physics.ts';

const strip = (columns: number, region?: (x: number) => number) =>
  rectangleMesh({
    ...{ x: [0, 1], y: [0, 0.25], columns, rows: Math.round(columns / 4) },
    ...(region ? { region, regionSets: [[], [0]] } : {}),
  });
const square = (x: number): number => (1 + x) ** 2;
const reflectingStart = [reflecting, absorbing(), reflecting, reflecting];
const bothEnds = [reflecting, absorbing(1), reflecting, absorbing(0)];
const from = <T extends string>(values: Record<T, number>): Record<T, number> => values;

describe('D = (1 + x)² on a strip tells the three conventions apart', () => {
  it('x = 0 reflecting, x = 1 absorbing: 1 − ln 2, (ln 2)²/2, ln 2 − 1/2 [Lau & Lubensky 2007; exact]', () => {
    const expected = from({ ito: 1 - Math.LN2, stratonovich: Math.LN2 ** 2 / 2, isothermal: Math.LN2 - 0.5 });
    const average = from({
      ito: 0.193147180559945,
      stratonovich: 0.14606785416079,
      isothermal: 0.113705638880109,
    });
    const mesh = strip(96);
    for (const noise of conventions) {
      const u = meanExitTime(assemble(mesh, problem(varying(square), reflectingStart, noise)));
      expect(relativeError(u[0], expected[noise])).toBeLessThan(1e-3);
      expect(relativeError(valueFromStart(evenStart(mesh), u), average[noise])).toBeLessThan(1e-3);
    }
  });

  it('both ends absorbing [Lau & Lubensky 2007; closed forms]', () => {
    const expected = from({
      ito: 0.0588915178281917,
      stratonovich: 0.0583225213037211,
      isothermal: 0.0566330122651325,
    });
    const mesh = strip(48);
    for (const noise of conventions) {
      const u = meanExitTime(assemble(mesh, problem(varying(square), bothEnds, noise)));
      expect(relativeError(u[nodeAt(mesh.nodes, 0.5, 0)], expected[noise])).toBeLessThan(1e-3);
    }
  });

  it('share of x = 1 from the middle: ∫₀^½ D^−α ÷ ∫₀¹ D^−α, exact at nodes by harmonic edge means', () => {
    const expected = from({ ito: 0.5, stratonovich: 0.584962500721156, isothermal: 2 / 3 });
    const mesh = strip(8);
    for (const noise of conventions) {
      const shares = exitShares(assemble(mesh, problem(varying(square), bothEnds, noise)));
      expect(relativeError(shares[1]?.[nodeAt(mesh.nodes, 0.5, 0.125)], expected[noise])).toBeLessThan(1e-9);
    }
  });
});

it('two media on a strip, D = 2 up to 0.3 and 0.5 beyond [Ovaskainen & Cornell 2003; Lejay 2006; exact]', () => {
  const expected = from({ ito: 0.6175, stratonovich: 0.7225, isothermal: 0.9325 });
  const average = from({ ito: 0.448416666667, stratonovich: 0.516666666667, isothermal: 0.653166666667 });
  const mesh = strip(40, (x) => (x < 0.3 ? 0 : 1));
  for (const noise of conventions) {
    const u = meanExitTime(assemble(mesh, problem([constant(2), constant(0.5)], reflectingStart, noise)));
    expect(relativeError(u[0], expected[noise])).toBeLessThan(1e-3);
    expect(relativeError(valueFromStart(evenStart(mesh), u), average[noise])).toBeLessThan(1e-3);
  }
});

describe('disc, rim absorbing, from the centre', () => {
  it('D = 1 + r²: π²/48, ln((1 + √2)/2), (ln 2)/4 [exact radial integrals; conventions of Gardiner, ch. 4]', () => {
    const expected = from({
      ito: Math.PI ** 2 / 48,
      stratonovich: Math.log((1 + Math.SQRT2) / 2),
      isothermal: Math.LN2 / 4,
    });
    const mesh = discMesh({ radius: 1, rings: 40 });
    for (const noise of conventions) {
      const u = meanExitTime(
        assemble(
          mesh,
          problem(
            varying((x, y) => 1 + x * x + y * y),
            [absorbing()],
            noise,
          ),
        ),
      );
      expect(relativeError(u[0], expected[noise])).toBeLessThan(1e-3);
    }
  });

  it('D = 1 inside r = ½, 4 outside [Carslaw & Jaeger 1959, sec. 13.8; Ovaskainen & Cornell 2003]', () => {
    const expected = from({ ito: 0.1743575481775, stratonovich: 0.1310358493925, isothermal: 0.109375 });
    const mesh = discMesh({
      ...{ radius: 1, rings: 60, regionSets: [[], [0]] },
      region: (x, y) => (Math.hypot(x, y) < 0.5 ? 0 : 1),
    });
    for (const noise of conventions) {
      const u = meanExitTime(assemble(mesh, problem([constant(1), constant(4)], [absorbing()], noise)));
      expect(relativeError(u[0], expected[noise])).toBeLessThan(1e-3);
    }
  });
});
