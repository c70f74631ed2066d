import type { Hooks } from '../../mesher/index.ts';
import type { Csr } from './csr.ts';
import { childrenOf, type Fronts } from './fronts.ts';
import { eliminate } from './kernels/eliminate.ts';
import { stopIfAsked } from './stopping.ts';

/** A = (I − L) D (I − L)ᵀ in elimination order, every entry of L and D ≥ 0. */
export interface Factor {
  readonly fronts: Fronts;
  /** Per front column after column: rows below the diagonal, pivots first, then the border. */
  readonly lower: Float64Array;
  readonly inversePivot: Float64Array;
}

/**
 * Factors the operator front by front, without subtraction, so that every answer is right in each component to
 * rounding, however deep the well (METHODS 1, rounding floor).
 *
 * @param rates symmetric off-diagonal rates
 * @param slack rate to the exit per row
 * @throws {SolverError} SOLVING_STOPPED
 * Source: multifrontal method: Duff & Reid 1983; pivots as sums: Grassmann, Taksar & Heyman 1985.
 */
export function factorSymmetric(fronts: Fronts, rates: Csr, slack: Float64Array, hooks: Hooks = {}): Factor {
  const { count, pivotStart, borderStart, border, factorStart } = fronts;
  const lower = new Float64Array(factorStart[count]);
  const inversePivot = new Float64Array(fronts.size);
  const work = new Float64Array(fronts.largest * fronts.largest);
  const waiting = new Float64Array(fronts.waiting);
  const localOf = new Int32Array(fronts.size);
  const children = childrenOf(fronts.parent);
  let top = 0;
  let sincePoll = 0;
  const between = (done: number): void => {
    sincePoll += done;
    if (sincePoll < 4e6) return;
    sincePoll = 0;
    stopIfAsked(hooks);
  };
  for (let t = 0; t < count; t++) {
    const first = pivotStart[t];
    const pivots = pivotStart[t + 1] - first;
    const width = borderStart[t + 1] - borderStart[t];
    const order = pivots + width + 1;
    work.fill(0, 0, order * order);
    for (let p = 0; p < pivots; p++) localOf[first + p] = p;
    for (let p = 0; p < width; p++) localOf[border[borderStart[t] + p]] = pivots + p;
    loadRates(work, order, fronts, t, localOf, rates, slack);
    for (let c = children.start[t + 1] - 1; c >= children.start[t]; c--) {
      const child = children.list[c];
      const childWidth = borderStart[child + 1] - borderStart[child];
      top -= (childWidth * (childWidth + 1)) / 2;
      addWaiting(work, order, waiting, top, border, borderStart[child], childWidth, localOf);
    }
    eliminate(work, order, pivots, inversePivot, first, between);
    storeColumns(lower, factorStart[t], work, order, pivots);
    top = storeWaiting(waiting, top, work, order, pivots);
    between(order * order);
    if ((t & 255) === 0) hooks.progress?.(t / count);
  }
  return { fronts, lower, inversePivot };
}

function loadRates(
  work: Float64Array,
  order: number,
  fronts: Fronts,
  t: number,
  localOf: Int32Array,
  rates: Csr,
  slack: Float64Array,
): void {
  const { start, column, value } = rates;
  const first = fronts.pivotStart[t];
  for (let q = first; q < fronts.pivotStart[t + 1]; q++) {
    const row = fronts.order[q];
    const base = (q - first) * order;
    for (let p = start[row]; p < start[row + 1]; p++) {
      const position = fronts.positionOf[column[p]];
      if (position > q) work[base + localOf[position]] += value[p];
    }
    work[base + order - 1] += slack[row];
  }
}

/** Adds a child's remaining rates (packed columns, each ending with its rate to the exit) into its parent's front. */
function addWaiting(
  work: Float64Array,
  order: number,
  waiting: Float64Array,
  from: number,
  border: Int32Array,
  begin: number,
  width: number,
  localOf: Int32Array,
): void {
  let at = from;
  for (let j = 0; j < width; j++) {
    const base = localOf[border[begin + j]] * order;
    for (let k = j + 1; k < width; k++) work[base + localOf[border[begin + k]]] += waiting[at++];
    work[base + order - 1] += waiting[at++];
  }
}

function storeColumns(
  lower: Float64Array,
  from: number,
  work: Float64Array,
  order: number,
  pivots: number,
): void {
  let at = from;
  for (let j = 0; j < pivots; j++) {
    const end = j * order + order - 1;
    for (let k = j * order + j + 1; k < end; k++) lower[at++] = work[k];
  }
}

function storeWaiting(
  waiting: Float64Array,
  from: number,
  work: Float64Array,
  order: number,
  pivots: number,
): number {
  let at = from;
  for (let j = pivots; j < order - 1; j++) {
    const end = j * order + order;
    for (let k = j * order + j + 1; k < end; k++) waiting[at++] = work[k];
  }
  return at;
}

/**
 * x ← A⁻¹ x for one right-hand side, in place.
 *
 * @param x one entry per row
 */
export function solveSymmetric(factor: Factor, x: Float64Array): void {
  const { fronts, lower, inversePivot } = factor;
  const { count, size, order, pivotStart, borderStart, border, factorStart } = fronts;
  const y = new Float64Array(size);
  const local = new Float64Array(fronts.largest);
  for (let q = 0; q < size; q++) y[q] = x[order[q]];
  for (let t = 0; t < count; t++) {
    const first = pivotStart[t];
    const pivots = pivotStart[t + 1] - first;
    const begin = borderStart[t];
    const width = borderStart[t + 1] - begin;
    const length = pivots + width;
    for (let p = 0; p < pivots; p++) local[p] = y[first + p];
    local.fill(0, pivots, length);
    let at = factorStart[t];
    for (let j = 0; j < pivots; j++) {
      const v = local[j];
      for (let k = j + 1; k < length; k++) local[k] += lower[at++] * v;
    }
    for (let p = 0; p < pivots; p++) y[first + p] = local[p];
    for (let p = 0; p < width; p++) y[border[begin + p]] += local[pivots + p];
  }
  for (let t = count - 1; t >= 0; t--) {
    const first = pivotStart[t];
    const pivots = pivotStart[t + 1] - first;
    const begin = borderStart[t];
    const width = borderStart[t + 1] - begin;
    const length = pivots + width;
    for (let p = 0; p < width; p++) local[pivots + p] = y[border[begin + p]];
    let at = factorStart[t + 1];
    for (let j = pivots - 1; j >= 0; j--) {
      at -= length - j - 1;
      let sum = y[first + j] * inversePivot[first + j];
      for (let k = j + 1, p = at; k < length; k++, p++) sum += lower[p] * local[k];
      local[j] = sum;
    }
    for (let p = 0; p < pivots; p++) y[first + p] = local[p];
  }
  for (let q = 0; q < size; q++) x[order[q]] = y[q];
}
