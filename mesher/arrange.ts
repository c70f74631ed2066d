import Flatbush from 'flatbush';
import { nearestParameter, partOf, pointAt } from './curves.ts';
import type { Domain, Healing, Point } from './domain.ts';
import type { PointIndex } from './point-index.ts';
import { orient } from './predicates.ts';
import { type Chord, makeChord, makeChords, type Strand } from './strands.ts';

/** A place where two lines of the drawing cross that may not. */
export interface Crossing {
  readonly at: Point;
  readonly a: Strand;
  readonly b: Strand;
}

/** The drawing cut so that its chords meet only in their ends, but for the wall crossings listed. */
export interface Arrangement {
  readonly chords: readonly Chord[];
  readonly points: PointIndex;
  readonly crossings: readonly Crossing[];
  readonly healed: readonly Healing[];
}

interface Cut {
  readonly t: number;
  readonly vertex: number;
}

/** What the pair tests of one round share and write to. */
interface Round {
  readonly points: PointIndex;
  readonly tolerance: number;
  readonly cuts: Map<Chord, Cut[]>;
  readonly crossings: Map<string, Crossing>;
  readonly healed: Healing[];
}

/**
 * Cuts all lines where they meet, and curves where their chords come near other lines, until nothing changes.
 *
 * Contacts within the tolerance become common points. Lines that may cross (inner walls, region borders) are cut
 * there; crossings of outline and holes are listed. Near-linear: only chords whose boxes overlap are compared, and
 * after the first round only those with a new one.
 */
export function arrange(domain: Domain): Arrangement {
  const start = makeChords(domain);
  const points = start.points;
  let chords: readonly Chord[] = start.chords;
  let fresh = new Set(chords);
  const crossings = new Map<string, Crossing>();
  const healed: Healing[] = [];
  for (let round = 0; round < 100 && fresh.size > 0; round++) {
    const state: Round = { points, tolerance: domain.tolerance, cuts: new Map(), crossings, healed };
    comparePairs(chords, fresh, state);
    fresh = new Set();
    chords = applyCuts(chords, state.cuts, fresh);
  }
  return { chords, points, crossings: [...crossings.values()], healed };
}

function comparePairs(chords: readonly Chord[], fresh: ReadonlySet<Chord>, round: Round): void {
  const { xy } = round.points;
  const index = new Flatbush(Math.max(1, chords.length));
  const box = (c: Chord): [number, number, number, number] => {
    const pad = 3 * c.sag + round.tolerance;
    const ax = xy[2 * c.a];
    const ay = xy[2 * c.a + 1];
    const bx = xy[2 * c.b];
    const by = xy[2 * c.b + 1];
    return [Math.min(ax, bx) - pad, Math.min(ay, by) - pad, Math.max(ax, bx) + pad, Math.max(ay, by) + pad];
  };
  for (const c of chords) index.add(...box(c));
  index.finish();
  chords.forEach((c, i) => {
    if (!fresh.has(c)) return;
    for (const j of index.search(...box(c))) {
      if (j !== i && (j > i || !fresh.has(chords[j]))) comparePair(c, chords[j], round);
    }
  });
}

function applyCuts(chords: readonly Chord[], cuts: Map<Chord, Cut[]>, fresh: Set<Chord>): readonly Chord[] {
  if (cuts.size === 0) return chords;
  const out: Chord[] = [];
  for (const chord of chords) {
    let t = chord.t0;
    let a = chord.a;
    const own = [...(cuts.get(chord) ?? [])].sort((p, q) => p.t - q.t);
    for (const cut of [...own, { t: chord.t1, vertex: chord.b }]) {
      if (cut.vertex === a && own.length > 0) continue;
      const whole = own.length === 0;
      const part = whole ? chord : makeChord(chord.strand, t, cut.t, a, cut.vertex);
      if (!whole) fresh.add(part);
      out.push(part);
      t = cut.t;
      a = cut.vertex;
    }
  }
  return out;
}

function cut(chord: Chord, t: number, vertex: number, round: Round): void {
  if (vertex === chord.a || vertex === chord.b) return;
  const list = round.cuts.get(chord);
  if (!list) round.cuts.set(chord, [{ t, vertex }]);
  else if (!list.some((c) => c.vertex === vertex)) list.push({ t, vertex });
}

function comparePair(p: Chord, q: Chord, round: Round): void {
  const shared = p.a === q.a || p.a === q.b || p.b === q.a || p.b === q.b;
  const both = shared && (p.a === q.a || p.a === q.b) && (p.b === q.a || p.b === q.b);
  if (both && p.a !== p.b) return;
  let touches = false;
  for (const v of [q.a, q.b]) touches = contact(p, v, q, round) || touches;
  for (const v of [p.a, p.b]) touches = contact(q, v, p, round) || touches;
  if (touches) return;
  if (p.sag + q.sag > 0.5 * round.tolerance && tooNear(p, q, shared, round)) return;
  if (!shared) cross(p, q, round);
}

/** Cuts `chord` at point `v` (an end of `other`) if that lies on it, within the tolerance. */
function contact(chord: Chord, v: number, other: Chord, round: Round): boolean {
  if (v === chord.a || v === chord.b) return false;
  const { points, tolerance } = round;
  const p = points.at(v);
  const near = toSegment(p, points.at(chord.a), points.at(chord.b));
  let t = chord.t0 + near.s * (chord.t1 - chord.t0);
  if (chord.sag <= 0.25 * tolerance) {
    const a = points.at(chord.a);
    const b = points.at(chord.b);
    const on = near.s > 0 && near.s < 1 && orient(a[0], a[1], b[0], b[1], p[0], p[1]) === 0;
    if (near.distance > tolerance && !on) return false;
  } else {
    if (near.distance > 1.01 * chord.sag + tolerance) return false;
    const close = nearestParameter(partOf(chord.strand.curve, chord.t0, chord.t1), p);
    if (close.distance > tolerance) return false;
    t = chord.t0 + close.t * (chord.t1 - chord.t0);
  }
  cut(chord, t, v, round);
  const walls = chord.strand.role !== 'region' && other.strand.role !== 'region';
  if (walls && other.strand.role === 'wall' && chord.strand.role === 'wall') {
    if (!round.healed.some((h) => h.what === 'contact' && h.at[0] === p[0] && h.at[1] === p[1])) {
      round.healed.push({ what: 'contact', loop: chord.strand.name, at: p });
    }
  }
  return true;
}

/** Halves the chord with the larger sag where it stands too near the other to tell their curves apart. */
function tooNear(p: Chord, q: Chord, shared: boolean, round: Round): boolean {
  const { points, tolerance } = round;
  const [pa, pb, qa, qb] = [points.at(p.a), points.at(p.b), points.at(q.a), points.at(q.b)];
  let coarse = p.sag >= q.sag ? p : q;
  if (shared) {
    const lengthP = Math.hypot(pb[0] - pa[0], pb[1] - pa[1]);
    const lengthQ = Math.hypot(qb[0] - qa[0], qb[1] - qa[1]);
    coarse = lengthP > lengthQ ? p : q;
    const fine = coarse === p ? q : p;
    if (Math.max(lengthP, lengthQ) < 1.2 * Math.min(lengthP, lengthQ)) return false;
    const end = fine.a === coarse.a || fine.a === coarse.b ? fine.b : fine.a;
    const gap = toSegment(points.at(end), points.at(coarse.a), points.at(coarse.b)).distance;
    if (gap > 2 * coarse.sag) return false;
  } else {
    const gap = crosses(pa, pb, qa, qb)
      ? 0
      : Math.min(
          toSegment(pa, qa, qb).distance,
          toSegment(pb, qa, qb).distance,
          toSegment(qa, pa, pb).distance,
          toSegment(qb, pa, pb).distance,
        );
    if (gap > 2 * (p.sag + q.sag)) return false;
  }
  if (coarse.sag <= 0.25 * tolerance || coarse.t1 - coarse.t0 < 1e-9) return false;
  const t = (coarse.t0 + coarse.t1) / 2;
  cut(coarse, t, points.add(pointAt(coarse.strand.curve, t)), round);
  return true;
}

function cross(p: Chord, q: Chord, round: Round): void {
  const { points } = round;
  const [pa, pb, qa, qb] = [points.at(p.a), points.at(p.b), points.at(q.a), points.at(q.b)];
  if (!crosses(pa, pb, qa, qb)) return;
  const d = (pb[0] - pa[0]) * (qb[1] - qa[1]) - (pb[1] - pa[1]) * (qb[0] - qa[0]);
  const s = ((qa[0] - pa[0]) * (qb[1] - qa[1]) - (qa[1] - pa[1]) * (qb[0] - qa[0])) / d;
  const u = ((qa[0] - pa[0]) * (pb[1] - pa[1]) - (qa[1] - pa[1]) * (pb[0] - pa[0])) / d;
  const at: Point = [pa[0] + s * (pb[0] - pa[0]), pa[1] + s * (pb[1] - pa[1])];
  const roles = [p.strand.role, q.strand.role];
  const regionIn = roles.includes('region');
  const innerOnly = p.strand.role === 'innerWall' && q.strand.role === 'innerWall';
  if (!regionIn && !innerOnly) {
    round.crossings.set(`${at[0]} ${at[1]}`, { at, a: p.strand, b: q.strand });
    return;
  }
  const vertex = points.add(at);
  if (innerOnly) {
    const loop = p.strand.name === q.strand.name ? p.strand.name : `${p.strand.name}, ${q.strand.name}`;
    round.healed.push({ what: 'split where inner walls cross', loop, at: points.at(vertex) });
  }
  cut(p, p.t0 + s * (p.t1 - p.t0), vertex, round);
  cut(q, q.t0 + u * (q.t1 - q.t0), vertex, round);
}

function crosses(pa: Point, pb: Point, qa: Point, qb: Point): boolean {
  const side = (a: Point, b: Point, c: Point): number => orient(a[0], a[1], b[0], b[1], c[0], c[1]);
  const o1 = side(pa, pb, qa);
  const o2 = side(pa, pb, qb);
  if (!((o1 > 0 && o2 < 0) || (o1 < 0 && o2 > 0))) return false;
  const o3 = side(qa, qb, pa);
  const o4 = side(qa, qb, pb);
  return (o3 > 0 && o4 < 0) || (o3 < 0 && o4 > 0);
}

/** Distance of `p` from the segment a–b and the place 0..1 nearest to it. */
function toSegment(p: Point, a: Point, b: Point): { distance: number; s: number } {
  const dx = b[0] - a[0];
  const dy = b[1] - a[1];
  const square = dx * dx + dy * dy;
  const along = (p[0] - a[0]) * dx + (p[1] - a[1]) * dy;
  const s = square > 0 ? Math.min(1, Math.max(0, along / square)) : 0;
  return { distance: Math.hypot(p[0] - a[0] - s * dx, p[1] - a[1] - s * dy), s };
}
