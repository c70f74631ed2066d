import { all, type BigNumber, create } from 'mathjs';
import { describe, expect, it } from 'vitest';
import { assemble, meanExitTime, roundingFloor } from '../../solver/index.ts';
import { rectangleMesh } from '../support/grid-mesh.ts';
import { absorbing, constant, problem, reflecting, relativeError, varying } from '../support/physics.ts';

const math = create(all ?? {}, { number: 'BigNumber', precision: 40 });

/** V is 0 at x = 0 and rises to `height` at x = 1, flat at both ends. */
const well = (height: number) => (x: number) => height * x * x * (3 - 2 * x);

/**
 * u(0) = ∫₀¹ e^V(y) ∫₀^y e^−V(z) dz dy in 40 digits, Simpson's rule in both integrals (Gardiner 2009, eq. 5.2.160,
 * recalled; D = 1, x = 0 reflecting).
 */
function doubleIntegral(height: number, steps: number): number {
  const big = (v: number): BigNumber => math.bignumber(v);
  const potential = (i: number): BigNumber => {
    const x = big(i).div(2 * steps);
    return big(height)
      .times(x.times(x))
      .times(big(3).minus(x.times(2)));
  };
  let inner = big(0);
  let outer = big(0);
  const third = big(1).div(3 * steps);
  let before = [potential(0).neg().exp(), big(0)] as const; // e^−V and the outer integrand at even points
  for (let i = 2; i <= 2 * steps; i += 2) {
    const half = potential(i - 1)
      .neg()
      .exp();
    const whole = potential(i).neg().exp();
    // ∫ over the first half of the double step by the parabola through its three points, then over all of it.
    const toMiddle = before[0].times(5).plus(half.times(8)).minus(whole).times(third).div(8);
    const atMiddle = inner.plus(toMiddle).div(half);
    inner = inner.plus(before[0].plus(half.times(4)).plus(whole).times(third).div(2));
    const atEnd = inner.div(whole);
    outer = outer.plus(before[1].plus(atMiddle.times(4)).plus(atEnd).times(third).div(2));
    before = [whole, atEnd];
  }
  return outer.toNumber();
}

describe('a well 40 kT deep', () => {
  const walls = [reflecting, absorbing(), reflecting, reflecting];
  const solveWell = (height: number, columns: number, shift = 0) => {
    const mesh = rectangleMesh({ x: [0, 1], y: [0, 0.02], columns, rows: 2 });
    const value = varying((x) => well(height)(x) + shift);
    const media = [{ diffusion: constant(1), drift: { kind: 'potential' as const, value } }];
    const system = assemble(mesh, { ...problem(constant(1), walls), media });
    const u = meanExitTime(system);
    return { time: u[columns + 1] ?? Number.NaN, floor: roundingFloor(system, u) }; // node (0, 0.01)
  };

  it('agrees with the double integral in 40 digits to 0.1 %, where the stored diagonal would be off by far', () => {
    const exact = doubleIntegral(40, 150);
    expect(exact).toBeGreaterThan(1e14);
    const { time, floor } = solveWell(40, 200);
    expect(relativeError(time, exact)).toBeLessThan(1e-3);
    expect(floor).toBeGreaterThan(1); // elimination with subtraction would return noise here
  });

  it('keeps its digits under changes that alter rounding only: another zero of the potential', () => {
    const { time } = solveWell(40, 50);
    expect(relativeError(solveWell(40, 50, 8).time, time)).toBeLessThan(1e-12);
  });

  it('still holds at 200 kT, on symmetric rates, and at 700 kT, where e^ψ is not formed', () => {
    for (const height of [200, 700]) {
      expect(relativeError(solveWell(height, 800).time, doubleIntegral(height, 300))).toBeLessThan(1e-3);
    }
  });
});
