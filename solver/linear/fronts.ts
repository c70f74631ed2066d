import type { Hooks } from '../../mesher/index.ts';
import type { Csr } from './csr.ts';
import type { Dissection } from './dissection.ts';
import { stopIfAsked } from './stopping.ts';

/** The shape of the multifrontal factor: every front's border, and the room it all takes. */
export interface Fronts {
  readonly count: number;
  readonly size: number;
  /** Row per position of the elimination, and position per row. */
  readonly order: Int32Array;
  readonly positionOf: Int32Array;
  readonly pivotStart: Int32Array;
  readonly parent: Int32Array;
  /** Front t's border (later positions it touches, ascending): border[borderStart[t]] … */
  readonly borderStart: Int32Array;
  readonly border: Int32Array;
  /** Entries of the factor before front t; one more entry than fronts. */
  readonly factorStart: Float64Array;
  /** Longest front, one more than its pivots and border for the last row (the exit). */
  readonly largest: number;
  /** Most entries waiting for their parents at one time. */
  readonly waiting: number;
}

/** Finds the fronts' borders from the leaves up: what pivots and children touch, less the pivots. */
export function planFronts(rates: Csr, dissection: Dissection, hooks: Hooks = {}): Fronts {
  const { order, pivotStart, parent } = dissection;
  const { start, column, size } = rates;
  const count = parent.length;
  const positionOf = new Int32Array(size);
  for (let q = 0; q < size; q++) positionOf[order[q]] = q;
  const children = childrenOf(parent);
  const borderStart = new Int32Array(count + 1);
  const factorStart = new Float64Array(count + 1);
  let border = new Int32Array(8 * size + 64);
  const seen = new Int32Array(size).fill(-1);
  const held = new Float64Array(count);
  let largest = 1;
  let waiting = 0;
  let most = 0;
  for (let t = 0; t < count; t++) {
    if ((t & 1023) === 0) stopIfAsked(hooks);
    const end = pivotStart[t + 1];
    const begin = borderStart[t];
    let length = begin;
    const reserve = (extra: number): void => {
      if (length + extra <= border.length) return;
      const wider = new Int32Array(2 * (length + extra));
      wider.set(border.subarray(0, length));
      border = wider;
    };
    for (let q = pivotStart[t]; q < end; q++) {
      const row = order[q];
      reserve(start[row + 1] - start[row]);
      for (let p = start[row]; p < start[row + 1]; p++) {
        const position = positionOf[column[p]];
        if (position < end || seen[position] === t) continue;
        seen[position] = t;
        border[length++] = position;
      }
    }
    for (let c = children.start[t]; c < children.start[t + 1]; c++) {
      const child = children.list[c];
      reserve(borderStart[child + 1] - borderStart[child]);
      for (let p = borderStart[child]; p < borderStart[child + 1]; p++) {
        const position = border[p];
        if (position < end || seen[position] === t) continue;
        seen[position] = t;
        border[length++] = position;
      }
      waiting -= held[child];
    }
    border.subarray(begin, length).sort();
    borderStart[t + 1] = length;
    const width = length - begin;
    const pivots = end - pivotStart[t];
    factorStart[t + 1] = factorStart[t] + pivots * width + (pivots * (pivots - 1)) / 2;
    largest = Math.max(largest, pivots + width + 1);
    held[t] = (width * (width + 1)) / 2;
    waiting += held[t];
    most = Math.max(most, waiting);
  }
  return {
    ...{
      count,
      size,
      order,
      positionOf,
      pivotStart,
      parent,
      borderStart,
      border: border.slice(0, borderStart[count]),
    },
    ...{ factorStart, largest, waiting: most },
  };
}

/** Children of every tree node, ascending. */
export function childrenOf(parent: Int32Array): { start: Int32Array; list: Int32Array } {
  const start = new Int32Array(parent.length + 1);
  for (let t = 0; t < parent.length; t++) if (parent[t] >= 0) start[parent[t] + 1]++;
  for (let t = 0; t < parent.length; t++) start[t + 1] += start[t];
  const list = new Int32Array(start[parent.length]);
  const next = start.slice(0, parent.length);
  for (let t = 0; t < parent.length; t++) if (parent[t] >= 0) list[next[parent[t]]++] = t;
  return { start, list };
}

/** Bytes the factor of these fronts needs while it is made: factor, waiting parts, the largest front. */
export function bytesNeeded(fronts: Fronts): number {
  return (
    8 *
    (fronts.factorStart[fronts.count] + fronts.waiting + fronts.largest * fronts.largest + 2 * fronts.size)
  );
}
