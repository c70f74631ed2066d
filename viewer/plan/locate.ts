import type { Field } from './field.ts';

/** Reads the field at any point: a plain grid over the triangles, then barycentric coordinates. */
export class Locator {
  readonly #field: Field;
  readonly #low: readonly [number, number];
  /** Width and height of the box. */
  readonly #high: readonly [number, number];
  readonly #cell: number;
  readonly #columns: number;
  readonly #rows: number;
  readonly #start: Int32Array;
  readonly #entries: Int32Array;

  constructor(field: Field) {
    this.#field = field;
    const { nodes } = field;
    let [x0, y0, x1, y1] = [Infinity, Infinity, -Infinity, -Infinity];
    for (let i = 0; i < nodes.length; i += 2) {
      x0 = Math.min(x0, nodes[i] ?? 0);
      x1 = Math.max(x1, nodes[i] ?? 0);
      y0 = Math.min(y0, nodes[i + 1] ?? 0);
      y1 = Math.max(y1, nodes[i + 1] ?? 0);
    }
    this.#low = [x0, y0];
    this.#high = [x1 - x0, y1 - y0];
    const area = Math.max((x1 - x0) * (y1 - y0), Number.MIN_VALUE);
    // About two triangles per cell; a thin drawing must not ask for millions of cells.
    this.#cell = Math.max(
      Math.sqrt(area / Math.max(1, field.triangleCount / 2)),
      Math.max(x1 - x0, y1 - y0) / 2000,
    );
    this.#columns = Math.floor((x1 - x0) / this.#cell) + 1;
    this.#rows = Math.floor((y1 - y0) / this.#cell) + 1;
    this.#start = new Int32Array(this.#columns * this.#rows + 1);
    this.#eachCell((cell) => {
      this.#start[cell + 1] = (this.#start[cell + 1] ?? 0) + 1;
    });
    for (let i = 1; i < this.#start.length; i++) {
      this.#start[i] = (this.#start[i] ?? 0) + (this.#start[i - 1] ?? 0);
    }
    const cursor = this.#start.slice();
    this.#entries = new Int32Array(this.#start[this.#start.length - 1] ?? 0);
    this.#eachCell((cell, triangle) => {
      const at = cursor[cell] ?? 0;
      this.#entries[at] = triangle;
      cursor[cell] = at + 1;
    });
  }

  #eachCell(visit: (cell: number, triangle: number) => void): void {
    const { nodes, triangles, triangleCount } = this.#field;
    for (let t = 0; t < triangleCount; t++) {
      const [a, b, c] = [triangles[3 * t] ?? 0, triangles[3 * t + 1] ?? 0, triangles[3 * t + 2] ?? 0];
      const xs = [nodes[2 * a] ?? 0, nodes[2 * b] ?? 0, nodes[2 * c] ?? 0];
      const ys = [nodes[2 * a + 1] ?? 0, nodes[2 * b + 1] ?? 0, nodes[2 * c + 1] ?? 0];
      const i0 = Math.floor((Math.min(...xs) - this.#low[0]) / this.#cell);
      const i1 = Math.floor((Math.max(...xs) - this.#low[0]) / this.#cell);
      const j0 = Math.floor((Math.min(...ys) - this.#low[1]) / this.#cell);
      const j1 = Math.floor((Math.max(...ys) - this.#low[1]) / this.#cell);
      for (let j = j0; j <= Math.min(j1, this.#rows - 1); j++) {
        for (let i = i0; i <= Math.min(i1, this.#columns - 1); i++) visit(j * this.#columns + i, t);
      }
    }
  }

  /** Whether a point lies in the box around the mesh. A straight way that has left the box never comes back. */
  inBox(x: number, y: number): boolean {
    const slack = 1e-9 * this.#cell * Math.max(this.#columns, this.#rows);
    const [dx, dy] = [x - this.#low[0], y - this.#low[1]];
    return dx >= -slack && dy >= -slack && dx <= this.#high[0] + slack && dy <= this.#high[1] + slack;
  }

  /** The value at a point, in the case's time unit; NaN outside the mesh. */
  valueAt(x: number, y: number): number {
    const i = Math.floor((x - this.#low[0]) / this.#cell);
    const j = Math.floor((y - this.#low[1]) / this.#cell);
    if (!(i >= 0 && j >= 0 && i < this.#columns && j < this.#rows)) return Number.NaN;
    const cell = j * this.#columns + i;
    const { nodes, values, triangles } = this.#field;
    for (let e = this.#start[cell] ?? 0; e < (this.#start[cell + 1] ?? 0); e++) {
      const t = 3 * (this.#entries[e] ?? 0);
      const a = triangles[t] ?? 0;
      const b = triangles[t + 1] ?? 0;
      const c = triangles[t + 2] ?? 0;
      const ax = (nodes[2 * a] ?? 0) - x;
      const ay = (nodes[2 * a + 1] ?? 0) - y;
      const bx = (nodes[2 * b] ?? 0) - x;
      const by = (nodes[2 * b + 1] ?? 0) - y;
      const cx = (nodes[2 * c] ?? 0) - x;
      const cy = (nodes[2 * c + 1] ?? 0) - y;
      const wa = bx * cy - by * cx;
      const wb = cx * ay - cy * ax;
      const wc = ax * by - ay * bx;
      const sum = wa + wb + wc;
      // A hair of slack, so that points on an edge or a hair outside a chord still read.
      if (sum > 0 && wa >= -1e-6 * sum && wb >= -1e-6 * sum && wc >= -1e-6 * sum) {
        return (wa * (values[a] ?? 0) + wb * (values[b] ?? 0) + wc * (values[c] ?? 0)) / sum;
      }
    }
    return Number.NaN;
  }

  /** The value at a point of the border that rounding may have put just outside: looks a little way around it. */
  valueNear(x: number, y: number): number {
    const here = this.valueAt(x, y);
    if (!Number.isNaN(here)) return here;
    for (const reach of [0.02, 0.1, 0.5]) {
      for (let turn = 0; turn < 8; turn++) {
        const angle = (turn * Math.PI) / 4;
        const r = reach * this.#cell;
        const value = this.valueAt(x + r * Math.cos(angle), y + r * Math.sin(angle));
        if (!Number.isNaN(value)) return value;
      }
    }
    return Number.NaN;
  }
}
