import type { Chain, Curve, Domain, Piece, Point } from '../../mesher/index.ts';
import { pointAt } from '../../mesher/index.ts';
import { seededRandom } from '../support/random-domain.ts';
import { polyomino, shuffledPolygon } from './random-outlines.ts';
import { at, between, crossing, distance, gap, type Segment } from './segments.ts';

/** What a random drawing is made of, so that a failure can be told in words. */
export interface RandomDrawing {
  readonly domain: Domain;
  readonly summary: string;
}

/**
 * A compartment of 3 to 200 corners that is not star-shaped as a rule, with 0 to 12 holes (polygons and circles, some
 * touching walls in a point), arcs and Bézier curves among its walls, inner walls (free, wall to wall, crossing), and
 * up to two regions that reach where they like. Every fifth has sharp corners.
 */
export function randomDrawing(seed: number): RandomDrawing {
  const random = seededRandom(seed);
  const sharp = seed % 5 === 0;
  const corners = Math.floor(3 + 198 * random() ** 2);
  let outline =
    corners <= 14 || (sharp && corners < 60)
      ? shuffledPolygon(random, corners, sharp ? 0 : Math.PI / 7)
      : polyomino(random, corners);
  if (sharp) outline = withNotch(random, outline);
  const drawing = new Drawing(random, outline);
  drawing.bendWalls();
  const holes = Math.floor(13 * random() ** 2);
  for (let i = 0; i < holes; i++) drawing.addHole();
  const inner = Math.floor(4 * random() ** 2);
  for (let i = 0; i < inner; i++) drawing.addInnerWall();
  const regions = Math.floor(3 * random());
  for (let i = 0; i < regions; i++) drawing.addRegion(i);
  const summary = `seed ${seed}: ${outline.length} corners, ${drawing.holes.length} holes, ${drawing.innerWalls.length} inner walls, ${regions} regions${sharp ? ', sharp' : ''}`;
  return { domain: drawing.domain(), summary };
}

/** A thin notch driven into the longest wall, if it stays clear of all others. */
function withNotch(random: () => number, outline: readonly Point[]): Point[] {
  const n = outline.length;
  for (let tries = 0; tries < 30; tries++) {
    const i = Math.floor(n * random());
    const p = at(outline, i);
    const q = at(outline, i + 1);
    const depth = (0.2 + 1.5 * random()) * Math.hypot(q[0] - p[0], q[1] - p[1]);
    const tip: Point = [
      (p[0] + q[0]) / 2 - (depth * (q[1] - p[1])) / Math.hypot(q[0] - p[0], q[1] - p[1]),
      (p[1] + q[1]) / 2 + (depth * (q[0] - p[0])) / Math.hypot(q[0] - p[0], q[1] - p[1]),
    ];
    const half = Math.min(0.3, 0.02 + 0.1 * random());
    const a = between(p, q, 0.5 - half);
    const b = between(p, q, 0.5 + half);
    const fresh: Segment[] = [
      [a, tip],
      [tip, b],
    ];
    const rest = outline
      .map((_, k): Segment => [at(outline, k), at(outline, k + 1)])
      .filter((_, k) => k !== i);
    if (fresh.every((f) => rest.every((r) => gap(f, r) > 0.02 * depth))) {
      return [...outline.slice(0, i + 1), a, tip, b, ...outline.slice(i + 1)];
    }
  }
  return [...outline];
}

class Drawing {
  readonly holes: Chain[] = [];
  readonly innerWalls: Chain[] = [];
  readonly regions: Chain[] = [];
  readonly #random: () => number;
  #outline: Piece[];
  #tag = 0;
  readonly #corners: Point[];
  /** Everything walls so far, as short segments. */
  #taken: Segment[];

  constructor(random: () => number, outline: readonly Point[]) {
    this.#random = random;
    this.#outline = outline.map((from, i) => this.#piece({ kind: 'line', from, to: at(outline, i + 1) }));
    this.#taken = outline.map((from, i) => [from, at(outline, i + 1)]);
    this.#corners = [...outline];
  }

  domain(): Domain {
    return {
      outline: { name: 'outline', pieces: this.#outline },
      holes: this.holes,
      innerWalls: this.innerWalls,
      regions: this.regions,
      tolerance: 1e-12,
    };
  }

  #piece(curve: Curve): Piece {
    return { curve, tag: this.#tag++ };
  }

  /** Up to half of the straight walls become arcs or Bézier curves where there is room, never two in a row. */
  bendWalls(): void {
    let bent = -2;
    this.#outline = this.#outline.map((piece, i) => {
      const random = this.#random;
      if (random() > 0.5 || bent === i - 1 || i === 0 || piece.curve.kind !== 'line') return piece;
      const { from, to } = piece.curve;
      const bulge = (random() - 0.5) * 0.7;
      const curve = random() < 0.5 ? arcOver(from, to, bulge) : bezierOver(from, to, bulge, random);
      const samples = Array.from({ length: 25 }, (_, k) => pointAt(curve, k / 24));
      const parts = samples.slice(1).map((p, k): Segment => [samples[k] ?? p, p]);
      const length = Math.hypot(to[0] - from[0], to[1] - from[1]);
      const others = this.#taken.filter((_, k) => k !== i);
      const middle = parts.slice(3, -3);
      const free =
        middle.every((p) => others.every((o) => gap(p, o) > 0.04 * length)) &&
        parts.every((p) => others.every((o) => !crossing(p, o)));
      if (!free) return piece;
      bent = i;
      this.#taken = this.#taken.map((s, k) => (k === i ? [from, from] : s));
      this.#taken.push(...parts);
      return { curve, tag: piece.tag };
    });
  }

  #inside(p: Point): boolean {
    let inside = false;
    for (const [a, b] of this.#taken) {
      if (a[1] > p[1] !== b[1] > p[1] && p[0] < a[0] + ((p[1] - a[1]) / (b[1] - a[1])) * (b[0] - a[0])) {
        inside = !inside;
      }
    }
    return inside;
  }

  /** A place inside with the distance to the nearest wall, the roomiest of a few. */
  #room(): { at: Point; room: number } {
    let best: { at: Point; room: number } = { at: [0, 0], room: 0 };
    for (let i = 0; i < 12; i++) {
      const p: Point = [this.#random(), this.#random()];
      if (!this.#inside(p)) continue;
      const room = Math.min(...this.#taken.map((s) => gap(s, [p, p])));
      if (room > best.room) best = { at: p, room };
    }
    return best;
  }

  addHole(): void {
    const random = this.#random;
    const { at: centre, room } = this.#room();
    if (room < 0.004) return;
    const name = `hole ${this.holes.length + 1}`;
    const radius = room * (0.2 + 0.75 * random());
    if (random() < 0.4) {
      const start: Point = [centre[0] + radius, centre[1]];
      const radii: [number, number] = [radius, radius * (random() < 0.5 ? 1 : 0.4 + 0.6 * random())];
      const arc = { kind: 'arc', from: start, to: start, centre, radii, turned: 0, start: 0 } as const;
      this.holes.push({
        name,
        pieces: [this.#piece({ ...arc, sweep: (random() < 0.5 ? 2 : -2) * Math.PI })],
      });
      this.#taken.push(...ring(polar(centre, radius, 24, random, 0)));
      return;
    }
    const points = polar(centre, radius, 3 + Math.floor(6 * random()), random, 0.5);
    const reached = random() < 0.3 ? this.#reach(points) : undefined;
    const loop = reached ?? points;
    this.holes.push({
      name,
      pieces: ring(loop).map(([from, to]) => this.#piece({ kind: 'line', from, to })),
    });
    this.#taken.push(...ring(loop));
    this.#corners.push(...loop);
  }

  /** The loop with its first point moved onto a corner of another wall, if nothing is in the way. */
  #reach(points: readonly Point[]): Point[] | undefined {
    const [first, ...rest] = points;
    if (!first) return undefined;
    const near = [...this.#corners].sort((p, q) => distance(p, first) - distance(q, first))[0];
    if (!near) return undefined;
    const loop = [near, ...rest];
    const sides = [ring(loop)[0], ring(loop).at(-1)];
    const free = this.#taken.every((o) =>
      sides.every((s) => !s || touches(o, near) || gap(s, o) > 0.05 * distance(...s)),
    );
    const own = ring(loop).slice(1, -1);
    const simple = sides.every((s, i) =>
      own.every((o, k) => !s || k === (i === 0 ? 0 : own.length - 1) || gap(s, o) > 0.05 * distance(...s)),
    );
    return free && simple && sides.every((s) => s && this.#inside(between(s[0], s[1], 0.5)))
      ? loop
      : undefined;
  }

  addInnerWall(): void {
    const random = this.#random;
    const name = `inner wall ${this.innerWalls.length + 1}`;
    let points: Point[] | undefined;
    if (random() < 0.4) points = this.#wallToWall();
    if (!points) {
      const { at: centre, room } = this.#room();
      if (room < 0.004) return;
      points = Array.from({ length: 2 + Math.floor(3 * random()) }, () => {
        const angle = 2 * Math.PI * random();
        const r = room * (0.3 + 0.5 * random());
        return [centre[0] + r * Math.cos(angle), centre[1] + r * Math.sin(angle)] as const;
      });
    }
    const parts = points.slice(1).map((p, i): Segment => [at(points ?? [], i), p]);
    this.innerWalls.push({
      name,
      pieces: parts.map(([from, to]) => this.#piece({ kind: 'line', from, to })),
    });
    // Others may cross it, so it takes no room; but corners end on it.
    this.#corners.push(...points.slice(1, -1));
  }

  #wallToWall(): Point[] | undefined {
    for (let tries = 0; tries < 20; tries++) {
      const p = at(this.#corners, Math.floor(this.#random() * this.#corners.length));
      const q = at(this.#corners, Math.floor(this.#random() * this.#corners.length));
      const length = distance(p, q);
      if (length < 0.02 || !this.#inside(between(p, q, 0.5))) continue;
      const free = this.#taken.every((o) => {
        if (touches(o, p) && touches(o, q)) return false;
        if (touches(o, p) || touches(o, q)) return !crossing(o, [between(p, q, 1e-3), between(p, q, 0.999)]);
        return gap(o, [p, q]) > 0.03 * length;
      });
      const ends = this.innerWalls.flatMap((wall) =>
        wall.pieces.flatMap(({ curve }) => [curve.from, curve.to]),
      );
      if (free && !(ends.includes(p) && ends.includes(q))) return [p, q];
    }
    return undefined;
  }

  addRegion(index: number): void {
    const random = this.#random;
    const centre: Point = [random(), random()];
    const radius = 0.1 + 0.5 * random();
    const name = `region ${index + 1}`;
    if (random() < 0.4) {
      const from: Point = [centre[0] + radius, centre[1]];
      const curve: Curve = {
        kind: 'arc',
        from,
        to: from,
        centre,
        radii: [radius, radius],
        turned: 0,
        start: 0,
        sweep: 2 * Math.PI,
      };
      this.regions.push({ name, pieces: [this.#piece(curve)] });
      return;
    }
    const loop = polar(centre, radius, 3 + Math.floor(4 * random()), random, 0.3);
    this.regions.push({
      name,
      pieces: ring(loop).map(([from, to]) => this.#piece({ kind: 'line', from, to })),
    });
  }
}

/** An arc from p to q whose height over the chord is `bulge` times its length, to the left when positive. */
function arcOver(from: Point, to: Point, bulge: number): Curve {
  const half = distance(from, to) / 2;
  const height = 2 * half * bulge;
  const radius = (half * half + height * height) / (2 * Math.abs(height));
  const up: Point = [-(to[1] - from[1]) / (2 * half), (to[0] - from[0]) / (2 * half)];
  const offset = height - Math.sign(height) * radius;
  const middle = between(from, to, 0.5);
  const centre: Point = [middle[0] + offset * up[0], middle[1] + offset * up[1]];
  const start = Math.atan2(from[1] - centre[1], from[0] - centre[0]);
  const sweep = -Math.sign(height) * 4 * Math.atan(Math.abs(height) / half);
  return { kind: 'arc', from, to, centre, radii: [radius, radius], turned: 0, start, sweep };
}

function bezierOver(from: Point, to: Point, bulge: number, random: () => number): Curve {
  const up: Point = [-(to[1] - from[1]) * bulge, (to[0] - from[0]) * bulge];
  const c = (share: number, lift: number): Point => {
    const p = between(from, to, share);
    return [p[0] + lift * up[0], p[1] + lift * up[1]];
  };
  return { kind: 'cubic', from, to, controls: [c(0.3, 2 * random() - 0.5), c(0.7, 2 * random() - 0.5)] };
}

function polar(centre: Point, radius: number, n: number, random: () => number, rough: number): Point[] {
  const turn = 2 * Math.PI * random();
  const points = Array.from({ length: n }, (_, i): Point => {
    const angle = turn + ((i + (rough > 0 ? 0.4 * random() : 0)) * 2 * Math.PI) / n;
    const r = radius * (1 - rough * random());
    return [centre[0] + r * Math.cos(angle), centre[1] + r * Math.sin(angle)];
  });
  return random() < 0.5 ? points : points.reverse();
}

function ring(points: readonly Point[]): Segment[] {
  return points.map((p, i) => [p, at(points, i + 1)]);
}

function touches([a, b]: Segment, p: Point): boolean {
  return a === p || b === p;
}
