import { describe, expect, it } from 'vitest';
import {
  assemble,
  evenStart,
  exitDensity,
  exitShares,
  lostShare,
  meanExitTime,
  SolverError,
  valueFromStart,
} from '../../solver/index.ts';
import { rectangleMesh } from '../support/grid-mesh.ts';
import {
  absorbing,
  constant,
  nodeAt,
  partly,
  problem,
  reflecting,
  relativeError,
  varying,
} from '../support/physics.ts';

const mesh = rectangleMesh({ x: [0, 1], y: [0, 0.1], columns: 80, rows: 4 });
const middle = nodeAt(mesh.nodes, 0.5, 0.05);
const bothEnds = [reflecting, absorbing(1), reflecting, absorbing(0)];
const closed = [reflecting, reflecting, reflecting, reflecting];

describe('loss on the way', () => {
  const losing = {
    ...problem(constant(1), bothEnds),
    media: [{ diffusion: constant(1), loss: constant(1) }],
  };

  it('strip, c = 1: lifetime and chance to reach a wall [Thiele 1939: effectiveness factor; Redner 2001]', () => {
    const system = assemble(mesh, losing);
    const u = meanExitTime(system);
    const shares = exitShares(system);
    expect(relativeError(u[middle], 0.113181116029926)).toBeLessThan(1e-3);
    expect(
      relativeError((shares[0]?.[middle] ?? 0) + (shares[1]?.[middle] ?? 0), 0.886818883970074),
    ).toBeLessThan(1e-3);
    expect(relativeError(valueFromStart(evenStart(mesh), u), 0.0757656854799805)).toBeLessThan(1e-3);
  });

  it('with the shares sums to 1 at every node, and in the density', () => {
    const system = assemble(mesh, losing);
    const lost = lostShare(system);
    exitShares(system)[0]?.forEach((left, i) => {
      expect(left + (exitShares(system)[1]?.[i] ?? 0) + (lost[i] ?? 0)).toBeCloseTo(1, 13);
    });
    const density = exitDensity(system, evenStart(mesh));
    expect(density.lost).toBeCloseTo(valueFromStart(evenStart(mesh), lost), 13);
  });

  it('is a way out of a closed compartment: u = 1/c, D whatever it is', () => {
    const media = [{ diffusion: varying((x) => 0.1 + x), loss: constant(0.25) }];
    const u = meanExitTime(assemble(mesh, { ...problem(constant(1), closed, 'ito'), media }));
    for (const value of u) expect(value).toBeCloseTo(4, 11);
  });

  it('of zero is no way out, and a negative one is refused', () => {
    const withLoss = (c: number) => ({
      ...problem(constant(1), closed),
      media: [{ diffusion: constant(1), loss: constant(c) }],
    });
    expect(() => assemble(mesh, withLoss(0))).toThrow(expect.objectContaining({ code: 'NO_WAY_OUT' }));
    expect(() => assemble(mesh, withLoss(-1))).toThrow(expect.objectContaining({ code: 'LOSS_NEGATIVE' }));
  });
});

describe('depth h', () => {
  it('multiplies conductivity and mass: u = ∫ (∫ h)/(h D) on a strip with h = 1 + x, x = 0 reflecting [exact]', () => {
    // u(0) = ∫₀¹ (y + y²/2)/(1 + y) dy = ½ ∫ ((1 + y) − 1/(1 + y)) dy = (3/2 − ln 2)/2
    const walls = [reflecting, absorbing(), reflecting, reflecting];
    const deep = { ...problem(constant(1), walls), depth: varying((x) => 1 + x) };
    const u = meanExitTime(assemble(mesh, deep));
    expect(relativeError(u[nodeAt(mesh.nodes, 0, 0.05)], (1.5 - Math.LN2) / 2)).toBeLessThan(1e-3);
  });

  it('of one value everywhere changes nothing', () => {
    const walls = [reflecting, partly(0.3, 1), reflecting, absorbing(0)];
    const u = meanExitTime(assemble(mesh, problem(constant(1), walls)));
    meanExitTime(assemble(mesh, { ...problem(constant(1), walls), depth: constant(7) })).forEach(
      (value, i) => {
        expect(value).toBeCloseTo(u[i] ?? Number.NaN, 13);
      },
    );
  });

  it('that is not positive is refused with its place', () => {
    const flat = { ...problem(constant(1), bothEnds), depth: varying((x) => x - 0.2) };
    expect(() => assemble(mesh, flat)).toThrow(expect.objectContaining({ code: 'DEPTH_NOT_POSITIVE' }));
  });
});

describe('a catching floor', () => {
  const media = [{ diffusion: constant(1), floor: { kappa: 0.5, exit: 2 } }];

  it('is a loss κ/h counted as an exit: lifetime of the strip with c = 1 when κ = 0.5, h = 0.5', () => {
    const shallow = { ...problem(constant(1), bothEnds), media, exitCount: 3, depth: constant(0.5) };
    const system = assemble(mesh, shallow);
    expect(relativeError(meanExitTime(system)[middle], 0.113181116029926)).toBeLessThan(1e-3);
    expect(relativeError(exitShares(system)[2]?.[middle], 0.113181116029926)).toBeLessThan(1e-3); // c u = 1 − p
    const density = exitDensity(system, evenStart(mesh));
    expect(density.byExit.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 13);
    expect(density.caught[middle]).toBeGreaterThan(0);
  });

  it('catches faster where the compartment is shallower: u = 1/c with c = κ/h even', () => {
    const shallow = { ...problem(constant(1), closed), media, exitCount: 3, depth: constant(0.05) };
    for (const value of meanExitTime(assemble(mesh, shallow))) expect(value).toBeCloseTo(0.1, 12);
  });

  it('without a depth is refused', () => {
    expect(() => assemble(mesh, { ...problem(constant(1), closed), media, exitCount: 3 })).toThrow(
      SolverError,
    );
    expect(() => assemble(mesh, { ...problem(constant(1), closed), media, exitCount: 3 })).toThrow(/depth/);
  });
});
