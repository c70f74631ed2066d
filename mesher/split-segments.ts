import { Cavity } from './cavity.ts';
import { tooMany } from './estimate.ts';
import { type Fan, fillCavity, makeFan } from './fan.ts';
import { grownInt, type HalfEdgeMesh, next, previous } from './half-edge.ts';
import { orient } from './predicates.ts';
import { IntQueue } from './queue.ts';
import type { RefineGoal } from './refine-goal.ts';
import { rightAngleSlack, tieSlack } from './slack.ts';
import { splitPlace } from './split-place.ts';

/** Told of every fan of new triangles. */
export type FanListener = (fan: Fan) => void;

/** Splits segments that are encroached upon or too long, with the new vertices on their curves. */
export class SegmentSplitter {
  readonly #mesh: HalfEdgeMesh;
  readonly #goal: RefineGoal;
  readonly #onFan: FanListener;
  readonly #poll: () => void;
  readonly #cavity = new Cavity();
  readonly #other = new Cavity();
  readonly #fan = makeFan();
  readonly #otherFan = makeFan();
  readonly #queue = new IntQueue();
  /** Per vertex of the first triangulation: shell unit of a sharp corner, else 0. */
  readonly #reach: Float64Array;
  /** Per vertex of the first triangulation: sine of half the angle of a corner sharper than the goal, else 0. */
  readonly #halfSine: Float64Array;
  /** Per segment: a half-edge on it. */
  segmentEdge = new Int32Array(64);
  /** Per segment: 1 while it waits in the queue, 2 when the numbers leave no room to split it. */
  #state = new Uint8Array(64);
  /** Vertex count at which the walls alone are judged. */
  #checkAt: number;

  constructor(mesh: HalfEdgeMesh, goal: RefineGoal, onFan: FanListener, poll: () => void) {
    this.#mesh = mesh;
    this.#goal = goal;
    this.#onFan = onFan;
    this.#poll = poll;
    this.#reach = new Float64Array(mesh.vertexCount);
    this.#checkAt = 10_000 + 4 * mesh.vertexCount;
    this.#halfSine = new Float64Array(mesh.vertexCount);
    for (const { vertex, reach, angle } of goal.corners) {
      this.#reach[vertex] = reach;
      if (angle >= (goal.minAngle * Math.PI) / 180) continue;
      const known = this.#halfSine[vertex];
      const sine = Math.max(1e-9, Math.sin(angle / 2));
      this.#halfSine[vertex] = known === 0 ? sine : Math.min(known, sine);
    }
    this.#fit();
    for (let e = 0; e < 3 * mesh.triangleCount; e++) {
      if (mesh.segment[e] >= 0) this.segmentEdge[mesh.segment[e]] = e;
    }
  }

  /** Splits what is too long or encroached upon in the whole mesh, and inner walls that have no middle node. */
  splitAll(): void {
    const { segmentCount } = this.#mesh;
    const ends = this.#wallEnds();
    for (let s = 0; s < segmentCount; s++) {
      const lone = ends[this.#mesh.segmentFrom[s]] === 1 && ends[this.#mesh.segmentTo[s]] === 1;
      if (lone && this.#isThere(s)) this.request(s);
      else this.#requestIfNeeded(s);
    }
    this.flush(true);
  }

  /** Per vertex: how many wall segments end there. */
  #wallEnds(): Uint8Array {
    const { segmentCount, segmentFrom, segmentTo, segmentCurve, tags, vertexCount } = this.#mesh;
    const ends = new Uint8Array(vertexCount);
    for (let s = 0; s < segmentCount; s++) {
      if (tags[segmentCurve[s]] < 0) continue;
      ends[segmentFrom[s]]++;
      ends[segmentTo[s]]++;
    }
    return ends;
  }

  /** Region borders outside the compartment have no half-edge. */
  #isThere(s: number): boolean {
    return this.#mesh.segment[this.segmentEdge[s]] === s;
  }

  /** Puts a segment on the queue; false when it cannot be split any more. */
  request(s: number): boolean {
    if (this.#state[s] !== 0) return this.#state[s] === 1;
    this.#state[s] = 1;
    this.#queue.push(s);
    return true;
  }

  /**
   * True when splitting `s` for a triangle's angle would only make shorter edges than the triangle has: the pieces
   * that end in a corner sharper than the goal would be halved for ever, because each halving brings the next shell's
   * ends as near to each other as the corner is sharp (the rule of Shewchuk 2002, section 6, recalled).
   *
   * @param square length of the triangle's shortest edge, squared
   */
  wouldShorten(s: number, square: number): boolean {
    const { xy, segmentFrom, segmentTo } = this.#mesh;
    const a = segmentFrom[s];
    const b = segmentTo[s];
    const atA = a < this.#halfSine.length && this.#halfSine[a] > 0;
    const atB = b < this.#halfSine.length && this.#halfSine[b] > 0;
    if (!atA && !atB) return false;
    const sine = Math.max(atA ? this.#halfSine[a] : 0, atB ? this.#halfSine[b] : 0);
    const { granted } = this.#goal;
    const floor = Math.max(atA ? granted[a] : 0, atB ? granted[b] : 0);
    const dx = xy[2 * a] - xy[2 * b];
    const dy = xy[2 * a + 1] - xy[2 * b + 1];
    const length = dx * dx + dy * dy;
    return length <= floor * floor && square >= length * sine * sine;
  }

  /** Splits everything on the queue and whatever that makes necessary. */
  flush(wallsOnly = false): void {
    while (this.#queue.count > 0) {
      const s = this.#queue.shift();
      this.#state[s] = 0;
      if (!this.#split(s)) this.#state[s] = 2;
      if (wallsOnly && this.#mesh.vertexCount > this.#checkAt) this.#foresee();
      this.#poll();
    }
  }

  /** Requests the segments that a new fan's vertex, or its neighbours, encroach upon. */
  inspect(fan: Fan): void {
    const { segment } = this.#mesh;
    const { list, count } = fan;
    for (let i = 0; i < count; i++) {
      const e = 3 * list[i];
      if (segment[e] >= 0 && this.#encroached(e)) this.request(segment[e]);
      if (segment[e + 1] >= 0 && this.#encroached(e + 1)) this.request(segment[e + 1]);
      if (segment[e + 2] >= 0 && this.#encroached(e + 2)) this.request(segment[e + 2]);
    }
  }

  /** True when the vertex facing half-edge `e` lies in its diametral circle. */
  #encroached(e: number): boolean {
    const { xy, from } = this.#mesh;
    const a = 2 * from[e];
    const b = 2 * from[next(e)];
    const c = 2 * from[previous(e)];
    const ax = xy[a] - xy[c];
    const ay = xy[a + 1] - xy[c + 1];
    const bx = xy[b] - xy[c];
    const by = xy[b + 1] - xy[c + 1];
    return ax * bx + ay * by < rightAngleSlack * (ax * ax + ay * ay + bx * bx + by * by);
  }

  #requestIfNeeded(s: number): void {
    if (!this.#isThere(s)) return;
    const e = this.segmentEdge[s];
    const o = this.#mesh.opposite[e];
    if (this.#tooLong(s) || this.#encroached(e) || (o >= 0 && this.#encroached(o))) this.request(s);
  }

  #tooLong(s: number): boolean {
    const { xy, segmentFrom, segmentTo } = this.#mesh;
    const a = 2 * segmentFrom[s];
    const b = 2 * segmentTo[s];
    const { size } = this.#goal;
    const h = typeof size === 'number' ? size : size((xy[a] + xy[b]) / 2, (xy[a + 1] + xy[b + 1]) / 2);
    return (xy[a] - xy[b]) ** 2 + (xy[a + 1] - xy[b + 1]) ** 2 > h * h * (1 + tieSlack);
  }

  /**
   * Refuses early where walls run close along each other: breadth first, what still waits after many splits is such
   * a place, and each piece will be cut to about the width there.
   *
   * @throws {MesherError} TOO_MANY_TRIANGLES
   */
  #foresee(): void {
    const { xy, from, segmentCount, vertexCount } = this.#mesh;
    this.#checkAt *= 2;
    let more = 0;
    for (let s = 0; s < segmentCount; s++) {
      const e = this.segmentEdge[s];
      if (this.#state[s] !== 1 || !this.#isThere(s) || !this.#encroached(e)) continue;
      const a = 2 * from[e];
      const b = 2 * from[next(e)];
      const c = 2 * from[previous(e)];
      const dx = xy[b] - xy[a];
      const dy = xy[b + 1] - xy[a + 1];
      more += (dx * dx + dy * dy) / (dx * (xy[c + 1] - xy[a + 1]) - dy * (xy[c] - xy[a]));
    }
    const vertices = vertexCount + more;
    if (vertices > this.#goal.maxVertices) throw tooMany(vertices, this.#goal.maxVertices);
  }

  #fit(): void {
    const n = this.#mesh.segmentCount;
    if (n > this.segmentEdge.length) this.segmentEdge = grownInt(this.segmentEdge, n);
    if (n > this.#state.length) {
      const more = new Uint8Array(this.segmentEdge.length);
      more.set(this.#state);
      this.#state = more;
    }
  }

  /** Splits a segment in two, with the new vertex on its curve; false when the numbers leave no room for it. */
  #split(s: number): boolean {
    const mesh = this.#mesh;
    const e = this.segmentEdge[s];
    const o = mesh.opposite[e];
    const { t, at } = splitPlace(mesh, s, this.#reach);
    const [x, y] = at;
    const cavity = this.#cavity;
    const other = this.#other;
    cavity.collectFromSegment(mesh, e, x, y);
    if (!this.#turnsLeft(cavity, x, y)) return false;
    if (o >= 0) {
      other.collectFromSegment(mesh, o, x, y);
      if (!this.#turnsLeft(other, x, y)) return false;
    }
    const v = mesh.addVertex(x, y);
    const t1 = mesh.segmentSpan[2 * s + 1];
    const end = mesh.segmentTo[s];
    mesh.segmentSpan[2 * s + 1] = t;
    mesh.segmentTo[s] = v;
    const r = mesh.addSegment(mesh.segmentCurve[s], t, t1, v, end);
    this.#fit();
    const forward = mesh.from[e] === mesh.segmentFrom[s];
    this.#fill(cavity, e, v, this.#fan, forward ? r : s, forward ? s : r);
    if (o >= 0) {
      this.#fill(other, o, v, this.#otherFan, forward ? s : r, forward ? r : s);
      this.#link(this.#fan.first, this.#otherFan.last);
      this.#link(this.#fan.last, this.#otherFan.first);
    }
    this.inspect(this.#fan);
    this.#onFan(this.#fan);
    if (o >= 0) {
      this.inspect(this.#otherFan);
      this.#onFan(this.#otherFan);
    }
    this.#requestIfNeeded(s);
    this.#requestIfNeeded(r);
    return true;
  }

  #fill(cavity: Cavity, e: number, v: number, fan: Fan, firstSegment: number, lastSegment: number): void {
    const mesh = this.#mesh;
    fillCavity(mesh, cavity, v, false, mesh.regionSet[(e / 3) | 0], this.segmentEdge, fan);
    mesh.segment[fan.first] = firstSegment;
    mesh.segment[fan.last] = lastSegment;
    this.segmentEdge[firstSegment] = fan.first;
    this.segmentEdge[lastSegment] = fan.last;
  }

  #link(e: number, o: number): void {
    this.#mesh.opposite[e] = o;
    this.#mesh.opposite[o] = e;
  }

  /** A wall vertex may encroach upon other segments, but every edge of its chain must turn left round it. */
  #turnsLeft(cavity: Cavity, x: number, y: number): boolean {
    const { xy } = this.#mesh;
    for (let k = 0; k < cavity.count; k++) {
      const a = 2 * cavity.from[k];
      const b = 2 * cavity.to[k];
      if (orient(xy[a], xy[a + 1], xy[b], xy[b + 1], x, y) <= 0) return false;
    }
    return true;
  }
}
