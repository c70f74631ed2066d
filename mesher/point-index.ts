import type { Point } from './domain.ts';

/** Points nearer to each other than the tolerance are one: the first one registered gives the coordinates. */
export class PointIndex {
  readonly xy: number[] = [];
  readonly #cells = new Map<string, number[]>();
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
    for (const key of this.#keys(p)) {
      for (const index of this.#cells.get(key) ?? []) {
        const dx = this.xy[2 * index] - p[0];
        const dy = this.xy[2 * index + 1] - p[1];
        if (Math.hypot(dx, dy) <= this.#tolerance) return index;
      }
    }
    const index = this.count;
    this.xy.push(p[0], p[1]);
    const home = this.#home(p);
    const list = this.#cells.get(home);
    if (list) list.push(index);
    else this.#cells.set(home, [index]);
    return index;
  }

  #home(p: Point): string {
    if (this.#cell === 0) return `${p[0] + 0},${p[1] + 0}`;
    return `${Math.floor(p[0] / this.#cell)},${Math.floor(p[1] / this.#cell)}`;
  }

  #keys(p: Point): Set<string> {
    const keys = new Set([this.#home(p)]);
    if (this.#cell === 0) return keys;
    for (const sx of [-1, 1]) {
      for (const sy of [-1, 1])
        keys.add(this.#home([p[0] + sx * this.#tolerance, p[1] + sy * this.#tolerance]));
    }
    return keys;
  }
}
