import type { Hooks } from '../../mesher/index.ts';
import { stopIfAsked } from './stopping.ts';

/** A sparse square matrix by rows (compressed sparse rows), columns ascending within a row. */
export interface Csr {
  readonly size: number;
  /** size + 1 entries: row i holds entries start[i] … start[i + 1] − 1. */
  readonly start: Int32Array;
  readonly column: Int32Array;
  readonly value: Float64Array;
}

/**
 * Builds rows from pairs: pair p puts `forth[p]` at (a, b) and `back[p]` at (b, a). No pair may occur twice.
 *
 * @param a, b row numbers per pair, below `size`; a pair with a negative number is left out
 * @throws {SolverError} SOLVING_STOPPED
 */
export function csrOfPairs(
  size: number,
  a: Int32Array,
  b: Int32Array,
  forth: Float64Array,
  back: Float64Array,
  hooks: Hooks = {},
): Csr {
  const start = new Int32Array(size + 1);
  for (let p = 0; p < a.length; p++) {
    if (a[p] < 0 || b[p] < 0) continue;
    start[a[p] + 1]++;
    start[b[p] + 1]++;
  }
  for (let i = 0; i < size; i++) start[i + 1] += start[i];
  stopIfAsked(hooks);
  const column = new Int32Array(start[size]);
  const value = new Float64Array(start[size]);
  const next = start.slice(0, size);
  for (let p = 0; p < a.length; p++) {
    if (a[p] < 0 || b[p] < 0) continue;
    const forthAt = next[a[p]]++;
    column[forthAt] = b[p];
    value[forthAt] = forth[p];
    const backAt = next[b[p]]++;
    column[backAt] = a[p];
    value[backAt] = back[p];
  }
  stopIfAsked(hooks);
  for (let i = 0; i < size; i++) sortRow(column, value, start[i], start[i + 1]);
  return { size, start, column, value };
}

/** Insertion sort: rows hold about six entries. */
function sortRow(column: Int32Array, value: Float64Array, from: number, to: number): void {
  for (let p = from + 1; p < to; p++) {
    const c = column[p];
    const v = value[p];
    let q = p - 1;
    while (q >= from && column[q] > c) {
      column[q + 1] = column[q];
      value[q + 1] = value[q];
      q--;
    }
    column[q + 1] = c;
    value[q + 1] = v;
  }
}
