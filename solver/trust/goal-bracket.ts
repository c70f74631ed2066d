import { about, type Bracketed } from './bracketed.ts';
import type { ConsistentSystem } from './consistent-system.ts';
import { elementProducts, type GalerkinSolution, wallProduct } from './galerkin-solution.ts';

/** Relative to the sum of absolute values: rounding of the terms and of their sum, far more than was ever seen. */
const summing = 64 * Number.EPSILON;

/** ‖u − u_h‖ ≤ √(Σ(norm + oscillation)² + walls) in the energy norm. Source: Prager & Synge 1947; METHODS 6. */
export function errorNorm(base: ConsistentSystem, solution: GalerkinSolution): number {
  const { norm, oscillation, wallGap } = solution;
  let sum = wallProduct(base, wallGap, wallGap);
  for (let t = 0; t < norm.length; t++) sum += (norm[t] + (oscillation ? oscillation[t] : 0)) ** 2;
  return Math.sqrt(sum);
}

/**
 * Brackets ∫ρu from u_h and the dual z_h (right-hand side ρ, zero wall values):
 *
 *     ∫ρu_h + ∫f z_h − a(u_h, z_h) + ½(r_u, r_z) ± ½‖r_u‖‖r_z‖.
 *
 * Proof: ∫ρu = ∫ρu_h + ℓ(z_h) − a(u_h, z_h) + a(u − u_h, z − z_h), whatever u_h and z_h are, and the two errors are
 * projections P of r_u and r_z; (Pr_u, Pr_z) = ½(r_u, r_z) + ½((2P − 1)r_u, r_z), and 2P − 1 keeps lengths. Data
 * oscillation adds to each r a part known by its size only, which goes into the ±, as does the rounding of the sums; that of the solution's own values needs no
 * care, since the identity holds for any u_h and z_h.
 *
 * @param u, dual solutions on the same system; `dual` must not have wall values
 * Source: METHODS 6.
 */
export function goalBracket(base: ConsistentSystem, u: GalerkinSolution, dual: GalerkinSolution): Bracketed {
  const products = new Float64Array(u.norm.length);
  elementProducts(base, u.parts, dual.parts, products);
  let middle = 0.5 * wallProduct(base, u.wallGap, dual.wallGap);
  let half = 0.5 * errorNorm(base, u) * errorNorm(base, dual);
  for (let t = 0; t < products.length; t++) {
    middle += 0.5 * products[t];
    const ou = u.oscillation ? u.oscillation[t] : 0;
    const oz = dual.oscillation ? dual.oscillation[t] : 0;
    half += 0.5 * (ou * dual.norm[t] + u.norm[t] * oz + ou * oz);
  }
  const { triangles } = base.system.mesh;
  const { load } = dual.source;
  let size = 0;
  for (let q = 0; q < load.length; q++) {
    middle += load[q] * u.field[triangles[q]];
    size += Math.abs(load[q] * u.field[triangles[q]]);
  }
  for (let i = 0; i < u.residual.length; i++) {
    middle += u.residual[i] * dual.field[i];
    size += Math.abs(u.residual[i] * dual.field[i]);
  }
  return about(middle, half + summing * size);
}
