import type { Chain, Domain, Piece, Point } from '../../mesher/index.ts';

/** How rich a random domain is. */
export interface RandomDomainOptions {
  /** Any integer; the same seed gives the same domain. */
  readonly seed: number;
  /** Corners of the outline, at least 3. */
  readonly corners: number;
  readonly holes: number;
  /** Straight inner walls. */
  readonly slits: number;
  /** 0: none; 1: an island; 2: also everything right of a line across the compartment. */
  readonly regions: 0 | 1 | 2;
}

/** Every edge of the outline and of the holes and every slit has a tag of its own, 0 to `tagCount` − 1. */
export interface RandomDomain {
  readonly domain: Domain;
  readonly tagCount: number;
  /** Tags of outline and holes only. */
  readonly loopTags: readonly number[];
}

/** Features are kept apart by this much, so that coarse meshes suffice; the outline lies in the unit square. */
const clearance = 0.05;
const smallestAngle = Math.PI / 9;

/** Uniform numbers in [0, 1) from a seed: mulberry32 (Ettinger, public domain, recalled). */
export function seededRandom(seed: number): () => number {
  let state = seed | 0;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/**
 * A polygon, as a rule neither convex nor star-shaped, with polygonal holes, slits and regions inside; in the form that
 * healDomain gives.
 *
 * @throws {Error} when no room is found in many tries
 */
export function randomDomain(options: RandomDomainOptions): RandomDomain {
  const random = seededRandom(options.seed);
  const outline = randomOutline(random, options.corners);
  const taken: (readonly Point[])[] = [outline];
  let tag = 0;
  const chain = (name: string, points: readonly Point[], closed: boolean): Chain => {
    const pieces: Piece[] = [];
    for (let k = 0; k < points.length - (closed ? 0 : 1); k++) {
      const curve = { kind: 'line', from: cornerOf(points, k), to: cornerOf(points, k + 1) } as const;
      pieces.push({ curve, tag: tag++ });
    }
    return { name, pieces };
  };
  const rim = chain('outline', outline, true);
  const holes: Chain[] = [];
  for (let h = 0; h < options.holes; h++) {
    const { at, room } = freeDisc(random, taken);
    const points = blob(random, at, 0.7 * room, 3 + Math.floor(4 * random())).reverse();
    taken.push(points);
    holes.push(chain(`hole ${h + 1}`, points, true));
  }
  const loopTags = Array.from({ length: tag }, (_, t) => t);
  const innerWalls: Chain[] = [];
  for (let w = 0; w < options.slits; w++) {
    const { at, room } = freeDisc(random, taken);
    const angle = 2 * Math.PI * random();
    const reach: Point = [0.6 * room * Math.cos(angle), 0.6 * room * Math.sin(angle)];
    const points: Point[] = [
      [at[0] - reach[0], at[1] - reach[1]],
      [at[0] + reach[0], at[1] + reach[1]],
    ];
    taken.push(points);
    innerWalls.push(chain(`slit ${w + 1}`, points, false));
  }
  const tagCount = tag;
  const regions: Chain[] = [];
  if (options.regions > 0) {
    const { at, room } = freeDisc(random, taken);
    const island = blob(random, at, 0.7 * room, 5);
    taken.push(island);
    regions.push(chain('island', island, true));
  }
  if (options.regions === 2) {
    const x = freeLine(random, taken);
    const beyond: Point[] = [
      [x, -1],
      [2, -1],
      [2, 2],
      [x, 2],
    ];
    regions.push(chain('right', beyond, true));
  }
  return { domain: { outline: rim, holes, innerWalls, regions, tolerance: 1e-12 }, tagCount, loopTags };
}

/** The corner with that number of a closed polygon; numbers wrap. */
function cornerOf(points: readonly Point[], k: number): Point {
  const point = points[(k + points.length) % points.length];
  if (!point) throw new Error('a polygon without corners');
  return point;
}

/** Random points joined by a tour without crossings, counter-clockwise, without sharp corners or narrow places. */
function randomOutline(random: () => number, corners: number): Point[] {
  for (let attempt = 0; attempt < 5000; attempt++) {
    const points = untangled(Array.from({ length: corners }, (): Point => [random(), random()]));
    if (signedArea(points) < 0) points.reverse();
    if (signedArea(points) > 0.15 && isRoomy(points)) return points;
  }
  throw new Error(`no outline with ${corners} corners was found`);
}

/** Crossing edges are exchanged until none is left; each exchange shortens the tour, so this ends (2-opt, Croes 1958). */
function untangled(points: Point[]): Point[] {
  const n = points.length;
  for (let changed = true; changed; ) {
    changed = false;
    for (let i = 0; i < n; i++) {
      for (let j = i + 2; j < n; j++) {
        if (i === 0 && j === n - 1) continue;
        const [a, b] = [cornerOf(points, i), cornerOf(points, i + 1)];
        const [c, d] = [cornerOf(points, j), cornerOf(points, j + 1)];
        if (!cross(a, b, c, d)) continue;
        points.splice(i + 1, j - i, ...points.slice(i + 1, j + 1).reverse());
        changed = true;
      }
    }
  }
  return points;
}

function isRoomy(points: readonly Point[]): boolean {
  for (let i = 0; i < points.length; i++) {
    const [before, at, after] = [cornerOf(points, i - 1), cornerOf(points, i), cornerOf(points, i + 1)];
    const u: Point = [before[0] - at[0], before[1] - at[1]];
    const v: Point = [after[0] - at[0], after[1] - at[1]];
    const angle = Math.abs(Math.atan2(u[0] * v[1] - u[1] * v[0], u[0] * v[0] + u[1] * v[1]));
    if (angle < smallestAngle) return false;
    for (let j = 0; j < points.length; j++) {
      if (j === i || (j + 1) % points.length === i) continue;
      if (distanceToSegment(at, cornerOf(points, j), cornerOf(points, j + 1)) < clearance) return false;
    }
  }
  return true;
}

/** A place inside the first loop and outside the others, with its distance to all of them. */
function freeDisc(random: () => number, taken: readonly (readonly Point[])[]): { at: Point; room: number } {
  let best: { at: Point; room: number } = { at: [0, 0], room: 0 };
  for (let attempt = 0; attempt < 60; attempt++) {
    const at: Point = [random(), random()];
    const inside = taken.every((loop, which) => loop.length < 3 || encloses(loop, at) === (which === 0));
    if (!inside) continue;
    const room = Math.min(...taken.map((loop) => distanceToLoop(at, loop)));
    if (room > best.room) best = { at, room };
  }
  if (best.room < clearance / 2) throw new Error('no room left inside the outline');
  return best;
}

/** A star-shaped polygon about a place, counter-clockwise, within a radius. */
function blob(random: () => number, at: Point, radius: number, corners: number): Point[] {
  const turn = 2 * Math.PI * random();
  return Array.from({ length: corners }, (_, k): Point => {
    const angle = turn + (2 * Math.PI * k) / corners;
    const r = radius * (0.6 + 0.4 * random());
    return [at[0] + r * Math.cos(angle), at[1] + r * Math.sin(angle)];
  });
}

/** A vertical line through the first loop that keeps away from every corner and from edges nearly parallel to it. */
function freeLine(random: () => number, taken: readonly (readonly Point[])[]): number {
  for (let attempt = 0; attempt < 2000; attempt++) {
    const x = 0.1 + 0.8 * random();
    const free = taken.every((loop) =>
      loop.every((point, k) => {
        const next = cornerOf(loop, k + 1);
        if (Math.abs(point[0] - x) < 0.01) return false;
        const meets = point[0] < x !== next[0] < x;
        return !meets || Math.abs(next[0] - point[0]) > 0.3 * Math.abs(next[1] - point[1]);
      }),
    );
    if (free) return x;
  }
  return 3;
}

function signedArea(points: readonly Point[]): number {
  let twice = 0;
  for (let k = 0; k < points.length; k++) {
    const [a, b] = [cornerOf(points, k), cornerOf(points, k + 1)];
    twice += a[0] * b[1] - a[1] * b[0];
  }
  return twice / 2;
}

function side(a: Point, b: Point, c: Point): number {
  return (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]);
}

function cross(a: Point, b: Point, c: Point, d: Point): boolean {
  return side(a, b, c) * side(a, b, d) < 0 && side(c, d, a) * side(c, d, b) < 0;
}

function encloses(loop: readonly Point[], at: Point): boolean {
  let inside = false;
  for (let k = 0; k < loop.length; k++) {
    const [a, b] = [cornerOf(loop, k), cornerOf(loop, k + 1)];
    if (a[1] > at[1] === b[1] > at[1]) continue;
    if (at[0] < a[0] + ((at[1] - a[1]) / (b[1] - a[1])) * (b[0] - a[0])) inside = !inside;
  }
  return inside;
}

function distanceToLoop(at: Point, loop: readonly Point[]): number {
  return Math.min(...loop.map((point, k) => distanceToSegment(at, point, cornerOf(loop, k + 1))));
}

function distanceToSegment(at: Point, a: Point, b: Point): number {
  const [dx, dy] = [b[0] - a[0], b[1] - a[1]];
  const t = ((at[0] - a[0]) * dx + (at[1] - a[1]) * dy) / (dx * dx + dy * dy);
  const s = Math.min(1, Math.max(0, t));
  return Math.hypot(at[0] - a[0] - s * dx, at[1] - a[1] - s * dy);
}
