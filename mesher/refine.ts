import { Cavity } from './cavity.ts';
import { MesherError } from './errors.ts';
import { tooMany } from './estimate.ts';
import { type Fan, fillCavity, makeFan } from './fan.ts';
import { type HalfEdgeMesh, next, previous } from './half-edge.ts';
import { IntQueue } from './queue.ts';
import type { RefineGoal } from './refine-goal.ts';
import { tieSlack } from './slack.ts';
import { SegmentSplitter } from './split-segments.ts';

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
  /** Per triangle: what is wrong with it while it waits in a queue. */
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
    this.#sinSquare = Math.sin(angle) ** 2 * (1 + tieSlack);
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
      const state = isLarge ? badSize : badAngle;
      // An entry is stale when the triangle has been replaced by a better one since.
      if (this.#waits[t] !== state) continue;
      this.#waits[t] = 0;
      this.#improve(t, state);
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

  #grade(t: number): void {
    const state = this.#quality(t);
    if (state === this.#waits[t]) return;
    this.#waits[t] = state;
    if (state === badSize) this.#large.push(t);
    else if (state === badAngle) this.#skinny.push(t);
  }

  /** What is wrong with a triangle: too long an edge for its place, else too small an angle, else 0. */
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
    if (longest > h * h * (1 + tieSlack)) return badSize;
    return twice * twice < this.#sinSquare * longest * middle ? badAngle : 0;
  }

  /** Puts a point where the triangle is worst off, or splits the segments that such a point would come near. */
  #improve(t: number, state: number): void {
    const mesh = this.#mesh;
    const { xy, from } = mesh;
    const e = this.#shortestEdge(t);
    const p = 2 * from[e];
    const q = 2 * from[next(e)];
    const r = 2 * from[previous(e)];
    const { segment } = mesh;
    if (state === badAngle && segment[next(e)] >= 0 && segment[previous(e)] >= 0) return;
    const dx = xy[q] - xy[p];
    const dy = xy[q + 1] - xy[p + 1];
    const ex = xy[r] - xy[p];
    const ey = xy[r + 1] - xy[p + 1];
    const dd = dx * dx + dy * dy;
    const ee = ex * ex + ey * ey;
    // Height of the circumcentre over the shortest edge, per its length; the off-centre is lower in thin triangles.
    const circumcentre = (ee - dx * ex - dy * ey) / (2 * (dx * ey - dy * ex));
    let height = Math.min(circumcentre, this.#offCentre);
    while (this.#place(t, xy[p] + 0.5 * dx - height * dy, xy[p + 1] + 0.5 * dy + height * dx, state, dd)) {
      // Nearer to the edge, where the triangle over it still gets better; never nearer than its ends are.
      height *= 0.8;
      if (height < 0.87) return;
    }
  }

  /**
   * Inserts a point for triangle `t`, or splits the segments it would come near.
   *
   * @param square length of the triangle's shortest edge, squared
   * @returns true when the point is no use because pieces of a sharp corner that may not be split stand too near
   */
  #place(t: number, x: number, y: number, state: number, square: number): boolean {
    const mesh = this.#mesh;
    if (!Number.isFinite(x + y)) return false;
    const cavity = this.#cavity;
    cavity.collect(mesh, t, x, y);
    const hit = this.#hit;
    hit.length = 0;
    const star = cavity.look(mesh, x, y, hit);
    if (hit.length > 0) {
      let queued = false;
      let kept = false;
      for (const s of hit) {
        if (state === badAngle && this.#walls.wouldShorten(s, square)) kept = true;
        else queued = this.#walls.request(s) || queued;
      }
      if (!queued) return kept;
      this.#walls.flush();
      // The slot may hold another triangle by now; whatever it holds is looked at again.
      this.#grade(t);
      return false;
    }
    if (!star) return false;
    const v = mesh.addVertex(x, y);
    fillCavity(mesh, cavity, v, true, mesh.regionSet[t], this.#walls.segmentEdge, this.#fan);
    this.#walls.inspect(this.#fan);
    this.#gradeFan(this.#fan);
    return false;
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
      if (square < least * (1 - tieSlack)) {
        least = square;
        best = e;
      }
    }
    return best;
  }

  #gradeFan(fan: Fan): void {
    this.#fitTriangles();
    const { list, count } = fan;
    for (let i = 0; i < count; i++) this.#grade(list[i]);
  }
}
