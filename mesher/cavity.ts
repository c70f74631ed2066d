import { incircle, orient2d } from 'robust-predicates';
import { grownInt, type HalfEdgeMesh } from './half-edge.ts';
import { rightAngleSlack } from './slack.ts';

/** Error bounds of the plain floating-point determinants (Shewchuk 1997, table of the adaptive predicates). */
const circleBound = (10 + 96 * 2 ** -53) * 2 ** -53;
const turnBound = (3 + 16 * 2 ** -53) * 2 ** -53;

/**
 * The triangles whose circles contain a new point, and the chain of edges round them, counter-clockwise.
 *
 * Bowyer–Watson insertion that does not cross segments (Bowyer 1981, Watson 1981); found depth first in edge order,
 * so the chain comes out in order. All work space is kept between points.
 */
export class Cavity {
  deadCount = 0;
  /** Per chain edge: start and end vertex, half-edge on the outside (−1: rim), segment (−1: free). */
  from = new Int32Array(64);
  to = new Int32Array(64);
  outside = new Int32Array(64);
  segment = new Int32Array(64);
  count = 0;
  deadList = new Int32Array(64);
  #stack = new Int32Array(256);

  /** Starts at triangle `t`, whose circle contains (x, y). */
  collect(mesh: HalfEdgeMesh, t: number, x: number, y: number): void {
    this.count = 0;
    this.deadList[0] = t;
    this.deadCount = 1;
    const stack = this.#stack;
    stack[0] = 3 * t + 2;
    stack[1] = 3 * t + 1;
    stack[2] = 3 * t;
    this.#grow(mesh, 3, x, y);
  }

  /**
   * Starts from segment half-edge `e`, which the point replaces by two: the chain runs from the end of `e` round to
   * its start and leaves `e` out. A point beyond `e` may leave the triangle of `e` alone: then `e` is the chain.
   */
  collectFromSegment(mesh: HalfEdgeMesh, e: number, x: number, y: number): void {
    const t = (e / 3) | 0;
    const e1 = e === 3 * t + 2 ? 3 * t : e + 1;
    const e2 = e === 3 * t ? 3 * t + 2 : e - 1;
    const { xy, from } = mesh;
    const a = from[e];
    const b = from[e1];
    const c = from[e2];
    this.count = 0;
    this.deadCount = 0;
    const [ax, ay, bx, by] = [xy[2 * a], xy[2 * a + 1], xy[2 * b], xy[2 * b + 1]];
    const beyond = orient2d(ax, ay, bx, by, x, y) > 0;
    if (beyond && incircle(ax, ay, bx, by, xy[2 * c], xy[2 * c + 1], x, y) <= 0) {
      this.#put(b, a, e, -1);
      return;
    }
    this.deadList[0] = t;
    this.deadCount = 1;
    this.#stack[0] = e2;
    this.#stack[1] = e1;
    this.#grow(mesh, 2, x, y);
  }

  #put(from: number, to: number, outside: number, segment: number): void {
    const n = this.count;
    if (n >= this.from.length) {
      this.from = grownInt(this.from, n + 1);
      this.to = grownInt(this.to, n + 1);
      this.outside = grownInt(this.outside, n + 1);
      this.segment = grownInt(this.segment, n + 1);
    }
    this.from[n] = from;
    this.to[n] = to;
    this.outside[n] = outside;
    this.segment[n] = segment;
    this.count = n + 1;
  }

  #grow(mesh: HalfEdgeMesh, depth: number, x: number, y: number): void {
    const { xy, from, opposite, segment } = mesh;
    let stack = this.#stack;
    let top = depth;
    while (top > 0) {
      const e = stack[--top];
      const o = opposite[e];
      const s = segment[e];
      const a = from[e];
      const b = from[e % 3 === 2 ? e - 2 : e + 1];
      if (o >= 0 && s < 0) {
        const o1 = o % 3 === 2 ? o - 2 : o + 1;
        const o2 = o % 3 === 0 ? o + 2 : o - 1;
        const d = 2 * from[o2];
        // The neighbour is (b, a, d), counter-clockwise.
        const adx = xy[2 * b] - x;
        const ady = xy[2 * b + 1] - y;
        const bdx = xy[2 * a] - x;
        const bdy = xy[2 * a + 1] - y;
        const cdx = xy[d] - x;
        const cdy = xy[d + 1] - y;
        const bc = bdx * cdy;
        const cb = cdx * bdy;
        const ca = cdx * ady;
        const ac = adx * cdy;
        const ab = adx * bdy;
        const ba = bdx * ady;
        const al = adx * adx + ady * ady;
        const bl = bdx * bdx + bdy * bdy;
        const cl = cdx * cdx + cdy * cdy;
        let det = al * (bc - cb) + bl * (ca - ac) + cl * (ab - ba);
        const size =
          (Math.abs(bc) + Math.abs(cb)) * al +
          (Math.abs(ca) + Math.abs(ac)) * bl +
          (Math.abs(ab) + Math.abs(ba)) * cl;
        if (det <= circleBound * size && det >= -circleBound * size) {
          det = incircle(xy[2 * b], xy[2 * b + 1], xy[2 * a], xy[2 * a + 1], xy[d], xy[d + 1], x, y);
        }
        if (det > 0) {
          if (this.deadCount >= this.deadList.length) {
            this.deadList = grownInt(this.deadList, this.deadCount + 1);
          }
          this.deadList[this.deadCount++] = (o / 3) | 0;
          if (top + 2 > stack.length) stack = this.#stack = grownInt(stack, top + 2);
          stack[top++] = o2;
          stack[top++] = o1;
          continue;
        }
      }
      this.#put(a, b, o, s);
    }
  }

  /**
   * Looks at the chain from the point: every edge must turn left round it, and it may lie in the diametral circle of
   * no segment.
   *
   * @param hit receives the segments that the point encroaches upon or lies beyond
   * @returns false when a free edge does not turn left: the point is not to be used
   */
  look(mesh: HalfEdgeMesh, x: number, y: number, hit: number[]): boolean {
    const { xy } = mesh;
    const { from, to, segment, count } = this;
    let star = true;
    for (let k = 0; k < count; k++) {
      const ax = xy[2 * from[k]];
      const ay = xy[2 * from[k] + 1];
      const bx = xy[2 * to[k]];
      const by = xy[2 * to[k] + 1];
      const left = (ax - x) * (by - y);
      const right = (ay - y) * (bx - x);
      let turn = left - right;
      const bound = turnBound * (Math.abs(left) + Math.abs(right));
      if (turn <= bound && turn >= -bound) turn = -orient2d(ax, ay, bx, by, x, y);
      const s = segment[k];
      if (s >= 0) {
        const ux = ax - x;
        const uy = ay - y;
        const wx = bx - x;
        const wy = by - y;
        const least = rightAngleSlack * (ux * ux + uy * uy + wx * wx + wy * wy);
        if (turn <= 0 || ux * wx + uy * wy < least) hit.push(s);
      } else if (turn <= 0) {
        star = false;
      }
    }
    return star;
  }
}
