import type { Csr } from './csr.ts';

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

const leafSize = 24;

/**
 * Geometric nested dissection: cut the longer axis at the median, the separator is the smaller of the two sides'
 * borders in the graph, the parts are cut again.
 *
 * @param rates the graph (symmetric pattern)
 * @param xy 2 coordinates per row
 * Source: George 1973; separators from coordinates as in Miller, Teng, Thurston & Vavasis 1997 (axis cuts only).
 */
export function dissect(rates: Csr, xy: Float64Array): Dissection {
  const { start, column, size } = rates;
  const order = new Int32Array(size);
  for (let i = 0; i < size; i++) order[i] = i;
  const side = new Int32Array(size);
  const kept = new Int32Array(size);
  const separator = new Int32Array(size);
  const pivotStart: number[] = [];
  const parent: number[] = [];
  let stamp = 0;

  /** Rows `from` … `to` − 1 of `order` that touch a row stamped `other` go behind those that do not; returns where they begin. */
  const splitBorder = (from: number, to: number, other: number): number => {
    let inner = 0;
    let border = 0;
    for (let q = from; q < to; q++) {
      const row = order[q];
      let touches = false;
      for (let p = start[row]; p < start[row + 1] && !touches; p++) touches = side[column[p]] === other;
      if (touches) separator[border++] = row;
      else kept[inner++] = row;
    }
    for (let q = 0; q < inner; q++) order[from + q] = kept[q];
    for (let q = 0; q < border; q++) order[from + inner + q] = separator[q];
    return from + inner;
  };
  const push = (from: number, children: readonly number[]): number => {
    pivotStart.push(from);
    parent.push(-1);
    for (const child of children) parent[child] = parent.length - 1;
    return parent.length - 1;
  };
  const cut = (from: number, to: number): number => {
    if (to - from <= leafSize) return push(from, []);
    const middle = halve(order, from, to, xy);
    const left = ++stamp;
    const right = ++stamp;
    for (let q = from; q < middle; q++) side[order[q]] = left;
    for (let q = middle; q < to; q++) side[order[q]] = right;
    const leftBorder = splitBorder(from, middle, right);
    const rightBorder = splitBorder(middle, to, left);
    let leftEnd: number;
    let rightEnd: number;
    if (middle - leftBorder <= to - rightBorder) {
      const width = middle - leftBorder;
      separator.set(order.subarray(leftBorder, middle));
      order.copyWithin(leftBorder, middle, to);
      order.set(separator.subarray(0, width), to - width);
      leftEnd = leftBorder;
      rightEnd = to - width;
    } else {
      leftEnd = middle;
      rightEnd = rightBorder;
    }
    const children: number[] = [];
    if (leftEnd > from) children.push(cut(from, leftEnd));
    if (rightEnd > leftEnd) children.push(cut(leftEnd, rightEnd));
    return push(rightEnd, children);
  };
  if (size > 0) cut(0, size);
  pivotStart.push(size);
  return { order, pivotStart: Int32Array.from(pivotStart), parent: Int32Array.from(parent) };
}

/** Puts the lower half along the longer axis first; returns where the upper half begins. */
function halve(order: Int32Array, from: number, to: number, xy: Float64Array): number {
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
  const axis = highX - lowX >= highY - lowY ? 0 : 1;
  const middle = (from + to) >> 1;
  select(order, from, to - 1, middle, xy, axis);
  return middle;
}

/** Quickselect (Hoare 1961): afterwards rows before `k` have smaller or equal, rows after it larger or equal keys. */
function select(
  order: Int32Array,
  from: number,
  to: number,
  k: number,
  xy: Float64Array,
  axis: number,
): void {
  let low = from;
  let high = to;
  while (low < high) {
    const pivot = xy[2 * order[(low + high) >> 1] + axis];
    let i = low;
    let j = high;
    while (i <= j) {
      while (xy[2 * order[i] + axis] < pivot) i++;
      while (xy[2 * order[j] + axis] > pivot) j--;
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
