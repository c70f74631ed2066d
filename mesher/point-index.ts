import type { Point } from './domain.ts';

/** Points nearer to each other than the tolerance are one: the first one registered gives the coordinates. */
export class PointIndex {
  readonly xy: number[] = [];
  /** Newest point of each cell, and per point the one before it in its cell. */
  readonly #first = new Map<number, number>();
  readonly #after: number[] = [];
  readonly #tolerance: number;
  readonly #cell: number;

  constructor(tolerance: number) {
    this.#tolerance = tolerance;
    this.#cell = 4 * tolerance;
  }

  get count(): number {
    return this.xy.length / 2;
  }

  at(index: number): Point {
    return [this.xy[2 * index], this.xy[2 * index + 1]];
  }

  /** The number of the point at or within the tolerance of `p`, a new one if there is none. */
  add(p: Point): number {
    const [x, y] = p;
    const reach = this.#tolerance;
    const left = this.#step(x - reach);
    const right = this.#step(x + reach);
    const low = this.#step(y - reach);
    const high = this.#step(y + reach);
    for (let i = left; ; i = right) {
      for (let j = low; ; j = high) {
        const found = this.#find(i, j, x, y);
        if (found >= 0) return found;
        if (j === high) break;
      }
      if (i === right) break;
    }
    const index = this.count;
    this.xy.push(x, y);
    const key = hash(this.#step(x), this.#step(y));
    this.#after.push(this.#first.get(key) ?? -1);
    this.#first.set(key, index);
    return index;
  }

  #step(value: number): number {
    return this.#cell === 0 ? value + 0 : Math.floor(value / this.#cell);
  }

  #find(i: number, j: number, x: number, y: number): number {
    let index = this.#first.get(hash(i, j)) ?? -1;
    let found = -1;
    while (index >= 0) {
      // The oldest one counts, and the chain starts with the newest.
      if (Math.hypot(this.xy[2 * index] - x, this.xy[2 * index + 1] - y) <= this.#tolerance) found = index;
      index = this.#after[index];
    }
    return found;
  }
}

/** One number for a cell; different cells may share it, which only costs a comparison. */
function hash(i: number, j: number): number {
  return i * 0.7548776662466927 + j * 0.5698402909980532;
}
