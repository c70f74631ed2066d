import type { ConsistentSystem } from './consistent-system.ts';
import type { GalerkinSolution } from './galerkin-solution.ts';
import { errorNorm } from './goal-bracket.ts';

/**
 * What each triangle adds to the width ‖r_u‖‖r_z‖ of a bracket: ½(‖r_u‖_T²‖r_z‖/‖r_u‖ + ‖r_z‖_T²‖r_u‖/‖r_z‖). The sum is
 * the width (less what walls lack), and each share is at least the product ‖r_u‖_T‖r_z‖_T, which would leave out places
 * where only one of the two is large.
 *
 * Source: inequality of the means; products as in Becker & Rannacher 2001.
 */
export function widthShares(
  base: ConsistentSystem,
  u: GalerkinSolution,
  dual: GalerkinSolution,
): Float64Array {
  const ratio = errorNorm(base, dual) / errorNorm(base, u);
  // Both can be zero: a field that is linear is found exactly.
  const weight = Number.isFinite(ratio) && ratio > 0 ? ratio : 1;
  const of = (solution: GalerkinSolution, t: number): number =>
    solution.norm[t] + (solution.oscillation ? solution.oscillation[t] : 0);
  return u.norm.map((_, t) => 0.5 * (of(u, t) ** 2 * weight + of(dual, t) ** 2 / weight));
}
