import type { Hooks } from '../../mesher/index.ts';
import type { Csr } from '../linear/csr.ts';
import { childrenOf, type Fronts } from '../linear/fronts.ts';
import type { Factor } from '../linear/multifrontal.ts';
import { stopIfAsked } from '../linear/stopping.ts';

/**
 * A = (I − L) D (I − Lᵀ) of any symmetric matrix that is positive definite; the signs are those of
 * `solveWithFactor`, which takes the result.
 *
 * @param off entries off the diagonal, symmetric
 * @returns undefined when a pivot is not positive: A is not positive definite (Sylvester's law of inertia)
 * @throws {SolverError} SOLVING_STOPPED
 * Source: multifrontal method: Duff & Reid 1983.
 */
export function definiteFactor(
  fronts: Fronts,
  off: Csr,
  diagonal: Float64Array,
  hooks: Hooks = {},
): Factor | undefined {
  const { count, pivotStart, borderStart, border, factorStart } = fronts;
  const lower = new Float64Array(factorStart[count]);
  const inversePivot = new Float64Array(fronts.size);
  const work = new Float64Array(fronts.largest * fronts.largest);
  const waiting = new Float64Array(fronts.waiting);
  const localOf = new Int32Array(fronts.size);
  const childLocal = new Int32Array(fronts.largest);
  const children = childrenOf(fronts.parent);
  let top = 0;
  for (let t = 0; t < count; t++) {
    stopIfAsked(hooks);
    const first = pivotStart[t];
    const pivots = pivotStart[t + 1] - first;
    const begin = borderStart[t];
    const order = pivots + borderStart[t + 1] - begin;
    work.fill(0, 0, order * order);
    for (let p = 0; p < pivots; p++) localOf[first + p] = p;
    for (let p = pivots; p < order; p++) localOf[border[begin + p - pivots]] = p;
    load(work, order, fronts, t, localOf, off, diagonal);
    for (let c = children.start[t + 1] - 1; c >= children.start[t]; c--) {
      const child = children.list[c];
      const from = borderStart[child];
      const width = borderStart[child + 1] - from;
      top -= (width * (width + 1)) / 2;
      for (let p = 0; p < width; p++) childLocal[p] = localOf[border[from + p]];
      addWaiting(work, order, waiting, top, width, childLocal);
    }
    if (!eliminate(work, order, pivots, inversePivot, first, hooks)) return undefined;
    let at = factorStart[t];
    for (let j = 0; j < pivots; j++) {
      const column = work.subarray(j * order + j + 1, (j + 1) * order);
      lower.set(column, at);
      at += column.length;
    }
    for (let j = pivots; j < order; j++) {
      const column = work.subarray(j * order + j, (j + 1) * order);
      waiting.set(column, top);
      top += column.length;
    }
  }
  return { fronts, lower, upper: lower, inversePivot };
}

/** Column j of a front lies at work[j·order + j] …: the diagonal, then what is below it. */
function load(
  work: Float64Array,
  order: number,
  fronts: Fronts,
  t: number,
  localOf: Int32Array,
  off: Csr,
  diagonal: Float64Array,
): void {
  const first = fronts.pivotStart[t];
  for (let q = first; q < fronts.pivotStart[t + 1]; q++) {
    const row = fronts.order[q];
    const base = (q - first) * order;
    work[base + q - first] += diagonal[row];
    for (let p = off.start[row]; p < off.start[row + 1]; p++) {
      const position = fronts.positionOf[off.column[p]];
      if (position > q) work[base + localOf[position]] += off.value[p];
    }
  }
}

function addWaiting(
  work: Float64Array,
  order: number,
  waiting: Float64Array,
  from: number,
  width: number,
  local: Int32Array,
): void {
  let at = from;
  for (let j = 0; j < width; j++) {
    const base = local[j] * order;
    for (let k = j; k < width; k++) work[base + local[k]] += waiting[at++];
  }
}

/** Eliminates the pivots; leaves −L in their columns and what remains in the others. */
function eliminate(
  work: Float64Array,
  order: number,
  pivots: number,
  inversePivot: Float64Array,
  first: number,
  hooks: Hooks,
): boolean {
  for (let j = 0; j < pivots; j++) {
    if ((j & 7) === 7) stopIfAsked(hooks);
    const base = j * order;
    const pivot = work[base + j];
    if (!(pivot > 0)) return false;
    const inverse = 1 / pivot;
    inversePivot[first + j] = inverse;
    for (let k = j + 1; k < order; k++) {
      const entry = work[base + k];
      if (entry === 0) continue;
      const factor = entry * inverse;
      const to = k * order;
      for (let i = k; i < order; i++) work[to + i] -= factor * work[base + i];
    }
    for (let k = j + 1; k < order; k++) work[base + k] *= -inverse;
  }
  return true;
}
