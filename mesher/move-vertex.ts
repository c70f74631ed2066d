import { grownInt, type HalfEdgeMesh, next, previous } from './half-edge.ts';
import { breaksDelaunay, flip } from './lawson.ts';
import { orient } from './predicates.ts';

/**
 * Moves free vertices one at a time while the mesh stays Delaunay, no wall is encroached upon and the smallest angle
 * round the vertex grows; anything else is undone.
 */
export class VertexMover {
  readonly #mesh: HalfEdgeMesh;
  /** Per vertex: a half-edge that starts from it, −1 for unused ones. */
  #edgeOf: Int32Array<ArrayBuffer>;
  /** Half-edges from the vertex at hand, counter-clockwise. */
  readonly #spokes: number[] = [];
  readonly #flips: number[] = [];
  readonly #stack: number[] = [];

  constructor(mesh: HalfEdgeMesh) {
    this.#mesh = mesh;
    this.#edgeOf = new Int32Array(mesh.vertexCount).fill(-1);
    for (let e = 0; e < 3 * mesh.triangleCount; e++) this.#edgeOf[mesh.from[e]] = e;
  }

  /** Takes note of new triangles, and of the vertex that made them if it is new. */
  noteTriangles(list: Int32Array, count: number): void {
    const { from, vertexCount } = this.#mesh;
    if (vertexCount > this.#edgeOf.length) this.#edgeOf = grownInt(this.#edgeOf, vertexCount);
    for (let i = 0; i < count; i++) {
      for (let e = 3 * list[i]; e < 3 * list[i] + 3; e++) this.#edgeOf[from[e]] = e;
    }
  }

  /** True when no segment ends at `v`; its neighbours are then at hand for {@link worst} and {@link centre}. */
  pick(v: number): boolean {
    const { opposite, segment } = this.#mesh;
    const spokes = this.#spokes;
    spokes.length = 0;
    const start = this.#edgeOf[v];
    if (start < 0) return false;
    let e = start;
    do {
      if (segment[e] >= 0) return false;
      spokes.push(e);
      e = opposite[previous(e)];
      if (e < 0) return false;
    } while (e !== start);
    return true;
  }

  /**
   * Largest cotangent of an angle round the picked vertex if it stood at (x, y): the smaller, the better; +∞ where a
   * triangle would turn over or the place lies in the diametral circle of a segment facing it.
   */
  worst(x: number, y: number): number {
    const { xy, from, segment } = this.#mesh;
    let most = Number.NEGATIVE_INFINITY;
    for (const e of this.#spokes) {
      const facing = next(e);
      const b = 2 * from[facing];
      const c = 2 * from[previous(e)];
      const bx = xy[b] - x;
      const by = xy[b + 1] - y;
      const cx = xy[c] - x;
      const cy = xy[c + 1] - y;
      const twice = bx * cy - by * cx;
      const dot = bx * cx + by * cy;
      if (twice <= 0 || (segment[facing] >= 0 && dot < 0)) return Number.POSITIVE_INFINITY;
      const atB = bx * bx + by * by - dot;
      const atC = cx * cx + cy * cy - dot;
      most = Math.max(most, dot / twice, atB / twice, atC / twice);
    }
    return most;
  }

  /** Mean place of the neighbours of the picked vertex. */
  centre(): readonly [number, number] {
    const { xy, from } = this.#mesh;
    let x = 0;
    let y = 0;
    for (const e of this.#spokes) {
      const b = 2 * from[next(e)];
      x += xy[b];
      y += xy[b + 1];
    }
    return [x / this.#spokes.length, y / this.#spokes.length];
  }

  /** Shortest distance from `v`, picked, to a neighbour. */
  reach(v: number): number {
    const { xy, from } = this.#mesh;
    let least = Number.POSITIVE_INFINITY;
    for (const e of this.#spokes) {
      const b = from[next(e)];
      least = Math.min(least, Math.hypot(xy[2 * b] - xy[2 * v], xy[2 * b + 1] - xy[2 * v + 1]));
    }
    return least;
  }

  /**
   * Moves the picked vertex and flips to Delaunay again.
   *
   * Flips never lower the smallest angle of what they change (Sibson 1978), so only walls have to be looked at after.
   *
   * @returns false when the move was undone
   */
  move(v: number, x: number, y: number): boolean {
    const { xy, from } = this.#mesh;
    for (const e of this.#spokes) {
      const b = 2 * from[next(e)];
      const c = 2 * from[previous(e)];
      if (orient(x, y, xy[b], xy[b + 1], xy[c], xy[c + 1]) <= 0) return false;
    }
    const [oldX, oldY] = [xy[2 * v], xy[2 * v + 1]];
    xy[2 * v] = x;
    xy[2 * v + 1] = y;
    this.#flips.length = 0;
    for (const e of this.#spokes) this.#stack.push(e, next(e));
    this.#settle();
    if (this.#wallsStandFree(v)) return true;
    for (let e = this.#flips.pop(); e !== undefined; e = this.#flips.pop()) {
      // A flip turns the diagonal by a quarter, so three more undo it.
      for (let i = 0; i < 3; i++) flip(this.#mesh, e);
      this.#remember(e);
    }
    xy[2 * v] = oldX;
    xy[2 * v + 1] = oldY;
    return false;
  }

  #settle(): void {
    const { opposite } = this.#mesh;
    const stack = this.#stack;
    for (let e = stack.pop(); e !== undefined; e = stack.pop()) {
      if (!breaksDelaunay(this.#mesh, e)) continue;
      const o = opposite[e];
      flip(this.#mesh, e);
      this.#flips.push(e);
      this.#remember(e);
      stack.push(next(e), previous(e), next(o), previous(o));
    }
  }

  #remember(e: number): void {
    const { from, opposite } = this.#mesh;
    const o = opposite[e];
    for (const h of [e, next(e), previous(e), o, next(o), previous(o)]) this.#edgeOf[from[h]] = h;
  }

  /** No obtuse angle faces a segment in the triangles round `v` and in those that flips changed. */
  #wallsStandFree(v: number): boolean {
    const { opposite } = this.#mesh;
    const start = this.#edgeOf[v];
    let e = start;
    do {
      if (this.#isObtuse((e / 3) | 0)) return false;
      e = opposite[previous(e)];
    } while (e !== start);
    return this.#flips.every((f) => !this.#isObtuse((f / 3) | 0) && !this.#isObtuse((opposite[f] / 3) | 0));
  }

  #isObtuse(t: number): boolean {
    const { xy, from, segment } = this.#mesh;
    for (let e = 3 * t; e < 3 * t + 3; e++) {
      if (segment[e] < 0) continue;
      const a = 2 * from[e];
      const b = 2 * from[next(e)];
      const c = 2 * from[previous(e)];
      if ((xy[a] - xy[c]) * (xy[b] - xy[c]) + (xy[a + 1] - xy[c + 1]) * (xy[b + 1] - xy[c + 1]) < 0)
        return true;
    }
    return false;
  }
}
