import type { Hooks } from '../../mesher/index.ts';
import type { Factor } from './multifrontal.ts';
import { stopIfAsked } from './stopping.ts';

/**
 * x ← A⁻¹ x, or A⁻ᵀ x, for a block of right-hand sides, in place: up the tree, then down.
 *
 * @param x size × width, right-hand side r of row i at x[i·width + r]
 * @throws {SolverError} SOLVING_STOPPED
 * Source: Duff & Reid 1983 (solution along the assembly tree).
 */
export function solveWithFactor(
  factor: Factor,
  x: Float64Array,
  width: number,
  transposed: boolean,
  hooks: Hooks = {},
): void {
  const { order, size } = factor.fronts;
  const y = new Float64Array(size * width);
  for (let q = 0; q < size; q++) {
    for (let r = 0; r < width; r++) y[q * width + r] = x[order[q] * width + r];
  }
  const up = transposed ? factor.upper : factor.lower;
  const down = transposed ? factor.lower : factor.upper;
  if (width === 1) {
    sweepUp(factor, up, y, hooks);
    sweepDown(factor, down, y, hooks);
  } else {
    sweepUpBlock(factor, up, y, width, hooks);
    sweepDownBlock(factor, down, y, width, hooks);
  }
  for (let q = 0; q < size; q++) {
    for (let r = 0; r < width; r++) x[order[q] * width + r] = y[q * width + r];
  }
}

/** y_k += entries_kj y_j along every column, earlier columns first. */
function sweepUp(factor: Factor, entries: Float64Array, y: Float64Array, hooks: Hooks): void {
  const { count, pivotStart, borderStart, border, factorStart, largest } = factor.fronts;
  const local = new Float64Array(largest);
  for (let t = 0; t < count; t++) {
    if ((t & 511) === 0) stopIfAsked(hooks);
    const first = pivotStart[t];
    const pivots = pivotStart[t + 1] - first;
    const begin = borderStart[t];
    const length = pivots + borderStart[t + 1] - begin;
    for (let p = 0; p < pivots; p++) local[p] = y[first + p];
    local.fill(0, pivots, length);
    let at = factorStart[t];
    for (let j = 0; j < pivots; j++) {
      const v = local[j];
      for (let k = j + 1; k < length; k++) local[k] += entries[at++] * v;
    }
    for (let p = 0; p < pivots; p++) y[first + p] = local[p];
    for (let p = pivots; p < length; p++) y[border[begin + p - pivots]] += local[p];
  }
}

/** y_j = y_j / d_j + Σ entries_kj y_k, later columns first. */
function sweepDown(factor: Factor, entries: Float64Array, y: Float64Array, hooks: Hooks): void {
  const { inversePivot } = factor;
  const { count, pivotStart, borderStart, border, factorStart, largest } = factor.fronts;
  const local = new Float64Array(largest);
  for (let t = count - 1; t >= 0; t--) {
    if ((t & 511) === 0) stopIfAsked(hooks);
    const first = pivotStart[t];
    const pivots = pivotStart[t + 1] - first;
    const begin = borderStart[t];
    const length = pivots + borderStart[t + 1] - begin;
    for (let p = pivots; p < length; p++) local[p] = y[border[begin + p - pivots]];
    let at = factorStart[t + 1];
    for (let j = pivots - 1; j >= 0; j--) {
      at -= length - j - 1;
      let sum = y[first + j] * inversePivot[first + j];
      for (let k = j + 1, p = at; k < length; k++, p++) sum += entries[p] * local[k];
      local[j] = sum;
    }
    for (let p = 0; p < pivots; p++) y[first + p] = local[p];
  }
}

function sweepUpBlock(
  factor: Factor,
  entries: Float64Array,
  y: Float64Array,
  width: number,
  hooks: Hooks,
): void {
  const { count, pivotStart, borderStart, border, factorStart, largest } = factor.fronts;
  const local = new Float64Array(largest * width);
  for (let t = 0; t < count; t++) {
    if ((t & 511) === 0) stopIfAsked(hooks);
    const first = pivotStart[t] * width;
    const pivots = pivotStart[t + 1] - pivotStart[t];
    const begin = borderStart[t];
    const length = pivots + borderStart[t + 1] - begin;
    for (let p = 0; p < pivots * width; p++) local[p] = y[first + p];
    local.fill(0, pivots * width, length * width);
    let at = factorStart[t];
    for (let j = 0; j < pivots; j++) {
      const own = j * width;
      for (let k = j + 1; k < length; k++) {
        const l = entries[at++];
        const other = k * width;
        for (let r = 0; r < width; r++) local[other + r] += l * local[own + r];
      }
    }
    for (let p = 0; p < pivots * width; p++) y[first + p] = local[p];
    for (let p = pivots; p < length; p++) {
      const to = border[begin + p - pivots] * width;
      for (let r = 0; r < width; r++) y[to + r] += local[p * width + r];
    }
  }
}

function sweepDownBlock(
  factor: Factor,
  entries: Float64Array,
  y: Float64Array,
  width: number,
  hooks: Hooks,
): void {
  const { inversePivot } = factor;
  const { count, pivotStart, borderStart, border, factorStart, largest } = factor.fronts;
  const local = new Float64Array(largest * width);
  for (let t = count - 1; t >= 0; t--) {
    if ((t & 511) === 0) stopIfAsked(hooks);
    const first = pivotStart[t];
    const pivots = pivotStart[t + 1] - first;
    const begin = borderStart[t];
    const length = pivots + borderStart[t + 1] - begin;
    for (let p = pivots; p < length; p++) {
      const from = border[begin + p - pivots] * width;
      for (let r = 0; r < width; r++) local[p * width + r] = y[from + r];
    }
    let at = factorStart[t + 1];
    for (let j = pivots - 1; j >= 0; j--) {
      at -= length - j - 1;
      const own = j * width;
      const inverse = inversePivot[first + j];
      for (let r = 0; r < width; r++) local[own + r] = y[(first + j) * width + r] * inverse;
      for (let k = j + 1, p = at; k < length; k++, p++) {
        const u = entries[p];
        const other = k * width;
        for (let r = 0; r < width; r++) local[own + r] += u * local[other + r];
      }
    }
    for (let p = 0; p < pivots * width; p++) y[first * width + p] = local[p];
  }
}
