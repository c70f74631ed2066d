import { describe, expect, it } from 'vitest';
import {
  assemble,
  evenStart,
  exitShares,
  exitTimeMoments,
  meanExitTime,
  pointStart,
  standardDeviation,
  timeByExit,
  timeInRegion,
  valueFromStart,
} from '../../solver/index.ts';
import { discMesh, rectangleMesh } from '../support/grid-mesh.ts';
import { absorbing, constant, nodeAt, partly, problem, relativeError, varying } from '../support/physics.ts';

const disc = discMesh({
  ...{ radius: 1, rings: 48, regionSets: [[], [0]] },
  region: (x, y) => (Math.hypot(x, y) < 0.5 ? 1 : 0),
});
const rim = problem([constant(1), constant(1)], [absorbing()]);
const system = assemble(disc, rim);
const centre = pointStart(disc, 0, [1, 0, 0]);

describe('moments of the exit time from a disc', () => {
  const moments = exitTimeMoments(system, 3);

  it('are (3R⁴ − 4R²r² + r⁴)/32D² and 19/384 [Darling & Siegert 1953]', () => {
    expect(relativeError(moments[1]?.[0], 3 / 32)).toBeLessThan(2e-3);
    expect(relativeError(moments[1]?.[nodeAt(disc.nodes, 0.5, 0)], (3 - 1 + 1 / 16) / 32)).toBeLessThan(2e-3);
    expect(relativeError(moments[2]?.[0], 19 / 384)).toBeLessThan(3e-3); // n times the error of D t
    expect(relativeError(valueFromStart(evenStart(disc), moments[1] ?? disc.nodes), 1 / 24)).toBeLessThan(
      2e-3,
    );
  });

  it('give the standard deviation of a start, not the mean of the field of them', () => {
    expect(relativeError(standardDeviation(centre, moments), Math.sqrt(1 / 32))).toBeLessThan(2e-3);
    const even = standardDeviation(evenStart(disc), moments);
    expect(relativeError(even, Math.sqrt(1 / 24 - 1 / 64))).toBeLessThan(2e-3);
  });

  it('obey u₂ ≥ u₁² at every node: Jensen for the discrete process', () => {
    moments[0]?.forEach((u, i) => {
      expect(moments[1]?.[i]).toBeGreaterThanOrEqual(u * u);
    });
  });
});

it('time in r < ½ of a disc from its centre: c²/4 + (c²/2) ln(R/c) [Green function of the disc]', () => {
  const inner = timeInRegion(system, rim, (set) => set === 1);
  const outer = timeInRegion(system, rim, (set) => set === 0);
  expect(relativeError(inner[0], 0.149143397569993)).toBeLessThan(2e-3);
  meanExitTime(system).forEach((u, i) => {
    expect((inner[i] ?? 0) + (outer[i] ?? 0)).toBeCloseTo(u, 13);
  });
});

it('times in all regions sum to the mean exit time under drift too, still or turning', () => {
  for (const x of [constant(4), varying((_, y) => -6 * y)]) {
    const drift = { kind: 'components', x, y: constant(-3) } as const;
    const pushed = {
      ...rim,
      media: [
        { diffusion: constant(1), drift },
        { diffusion: constant(1), drift },
      ],
    };
    const blown = assemble(disc, pushed);
    const parts = [0, 1].map((region) => timeInRegion(blown, pushed, (set) => set === region));
    meanExitTime(blown).forEach((u, i) => {
      expect((parts[0]?.[i] ?? 0) + (parts[1]?.[i] ?? 0)).toBeCloseTo(u, 13);
    });
  }
});

describe('time by exit', () => {
  const strip = rectangleMesh({ x: [0, 1], y: [0, 0.25], columns: 64, rows: 16 });

  it('strip, to x = 1 given that exit: (1 − x²)/6D [Redner 2001, sec. 2.2, conditional mean]', () => {
    const ends = assemble(
      strip,
      problem(constant(1), [{ kind: 'reflecting' }, absorbing(1), { kind: 'reflecting' }, absorbing(0)]),
    );
    const shares = exitShares(ends);
    const times = timeByExit(ends, shares);
    const node = nodeAt(strip.nodes, 0.5, 0.125);
    expect(relativeError((times[1]?.[node] ?? 0) / (shares[1]?.[node] ?? 0), (1 - 0.25) / 6)).toBeLessThan(
      1e-3,
    );
  });

  it('sums to the mean exit time, with drift that is not reversible too', () => {
    const drift = { kind: 'components', x: varying((_, y) => 5 * y), y: constant(1) } as const;
    const walls = [absorbing(0), partly(2, 1), absorbing(2), partly(0.3, 3)];
    const pushed = assemble(strip, {
      ...problem(constant(1), walls),
      media: [{ diffusion: constant(1), drift }],
    });
    expect(pushed.cycle).toBeDefined();
    const times = timeByExit(pushed, exitShares(pushed));
    meanExitTime(pushed).forEach((u, i) => {
      expect(times.reduce((sum, field) => sum + (field[i] ?? 0), 0)).toBeCloseTo(u, 12);
    });
  });
});
