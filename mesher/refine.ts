import { Cavity } from './cavity.ts';
import type { SharpCorner } from './corners.ts';
import { MesherError } from './errors.ts';
import { tooMany } from './estimate.ts';
import { type Fan, fillCavity, makeFan } from './fan.ts';
import { type HalfEdgeMesh, next, previous } from './half-edge.ts';
import type { Hooks } from './hooks.ts';
import { IntQueue } from './queue.ts';
import type { SizeField } from './size-field.ts';
import { SegmentSplitter } from './split-segments.ts';

/** What refinement works towards. */
export interface RefineGoal extends Hooks {
  /** Longest edge wanted, at a triangle's centroid or a segment's middle. */
  readonly size: SizeField | number;
  /** Degrees. */
  readonly minAngle: number;
  readonly maxVertices: number;
  /** For the progress told: about how many vertices there will be. */
  readonly expected: number;
  readonly corners: readonly SharpCorner[];
}

/**
 * Delaunay refinement in place: until no segment is encroached upon or too long and no triangle is too large or has
 * an angle below the goal, but for those at corners that are sharper themselves.
 *
 * Ruppert 1995 (encroached segments first, circumcentres), Üngör 2004 (off-centres), Shewchuk 2002 (what to leave at
 * sharp corners: recalled).
 *
 * @throws {MesherError} TOO_MANY_TRIANGLES, MESHING_STOPPED
 */
export function refine(mesh: HalfEdgeMesh, goal: RefineGoal): void {
  new Refinement(mesh, goal).run();
}

const badAngle = 1;
const badSize = 2;

class Refinement {
  readonly #mesh: HalfEdgeMesh;
  readonly #goal: RefineGoal;
  readonly #walls: SegmentSplitter;
  readonly #cavity = new Cavity();
  readonly #fan = makeFan();
  readonly #large = new IntQueue();
  readonly #skinny = new IntQueue();
  readonly #hit: number[] = [];
  /** Per triangle: bits of the queues it waits in. */
  #waits = new Uint8Array(1024);
  #grading = false;
  #steps = 0;
  readonly #sinSquare: number;
  readonly #offCentre: number;

  constructor(mesh: HalfEdgeMesh, goal: RefineGoal) {
    this.#mesh = mesh;
    this.#goal = goal;
    const onFan = (fan: Fan): void => {
      if (this.#grading) this.#gradeFan(fan);
    };
    this.#walls = new SegmentSplitter(mesh, goal, onFan, () => this.#poll());
    const angle = (goal.minAngle * Math.PI) / 180;
    this.#sinSquare = Math.sin(angle) ** 2;
    // Height of the off-centre over the shortest edge, per its length; a little below the one that just passes.
    this.#offCentre = 0.475 / Math.tan(angle / 2);
  }

  run(): void {
    const mesh = this.#mesh;
    this.#walls.splitAll();
    this.#grading = true;
    this.#fitTriangles();
    for (let t = 0; t < mesh.triangleCount; t++) this.#grade(t);
    while (this.#large.count + this.#skinny.count > 0) {
      const isLarge = this.#large.count > 0;
      const t = isLarge ? this.#large.shift() : this.#skinny.shift();
      this.#waits[t] &= isLarge ? ~badSize : ~badAngle;
      const state = this.#quality(t);
      if (state === 0) continue;
      if (!isLarge && state & badSize) this.#push(t, badSize);
      else this.#improve(t, state);
      this.#poll();
    }
  }

  #poll(): void {
    if ((++this.#steps & 255) !== 0) return;
    const { stop, progress, maxVertices, expected } = this.#goal;
    const count = this.#mesh.vertexCount;
    if (count > maxVertices) throw tooMany(2 * Math.max(expected, count), maxVertices);
    if ((this.#steps & 4095) === 0) progress?.(Math.min(0.99, count / expected));
    if (stop?.()) {
      throw new MesherError('MESHING_STOPPED', 'meshing was stopped', {}, 'Start it again when wanted.');
    }
  }

  #fitTriangles(): void {
    if (this.#mesh.triangleCount <= this.#waits.length) return;
    const more = new Uint8Array(Math.max(this.#mesh.triangleCount, 2 * this.#waits.length));
    more.set(this.#waits);
    this.#waits = more;
  }

  #push(t: number, bit: number): void {
    if (this.#waits[t] & bit) return;
    this.#waits[t] |= bit;
    (bit === badSize ? this.#large : this.#skinny).push(t);
  }

  #grade(t: number): void {
    const state = this.#quality(t);
    if (state & badSize) this.#push(t, badSize);
    else if (state & badAngle) this.#push(t, badAngle);
  }

  /** Bits of what is wrong with a triangle: too long an edge for its place, too small an angle. */
  #quality(t: number): number {
    const { xy, from } = this.#mesh;
    const a = 2 * from[3 * t];
    const b = 2 * from[3 * t + 1];
    const c = 2 * from[3 * t + 2];
    const ax = xy[a];
    const ay = xy[a + 1];
    const ux = xy[b] - ax;
    const uy = xy[b + 1] - ay;
    const wx = xy[c] - ax;
    const wy = xy[c + 1] - ay;
    const ab = ux * ux + uy * uy;
    const ac = wx * wx + wy * wy;
    const bc = (wx - ux) * (wx - ux) + (wy - uy) * (wy - uy);
    const size = this.#goal.size;
    const h = typeof size === 'number' ? size : size(ax + (ux + wx) / 3, ay + (uy + wy) / 3);
    const longest = Math.max(ab, ac, bc);
    const shortest = Math.min(ab, ac, bc);
    const middle = ab + ac + bc - longest - shortest;
    const twice = ux * wy - uy * wx;
    let state = longest > h * h ? badSize : 0;
    if (twice * twice < this.#sinSquare * longest * middle) state |= badAngle;
    return state;
  }

  /** Puts a point where the triangle is worst off, or splits the segments that such a point would come near. */
  #improve(t: number, state: number): void {
    const mesh = this.#mesh;
    const { xy, from } = mesh;
    const e = this.#shortestEdge(t);
    const p = 2 * from[e];
    const q = 2 * from[next(e)];
    const r = 2 * from[previous(e)];
    const kept = state === badAngle ? this.#keptSegments(e) : undefined;
    if (kept === 'leave') return;
    const dx = xy[q] - xy[p];
    const dy = xy[q + 1] - xy[p + 1];
    const ex = xy[r] - xy[p];
    const ey = xy[r + 1] - xy[p + 1];
    const dd = dx * dx + dy * dy;
    const ee = ex * ex + ey * ey;
    const scale = 0.5 / (dx * ey - dy * ex);
    let ox = (ey * dd - dy * ee) * scale;
    let oy = (dx * ee - ex * dd) * scale;
    const fx = 0.5 * dx - this.#offCentre * dy;
    const fy = 0.5 * dy + this.#offCentre * dx;
    if (fx * fx + fy * fy < ox * ox + oy * oy) {
      ox = fx;
      oy = fy;
    }
    const x = xy[p] + ox;
    const y = xy[p + 1] + oy;
    if (!Number.isFinite(x + y) || (x === xy[p] && y === xy[p + 1])) return;
    const cavity = this.#cavity;
    cavity.collect(mesh, t, x, y);
    const hit = this.#hit;
    hit.length = 0;
    const star = cavity.look(mesh, x, y, hit);
    if (hit.length > 0) {
      if (kept?.some((s) => hit.includes(s))) return;
      let queued = false;
      for (const s of hit) queued = this.#walls.request(s) || queued;
      if (!queued) return;
      this.#walls.flush();
      // The slot may hold another triangle by now; whatever it holds is looked at again.
      this.#grade(t);
      return;
    }
    if (!star) return;
    const v = mesh.addVertex(x, y);
    fillCavity(mesh, cavity, v, true, mesh.regionSet[t], this.#walls.segmentEdge, this.#fan);
    this.#walls.inspect(this.#fan);
    this.#gradeFan(this.#fan);
  }

  #shortestEdge(t: number): number {
    const { xy, from } = this.#mesh;
    let best = 3 * t;
    let least = Number.POSITIVE_INFINITY;
    for (let e = 3 * t; e < 3 * t + 3; e++) {
      const a = 2 * from[e];
      const b = 2 * from[next(e)];
      const dx = xy[a] - xy[b];
      const dy = xy[a + 1] - xy[b + 1];
      const square = dx * dx + dy * dy;
      if (square < least) {
        least = square;
        best = e;
      }
    }
    return best;
  }

  /**
   * What may not be split for the sake of the triangle over its shortest edge `e`: 'leave' when that edge spans the
   * corner it looks at; the two walls of the corner on the other side of `e` when that one is sharper than the goal.
   */
  #keptSegments(e: number): 'leave' | number[] | undefined {
    const { segment, opposite } = this.#mesh;
    if (segment[next(e)] >= 0 && segment[previous(e)] >= 0) return 'leave';
    const o = opposite[e];
    if (o < 0 || segment[e] >= 0) return undefined;
    const s = segment[next(o)];
    const r = segment[previous(o)];
    return s >= 0 && r >= 0 && this.#quality((o / 3) | 0) & badAngle ? [s, r] : undefined;
  }

  #gradeFan(fan: Fan): void {
    this.#fitTriangles();
    const { list, count } = fan;
    for (let i = 0; i < count; i++) this.#grade(list[i]);
  }
}
