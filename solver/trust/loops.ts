import type { Point } from '../../mesher/index.ts';

/** Closed polygons, asked which of them hold a place. */
export class Loops {
  readonly #polygons: readonly Float64Array[];
  /** 4 per polygon: smallest x, y, largest x, y. */
  readonly #boxes: Float64Array;
  /** Per polygon: its sides by strips of y, so that few are looked at; strip s has sides from starts[s] to starts[s+1]. */
  readonly #strips: readonly { readonly starts: Int32Array; readonly sides: Int32Array }[];

  constructor(polygons: readonly (readonly Point[])[]) {
    this.#polygons = polygons.map((corners) => Float64Array.from(corners.flat()));
    this.#boxes = new Float64Array(4 * polygons.length);
    this.#polygons.forEach((corners, k) => {
      const box = [
        Number.POSITIVE_INFINITY,
        Number.POSITIVE_INFINITY,
        Number.NEGATIVE_INFINITY,
        Number.NEGATIVE_INFINITY,
      ];
      for (let i = 0; i < corners.length; i += 2) {
        box[0] = Math.min(box[0], corners[i]);
        box[1] = Math.min(box[1], corners[i + 1]);
        box[2] = Math.max(box[2], corners[i]);
        box[3] = Math.max(box[3], corners[i + 1]);
      }
      this.#boxes.set(box, 4 * k);
    });
    this.#strips = this.#polygons.map((corners, k) =>
      sidesByStrip(corners, this.#boxes[4 * k + 1], this.#boxes[4 * k + 3]),
    );
  }

  get count(): number {
    return this.#polygons.length;
  }

  /** The even–odd rule: true where a ray to the right crosses polygon `k` an odd number of times. */
  holds(k: number, x: number, y: number): boolean {
    const boxes = this.#boxes;
    const b = 4 * k;
    if (x < boxes[b] || y < boxes[b + 1] || x > boxes[b + 2] || y > boxes[b + 3]) return false;
    const corners = this.#polygons[k];
    const { starts, sides } = this.#strips[k];
    const strip = stripOf(y, boxes[b + 1], boxes[b + 3], starts.length - 1);
    let inside = false;
    for (let s = starts[strip]; s < starts[strip + 1]; s++) {
      const i = 2 * sides[s];
      const next = i + 2 < corners.length ? i + 2 : 0;
      const py = corners[i + 1];
      const qy = corners[next + 1];
      if (py > y === qy > y) continue;
      if (x < corners[i] + ((y - py) / (qy - py)) * (corners[next] - corners[i])) inside = !inside;
    }
    return inside;
  }

  /** Which polygons hold the place, as a sum of powers of two; of at most 52 polygons. */
  mask(x: number, y: number): number {
    let result = 0;
    for (let k = 0; k < this.#polygons.length; k++) if (this.holds(k, x, y)) result += 2 ** k;
    return result;
  }

  /** Smallest and largest x and y of all polygons. */
  box(): [number, number, number, number] {
    const box: [number, number, number, number] = [
      Number.POSITIVE_INFINITY,
      Number.POSITIVE_INFINITY,
      Number.NEGATIVE_INFINITY,
      Number.NEGATIVE_INFINITY,
    ];
    for (let b = 0; b < this.#boxes.length; b += 4) {
      box[0] = Math.min(box[0], this.#boxes[b]);
      box[1] = Math.min(box[1], this.#boxes[b + 1]);
      box[2] = Math.max(box[2], this.#boxes[b + 2]);
      box[3] = Math.max(box[3], this.#boxes[b + 3]);
    }
    return box;
  }
}

/** Area of a polygon, positive when it runs counter-clockwise (Gauss's shoelace). */
export function polygonArea(corners: readonly Point[]): number {
  let sum = 0;
  for (let i = 0; i < corners.length; i++) {
    const [px, py] = corners[i];
    const [qx, qy] = corners[(i + 1) % corners.length];
    sum += px * qy - qx * py;
  }
  return sum / 2;
}

function stripOf(y: number, bottom: number, top: number, strips: number): number {
  return top > bottom
    ? Math.min(strips - 1, Math.max(0, Math.floor((strips * (y - bottom)) / (top - bottom))))
    : 0;
}

/** About as many strips as sides; a side stands in every strip that it reaches. */
function sidesByStrip(
  corners: Float64Array,
  bottom: number,
  top: number,
): { starts: Int32Array; sides: Int32Array } {
  const n = corners.length / 2;
  const lists: number[][] = Array.from({ length: n }, () => []);
  for (let i = 0; i < n; i++) {
    const py = corners[2 * i + 1];
    const qy = corners[2 * ((i + 1) % n) + 1];
    const last = stripOf(Math.max(py, qy), bottom, top, n);
    for (let s = stripOf(Math.min(py, qy), bottom, top, n); s <= last; s++) lists[s].push(i);
  }
  const starts = new Int32Array(n + 1);
  lists.forEach((list, s) => {
    starts[s + 1] = starts[s] + list.length;
  });
  return { starts, sides: Int32Array.from(lists.flat()) };
}
