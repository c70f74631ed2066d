import type { System } from '../operator/system.ts';

/**
 * Relative error that one rounding of each stored diagonal would bring: it acts like a false sink of 2⁻⁵³ K_ii.
 * Residuals do not see it. Our elimination has no stored diagonal and does not suffer it; iterations without that
 * factor do.
 *
 * @param u mean exit time, one entry per mesh node
 * @returns 2⁻⁵³ Σ K_ii u_i / Σ f_i
 * Source: METHODS 1.
 */
export function roundingFloor(system: System, u: Float64Array): number {
  let diagonal = 0;
  let load = 0;
  for (let i = 0; i < system.size; i++) {
    diagonal += system.diagonal[i] * u[system.nodeOf[i]];
    load += system.load[i];
  }
  return load === 0 ? 0 : (2 ** -53 * diagonal) / load;
}
