import type { Csr } from './csr.ts';

/** A u = Σ_j rates_ij (u_i − u_j) + slack_i u_i: what is solved. */
export interface LinearOperator {
  readonly rates: Csr;
  readonly slack: Float64Array;
  /** Row sums of the rates plus slack. */
  readonly diagonal: Float64Array;
  /** The transpose is meant. */
  readonly transposed?: boolean;
}

/** y ← A x by differences (less rounding than with a stored diagonal), or Aᵀ x. */
export function applyOperator(a: LinearOperator, x: Float64Array, y: Float64Array): void {
  const { start, column, value, size } = a.rates;
  const { slack, diagonal } = a;
  if (a.transposed) {
    for (let i = 0; i < size; i++) y[i] = diagonal[i] * x[i];
    for (let i = 0; i < size; i++) {
      const xi = x[i];
      for (let p = start[i]; p < start[i + 1]; p++) y[column[p]] -= value[p] * xi;
    }
    return;
  }
  for (let i = 0; i < size; i++) {
    const xi = x[i];
    let sum = slack[i] * xi;
    for (let p = start[i]; p < start[i + 1]; p++) sum += value[p] * (xi - x[column[p]]);
    y[i] = sum;
  }
}

/** max |x_i|. */
export function largestOf(x: Float64Array): number {
  let m = 0;
  for (let i = 0; i < x.length; i++) {
    const a = Math.abs(x[i]);
    if (!(a <= m)) m = a;
  }
  return m;
}

/**
 * Backward error ‖b − A x‖ / (‖A‖ ‖x‖ + ‖b‖) in the maximum norm (Rigal & Gaches 1967), ‖A‖ ≤ 2 max a_ii for rows of
 * rates.
 *
 * @param residual ← b − A x
 */
export function backwardError(
  a: LinearOperator,
  x: Float64Array,
  b: Float64Array,
  residual: Float64Array,
): number {
  applyOperator(a, x, residual);
  for (let i = 0; i < b.length; i++) residual[i] = b[i] - residual[i];
  const scale = 2 * largestOf(a.diagonal) * largestOf(x) + largestOf(b);
  return scale === 0 ? 0 : largestOf(residual) / scale;
}
