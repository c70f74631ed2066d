import { type BoxTree, boxTree, deepestTree } from './box-tree.ts';

/**
 * Searches among chords (straight pieces of walls and borders): the nearest, all within a distance, the first that a
 * ray meets. Results stay in the fields until the next search, so that nothing is allocated per step.
 */
export class ChordTree {
  /** Nearest chord (−1: none), its distance and nearest point; of {@link firstHit} the chord and the way to it. */
  index = -1;
  distance = Number.POSITIVE_INFINITY;
  footX = 0;
  footY = 0;
  /** Chords that {@link collect} found, `found` of them, with their distance and nearest point. */
  found = 0;
  foundIndex = new Int32Array(64);
  foundDistance = new Float64Array(64);
  foundFoot = new Float64Array(128);

  /** 4 per chord: x, y of its first and second end. */
  readonly ends: Float64Array;
  /** Bits per chord; a search looks only at chords that share a bit with its mask. */
  readonly bits: Uint8Array;
  readonly #tree: BoxTree;
  readonly #nodeBits: Uint8Array;
  readonly #stack = new Int32Array(deepestTree);

  constructor(ends: Float64Array, bits: Uint8Array) {
    this.ends = ends;
    this.bits = bits;
    const boxes = new Float64Array(ends.length);
    for (let i = 0; i < ends.length; i += 4) {
      boxes[i] = Math.min(ends[i], ends[i + 2]);
      boxes[i + 1] = Math.min(ends[i + 1], ends[i + 3]);
      boxes[i + 2] = Math.max(ends[i], ends[i + 2]);
      boxes[i + 3] = Math.max(ends[i + 1], ends[i + 3]);
    }
    this.#tree = boxTree(boxes);
    this.#nodeBits = bitsOfNodes(this.#tree, bits);
  }

  /** Nearest chord of the mask nearer than `within`; index −1 and `distance` = `within` when there is none. */
  nearest(x: number, y: number, mask: number, within: number): void {
    const { boxes, second, first, count, items } = this.#tree;
    const nodeBits = this.#nodeBits;
    const { ends, bits } = this;
    const stack = this.#stack;
    let best = within * within;
    this.index = -1;
    let top = 0;
    stack[top++] = 0;
    while (top > 0) {
      const node = stack[--top];
      if ((nodeBits[node] & mask) === 0 || boxDistance2(boxes, node, x, y) >= best) continue;
      const far = second[node];
      if (far >= 0) {
        const near = node + 1;
        if (boxDistance2(boxes, near, x, y) <= boxDistance2(boxes, far, x, y)) {
          stack[top++] = far;
          stack[top++] = near;
        } else {
          stack[top++] = near;
          stack[top++] = far;
        }
        continue;
      }
      for (let p = first[node], end = p + count[node]; p < end; p++) {
        const i = items[p];
        if ((bits[i] & mask) === 0) continue;
        const e = 4 * i;
        const ux = ends[e + 2] - ends[e];
        const uy = ends[e + 3] - ends[e + 1];
        const along = ((x - ends[e]) * ux + (y - ends[e + 1]) * uy) / (ux * ux + uy * uy);
        const t = along > 0 ? Math.min(along, 1) : 0;
        const fx = ends[e] + t * ux;
        const fy = ends[e + 1] + t * uy;
        const d2 = (x - fx) * (x - fx) + (y - fy) * (y - fy);
        if (d2 < best) {
          best = d2;
          this.index = i;
          this.footX = fx;
          this.footY = fy;
        }
      }
    }
    this.distance = this.index < 0 ? within : Math.sqrt(best);
  }

  /** All chords of the mask within `radius`. */
  collect(x: number, y: number, mask: number, radius: number): void {
    const { boxes, second, first, count, items } = this.#tree;
    const nodeBits = this.#nodeBits;
    const { ends, bits } = this;
    const stack = this.#stack;
    const most = radius * radius;
    let found = 0;
    let top = 0;
    stack[top++] = 0;
    while (top > 0) {
      const node = stack[--top];
      if ((nodeBits[node] & mask) === 0 || boxDistance2(boxes, node, x, y) >= most) continue;
      if (second[node] >= 0) {
        stack[top++] = second[node];
        stack[top++] = node + 1;
        continue;
      }
      for (let p = first[node], end = p + count[node]; p < end; p++) {
        const i = items[p];
        if ((bits[i] & mask) === 0) continue;
        const e = 4 * i;
        const ux = ends[e + 2] - ends[e];
        const uy = ends[e + 3] - ends[e + 1];
        const along = ((x - ends[e]) * ux + (y - ends[e + 1]) * uy) / (ux * ux + uy * uy);
        const t = along > 0 ? Math.min(along, 1) : 0;
        const fx = ends[e] + t * ux;
        const fy = ends[e + 1] + t * uy;
        const d2 = (x - fx) * (x - fx) + (y - fy) * (y - fy);
        if (d2 >= most) continue;
        if (found === this.foundIndex.length) this.#widen();
        this.foundIndex[found] = i;
        this.foundDistance[found] = Math.sqrt(d2);
        this.foundFoot[2 * found] = fx;
        this.foundFoot[2 * found + 1] = fy;
        found++;
      }
    }
    this.found = found;
  }

  /**
   * The first chord of the mask that a ray meets before `length`, ends of chords included to 1e-9 of them; index −1 and
   * `distance` = `length` when there is none.
   *
   * @param dx, dy unit direction
   * @param skip a chord that is not looked at, e.g. the one the ray starts on; −1 for none
   */
  firstHit(x: number, y: number, dx: number, dy: number, length: number, mask: number, skip: number): void {
    const { boxes, second, first, count, items } = this.#tree;
    const nodeBits = this.#nodeBits;
    const { ends, bits } = this;
    const stack = this.#stack;
    let best = length;
    this.index = -1;
    let top = 0;
    stack[top++] = 0;
    while (top > 0) {
      const node = stack[--top];
      if ((nodeBits[node] & mask) === 0 || !meetsBox(boxes, node, x, y, dx, dy, best)) continue;
      if (second[node] >= 0) {
        stack[top++] = second[node];
        stack[top++] = node + 1;
        continue;
      }
      for (let p = first[node], end = p + count[node]; p < end; p++) {
        const i = items[p];
        if ((bits[i] & mask) === 0 || i === skip) continue;
        const e = 4 * i;
        const ux = ends[e + 2] - ends[e];
        const uy = ends[e + 3] - ends[e + 1];
        const cross = dx * uy - dy * ux;
        if (cross === 0) continue;
        const ax = ends[e] - x;
        const ay = ends[e + 1] - y;
        const way = (ax * uy - ay * ux) / cross;
        if (!(way >= 0 && way < best)) continue;
        const along = (ax * dy - ay * dx) / cross;
        if (along >= -1e-9 && along <= 1 + 1e-9) {
          best = way;
          this.index = i;
        }
      }
    }
    this.distance = best;
  }

  #widen(): void {
    const size = 2 * this.foundIndex.length;
    const index = new Int32Array(size);
    const distance = new Float64Array(size);
    const foot = new Float64Array(2 * size);
    index.set(this.foundIndex);
    distance.set(this.foundDistance);
    foot.set(this.foundFoot);
    this.foundIndex = index;
    this.foundDistance = distance;
    this.foundFoot = foot;
  }
}

/** Bits of all chords below each node; children come after their parents. */
function bitsOfNodes(tree: BoxTree, bits: Uint8Array): Uint8Array {
  const result = new Uint8Array(tree.second.length);
  for (let node = result.length - 1; node >= 0; node--) {
    if (tree.second[node] >= 0) result[node] = result[node + 1] | result[tree.second[node]];
    for (let p = 0; p < tree.count[node]; p++) result[node] |= bits[tree.items[tree.first[node] + p]];
  }
  return result;
}

/** Square of the distance from a box, 0 inside. */
export function boxDistance2(boxes: Float64Array, node: number, x: number, y: number): number {
  const b = 4 * node;
  const dx = x < boxes[b] ? boxes[b] - x : x > boxes[b + 2] ? x - boxes[b + 2] : 0;
  const dy = y < boxes[b + 1] ? boxes[b + 1] - y : y > boxes[b + 3] ? y - boxes[b + 3] : 0;
  return dx * dx + dy * dy;
}

/** True when a ray comes as near as rounding to the box before `length` (slab method, Kay & Kajiya 1986). */
function meetsBox(
  boxes: Float64Array,
  node: number,
  x: number,
  y: number,
  dx: number,
  dy: number,
  length: number,
): boolean {
  const b = 4 * node;
  const near = 1e-9 * length;
  let from = 0;
  let to = length;
  if (dx !== 0) {
    const t0 = (boxes[b] - near - x) / dx;
    const t1 = (boxes[b + 2] + near - x) / dx;
    from = Math.max(from, Math.min(t0, t1));
    to = Math.min(to, Math.max(t0, t1));
  } else if (x < boxes[b] - near || x > boxes[b + 2] + near) return false;
  if (dy !== 0) {
    const t0 = (boxes[b + 1] - near - y) / dy;
    const t1 = (boxes[b + 3] + near - y) / dy;
    from = Math.max(from, Math.min(t0, t1));
    to = Math.min(to, Math.max(t0, t1));
  } else if (y < boxes[b + 1] - near || y > boxes[b + 3] + near) return false;
  return from <= to;
}
