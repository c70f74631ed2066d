import type { Hooks } from '../../mesher/index.ts';
import type { Csr } from './csr.ts';
import { stopIfAsked } from './stopping.ts';

/**
 * An elimination order with its tree. Tree nodes are in postorder; node t eliminates the rows
 * order[pivotStart[t]] … order[pivotStart[t + 1] − 1].
 */
export interface Dissection {
  readonly order: Int32Array;
  /** One more entry than there are tree nodes. */
  readonly pivotStart: Int32Array;
  /** −1 at a root. */
  readonly parent: Int32Array;
}

const leafSize = 12;
/** A separator longer than this times √rows makes other cuts worth a try; 1.2 as measured on graded meshes. */
const longSeparator = 1.2;
const smallestTried = 400;

/** Cuts that are tried: across the longer axis, the shorter one, and a circle about the median point. */
type Cut = 'long' | 'short' | 'circle';

/**
 * Geometric nested dissection: cut at the median, the separator is the smaller of the two sides' borders in the graph,
 * the parts are cut again.
 *
 * @param rates the graph (symmetric pattern)
 * @param xy 2 coordinates per row
 * @throws {SolverError} SOLVING_STOPPED
 * Source: George 1973; circles: Miller, Teng, Thurston & Vavasis 1997.
 */
export function dissect(rates: Csr, xy: Float64Array, hooks: Hooks = {}): Dissection {
  const size = rates.size;
  const order = new Int32Array(size);
  for (let i = 0; i < size; i++) order[i] = i;
  const work: Work = { rates, xy, order, key: new Float64Array(size), side: new Int32Array(size), stamp: 0 };
  const spare = new Int32Array(size);
  const pivotStart: number[] = [];
  const parent: number[] = [];
  const push = (from: number, children: readonly number[]): number => {
    pivotStart.push(from);
    parent.push(-1);
    for (const child of children) parent[child] = parent.length - 1;
    return parent.length - 1;
  };
  const cut = (from: number, to: number): number => {
    if (to - from <= leafSize) return push(from, []);
    if (to - from > 1000) stopIfAsked(hooks);
    const middle = (from + to) >> 1;
    const smaller = chooseCut(work, from, to);
    const [leftEnd, rightEnd] = moveSeparator(work, from, middle, to, smaller, spare);
    const children: number[] = [];
    if (leftEnd > from) children.push(cut(from, leftEnd));
    if (rightEnd > leftEnd) children.push(cut(leftEnd, rightEnd));
    return push(rightEnd, children);
  };
  if (size > 0) cut(0, size);
  pivotStart.push(size);
  return { order, pivotStart: Int32Array.from(pivotStart), parent: Int32Array.from(parent) };
}

interface Work {
  readonly rates: Csr;
  readonly xy: Float64Array;
  readonly order: Int32Array;
  readonly key: Float64Array;
  /** Which half a row was last put into; halves have numbers of their own. */
  readonly side: Int32Array;
  stamp: number;
}

/** Leaves the rows halved by the best cut, and says which half has the shorter border. */
function chooseCut(work: Work, from: number, to: number): 'left' | 'right' {
  const first = tryCut(work, from, to, 'long');
  const rows = to - from;
  if (rows < smallestTried || first.length <= longSeparator * Math.sqrt(rows)) return first.smaller;
  let best: Cut = 'long';
  let shortest = first.length;
  let last = first;
  for (const cut of ['short', 'circle'] as const) {
    last = tryCut(work, from, to, cut);
    if (last.length >= shortest) continue;
    shortest = last.length;
    best = cut;
  }
  return best === 'circle' ? last.smaller : tryCut(work, from, to, best).smaller;
}

function tryCut(
  work: Work,
  from: number,
  to: number,
  cut: Cut,
): { length: number; smaller: 'left' | 'right' } {
  const { order, side } = work;
  const middle = (from + to) >> 1;
  setKeys(work, from, to, cut);
  select(order, from, to - 1, middle, work.key);
  const left = ++work.stamp;
  const right = ++work.stamp;
  for (let q = from; q < middle; q++) side[order[q]] = left;
  for (let q = middle; q < to; q++) side[order[q]] = right;
  const leftLength = borderLength(work, from, middle, right);
  const rightLength = borderLength(work, middle, to, left);
  return leftLength <= rightLength
    ? { length: leftLength, smaller: 'left' }
    : { length: rightLength, smaller: 'right' };
}

function setKeys(work: Work, from: number, to: number, cut: Cut): void {
  const { order, xy, key } = work;
  if (cut === 'circle') {
    const middle = (from + to) >> 1;
    const median = [0, 1].map((axis) => {
      for (let q = from; q < to; q++) key[order[q]] = xy[2 * order[q] + axis];
      select(order, from, to - 1, middle, key);
      return key[order[middle]];
    });
    for (let q = from; q < to; q++) {
      const dx = xy[2 * order[q]] - median[0];
      const dy = xy[2 * order[q] + 1] - median[1];
      key[order[q]] = dx * dx + dy * dy;
    }
    return;
  }
  let lowX = Number.POSITIVE_INFINITY;
  let highX = Number.NEGATIVE_INFINITY;
  let lowY = lowX;
  let highY = highX;
  for (let q = from; q < to; q++) {
    const x = xy[2 * order[q]];
    const y = xy[2 * order[q] + 1];
    if (x < lowX) lowX = x;
    if (x > highX) highX = x;
    if (y < lowY) lowY = y;
    if (y > highY) highY = y;
  }
  const axis = highX - lowX >= highY - lowY === (cut === 'long') ? 0 : 1;
  for (let q = from; q < to; q++) key[order[q]] = xy[2 * order[q] + axis];
}

/** How many of the rows `from` … `to` − 1 touch a row stamped `other`. */
function borderLength(work: Work, from: number, to: number, other: number): number {
  let length = 0;
  for (let q = from; q < to; q++) if (touches(work, work.order[q], other)) length++;
  return length;
}

function touches({ rates, side }: Work, row: number, other: number): boolean {
  const { start, column } = rates;
  for (let p = start[row]; p < start[row + 1]; p++) if (side[column[p]] === other) return true;
  return false;
}

/**
 * Moves the shorter border behind both halves.
 *
 * @returns where the left part and the right part end
 */
function moveSeparator(
  work: Work,
  from: number,
  middle: number,
  to: number,
  smaller: 'left' | 'right',
  spare: Int32Array,
): [number, number] {
  const { order } = work;
  const [begin, end] = smaller === 'left' ? [from, middle] : [middle, to];
  const other = smaller === 'left' ? work.stamp : work.stamp - 1;
  let inner = begin;
  let width = 0;
  for (let q = begin; q < end; q++) {
    const row = order[q];
    if (touches(work, row, other)) spare[width++] = row;
    else order[inner++] = row;
  }
  if (smaller === 'left') order.copyWithin(inner, middle, to);
  for (let q = 0; q < width; q++) order[to - width + q] = spare[q];
  return smaller === 'left' ? [inner, to - width] : [middle, inner];
}

/** Quickselect (Hoare 1961): afterwards rows before `k` have smaller or equal, rows after it larger or equal keys. */
function select(order: Int32Array, from: number, to: number, k: number, key: Float64Array): void {
  let low = from;
  let high = to;
  while (low < high) {
    const pivot = key[order[(low + high) >> 1]];
    let i = low;
    let j = high;
    while (i <= j) {
      while (key[order[i]] < pivot) i++;
      while (key[order[j]] > pivot) j--;
      if (i <= j) {
        const held = order[i];
        order[i++] = order[j];
        order[j--] = held;
      }
    }
    if (k <= j) high = j;
    else if (k >= i) low = i;
    else return;
  }
}
