import type { Hooks } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import type { Csr } from './csr.ts';
import { bytesNeeded, childrenOf, type Fronts } from './fronts.ts';
import { eliminate } from './kernels/eliminate.ts';
import { stopIfAsked } from './stopping.ts';

/** A = (I − L) D (I − Uᵀ) in elimination order, every entry of L, D and U ≥ 0; L = U for symmetric rates. */
export interface Factor {
  readonly fronts: Fronts;
  /** Per front column after column: rows below the diagonal, pivots first, then the border. */
  readonly lower: Float64Array;
  readonly upper: Float64Array;
  readonly inversePivot: Float64Array;
}

/** The process to be factored. */
export interface FactorInput {
  /** Off-diagonal rates, with a symmetric pattern. */
  readonly rates: Csr;
  /** Rate to the exit per row. */
  readonly slack: Float64Array;
  readonly symmetric: boolean;
}

/** How much memory a factor may take. */
export interface FactorOptions {
  /** Bytes; refused above, before anything large is allocated. */
  readonly maxBytes?: number;
}

export const factorDefaults = { maxBytes: 4e9 } as const;

/**
 * Factors the operator front by front, without subtraction, so that every answer is right in each component to
 * rounding, however deep the well (METHODS 1, rounding floor).
 *
 * @throws {SolverError} MEMORY_LIMIT, SOLVING_STOPPED
 * Source: multifrontal method: Duff & Reid 1983; pivots as sums: Grassmann, Taksar & Heyman 1985.
 */
export function factorize(fronts: Fronts, input: FactorInput, options: FactorOptions & Hooks = {}): Factor {
  const { count, pivotStart, borderStart, border, factorStart } = fronts;
  const { rates, slack, symmetric } = input;
  requireMemory(fronts, symmetric, options.maxBytes ?? factorDefaults.maxBytes);
  const upper = new Float64Array(factorStart[count]);
  const lower = symmetric ? upper : new Float64Array(factorStart[count]);
  const inversePivot = new Float64Array(fronts.size);
  const work = new Float64Array(fronts.largest * fronts.largest);
  const workLower = symmetric ? work : new Float64Array(work.length);
  const waiting = new Float64Array(fronts.waiting);
  const waitingLower = symmetric ? waiting : new Float64Array(fronts.waiting);
  const localOf = new Int32Array(fronts.size);
  const childLocal = new Int32Array(fronts.largest);
  const children = childrenOf(fronts.parent);
  const between = poll(options);
  let top = 0;
  for (let t = 0; t < count; t++) {
    const first = pivotStart[t];
    const pivots = pivotStart[t + 1] - first;
    const width = borderStart[t + 1] - borderStart[t];
    const order = pivots + width + 1;
    work.fill(0, 0, order * order);
    if (!symmetric) workLower.fill(0, 0, order * order);
    for (let p = 0; p < pivots; p++) localOf[first + p] = p;
    for (let p = 0; p < width; p++) localOf[border[borderStart[t] + p]] = pivots + p;
    loadRates(work, order, fronts, t, localOf, rates, slack);
    if (!symmetric) loadBackRates(workLower, order, fronts, t, localOf, rates);
    for (let c = children.start[t + 1] - 1; c >= children.start[t]; c--) {
      const child = children.list[c];
      const begin = borderStart[child];
      const childWidth = borderStart[child + 1] - begin;
      top -= (childWidth * (childWidth + 1)) / 2;
      for (let p = 0; p < childWidth; p++) childLocal[p] = localOf[border[begin + p]];
      addWaiting(work, order, waiting, top, childWidth, childLocal);
      if (!symmetric) addWaiting(workLower, order, waitingLower, top, childWidth, childLocal);
    }
    eliminate(workLower, work, order, pivots, inversePivot, first, between);
    storeColumns(upper, factorStart[t], work, order, pivots);
    if (!symmetric) {
      storeColumns(lower, factorStart[t], workLower, order, pivots);
      storeWaiting(waitingLower, top, workLower, order, pivots);
    }
    top = storeWaiting(waiting, top, work, order, pivots);
    between(order * order);
    if ((t & 255) === 0) options.progress?.(t / count);
  }
  return { fronts, lower, upper, inversePivot };
}

function requireMemory(fronts: Fronts, symmetric: boolean, most: number): void {
  const bytes = bytesNeeded(fronts) * (symmetric ? 1 : 2);
  if (bytes <= most) return;
  throw new SolverError(
    'MEMORY_LIMIT',
    `Solving would take about ${(bytes / 1e9).toFixed(1)} GB, the limit is ${(most / 1e9).toFixed(1)} GB`,
    {},
    'Use fewer nodes, or raise the limit.',
  );
}

/** Asks whether to stop after every few million operations. */
function poll(hooks: Hooks): (work: number) => void {
  let since = 0;
  return (work) => {
    since += work;
    if (since < 4e6) return;
    since = 0;
    stopIfAsked(hooks);
  };
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

/** The rates towards the pivots: those of the later rows' entries in the pivots' columns. */
function loadBackRates(
  work: Float64Array,
  order: number,
  fronts: Fronts,
  t: number,
  localOf: Int32Array,
  rates: Csr,
): void {
  const { start, column, value } = rates;
  const first = fronts.pivotStart[t];
  for (let q = first; q < fronts.pivotStart[t + 1]; q++) {
    const row = fronts.order[q];
    const base = (q - first) * order;
    for (let p = start[row]; p < start[row + 1]; p++) {
      const other = column[p];
      const position = fronts.positionOf[other];
      if (position < q) continue;
      let r = start[other];
      while (column[r] !== row) r++;
      work[base + localOf[position]] += value[r];
    }
  }
}

/**
 * Adds a child's remaining rates (packed columns, each ending with its rate to the exit) into its parent's front.
 *
 * @param local the child's border in the parent's numbering
 */
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
    for (let k = j + 1; k < width; k++) work[base + local[k]] += waiting[at++];
    work[base + order - 1] += waiting[at++];
  }
}

function storeColumns(
  factor: Float64Array,
  from: number,
  work: Float64Array,
  order: number,
  pivots: number,
): void {
  let at = from;
  for (let j = 0; j < pivots; j++) {
    const end = j * order + order - 1;
    for (let k = j * order + j + 1; k < end; k++) factor[at++] = work[k];
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
