import {
  areApart,
  crossingOfCurves,
  hull,
  tangentFrom,
  touchOfCurves,
  towards,
  turnBetween,
} from './curve-pairs.ts';
import { nearestParameter, partOf, pointAt } from './curves.ts';
import type { Healing, Point } from './domain.ts';
import type { PointIndex } from './point-index.ts';
import { orient } from './predicates.ts';
import type { Chord, Strand } from './strands.ts';

/** What two chords do to each other: touch, cross, or stand too near to tell their curves apart. */

/** A place where two lines of the drawing cross that may not. */
export interface Crossing {
  readonly at: Point;
  readonly a: Strand;
  readonly b: Strand;
}

export interface Cut {
  readonly t: number;
  readonly vertex: number;
}

/** What the pair tests of one round share and write to. */
export interface Round {
  readonly points: PointIndex;
  readonly tolerance: number;
  readonly cuts: Map<Chord, Cut[]>;
  readonly crossings: Map<string, Crossing>;
  readonly healed: Healing[];
}

/** Notes in `round` the cuts that a pair of chords makes necessary, or the crossing that is an error. */
export function comparePair(p: Chord, q: Chord, round: Round): void {
  const shared = p.a === q.a || p.a === q.b ? p.a : p.b === q.a || p.b === q.b ? p.b : -1;
  if (shared >= 0 && p.a !== p.b && (p.a === q.a || p.a === q.b) && (p.b === q.a || p.b === q.b)) return;
  let touches = false;
  for (const v of [q.a, q.b]) touches = contact(p, v, q, round) || touches;
  for (const v of [p.a, p.b]) touches = contact(q, v, p, round) || touches;
  if (touches) return;
  const curved = p.sag > 0.25 * round.tolerance || q.sag > 0.25 * round.tolerance;
  if (shared >= 0) {
    if (curved) openCorner(p, q, shared, round);
  } else if (!cross(p, q, curved, round) && curved) {
    keepApart(p, q, round);
  }
}

function noteContact(p: Chord, q: Chord, at: Point, round: Round): void {
  if (p.strand.role !== 'wall' || q.strand.role !== 'wall') return;
  if (round.healed.some((h) => h.what === 'contact' && h.at[0] === at[0] && h.at[1] === at[1])) return;
  round.healed.push({ what: 'contact', loop: p.strand.name, at });
}

function cut(chord: Chord, t: number, vertex: number, round: Round): void {
  if (vertex === chord.a || vertex === chord.b) return;
  const list = round.cuts.get(chord);
  if (!list) round.cuts.set(chord, [{ t, vertex }]);
  else if (!list.some((c) => c.vertex === vertex)) list.push({ t, vertex });
}

/** Cuts `chord` at point `v` (an end of `other`) if that lies on it, within the tolerance. */
function contact(chord: Chord, v: number, other: Chord, round: Round): boolean {
  if (v === chord.a || v === chord.b) return false;
  const { points, tolerance } = round;
  const p = points.at(v);
  const a = points.at(chord.a);
  const b = points.at(chord.b);
  const near = toSegment(p, a, b);
  let t = chord.t0 + near.s * (chord.t1 - chord.t0);
  if (chord.sag <= 0.25 * tolerance) {
    const on = near.s > 0 && near.s < 1 && orient(a[0], a[1], b[0], b[1], p[0], p[1]) === 0;
    if (near.distance > tolerance && !on) return false;
  } else {
    if (near.distance > 1.01 * chord.sag + tolerance) return false;
    const close = nearestParameter(partOf(chord.strand.curve, chord.t0, chord.t1), p);
    if (close.distance > tolerance) return false;
    t = chord.t0 + close.t * (chord.t1 - chord.t0);
  }
  cut(chord, t, v, round);
  noteContact(chord, other, p, round);
  return true;
}

/**
 * Cuts two chords where their curves cross, if they may, and lists the crossing if they may not.
 *
 * @returns false when the chords do not cross, or cross though no crossing of the curves is found near it
 */
function cross(p: Chord, q: Chord, curved: boolean, round: Round): boolean {
  const { points } = round;
  const [pa, pb, qa, qb] = [points.at(p.a), points.at(p.b), points.at(q.a), points.at(q.b)];
  if (!crosses(pa, pb, qa, qb)) return false;
  const d = (pb[0] - pa[0]) * (qb[1] - qa[1]) - (pb[1] - pa[1]) * (qb[0] - qa[0]);
  let t = ((qa[0] - pa[0]) * (qb[1] - qa[1]) - (qa[1] - pa[1]) * (qb[0] - qa[0])) / d;
  let u = ((qa[0] - pa[0]) * (pb[1] - pa[1]) - (qa[1] - pa[1]) * (pb[0] - pa[0])) / d;
  let at: Point = [pa[0] + t * (pb[0] - pa[0]), pa[1] + t * (pb[1] - pa[1])];
  t = p.t0 + t * (p.t1 - p.t0);
  u = q.t0 + u * (q.t1 - q.t0);
  if (curved) {
    const found = crossingOfCurves(p, q, t, u);
    if (!found) return false;
    ({ t, u, at } = found);
  }
  const roles = [p.strand.role, q.strand.role];
  const innerOnly = p.strand.role === 'innerWall' && q.strand.role === 'innerWall';
  if (!roles.includes('region') && !innerOnly) {
    round.crossings.set(`${at[0]} ${at[1]}`, { at, a: p.strand, b: q.strand });
    return true;
  }
  const vertex = points.add(at);
  if (innerOnly) {
    const loop = p.strand.name === q.strand.name ? p.strand.name : `${p.strand.name}, ${q.strand.name}`;
    round.healed.push({ what: 'split where inner walls cross', loop, at: points.at(vertex) });
  }
  cut(p, t, vertex, round);
  cut(q, u, vertex, round);
  return true;
}

/** Halves the chord with the larger sag where the places that the curves may take up overlap. */
function keepApart(p: Chord, q: Chord, round: Round): void {
  if (areApart(hull(p, round.points), hull(q, round.points))) return;
  const touch = touchOfCurves(p, q, round.tolerance);
  if (!touch) {
    halve(p.sag >= q.sag ? p : q, round);
    return;
  }
  const vertex = round.points.add(touch.at);
  cut(p, touch.t, vertex, round);
  cut(q, touch.u, vertex, round);
  noteContact(p, q, touch.at, round);
}

function halve(chord: Chord, round: Round): void {
  if (chord.sag <= 0.25 * round.tolerance || chord.t1 - chord.t0 < 1e-9) return;
  const t = (chord.t0 + chord.t1) / 2;
  cut(chord, t, round.points.add(pointAt(chord.strand.curve, t)), round);
}

/**
 * Halves chords that meet in point `v` until each curve stays on its own side near it.
 *
 * Between chord and tangent lies the curve; where both curves bend into the angle between the chords, that angle has
 * to be larger than what they take of it. Curves that touch in `v` keep the ratio of the two for ever; of those the
 * longer one is cut as far from `v` as the shorter one ends, if that end stands within its reach.
 */
function openCorner(p: Chord, q: Chord, v: number, round: Round): void {
  const { points } = round;
  const at = points.at(v);
  const chordP = towards(at, points.at(p.a === v ? p.b : p.a));
  const chordQ = towards(at, points.at(q.a === v ? q.b : q.a));
  const tangentP = tangentFrom(p, v);
  const tangentQ = tangentFrom(q, v);
  const opening = turnBetween(chordP, chordQ);
  const sign = opening < 0 ? -1 : 1;
  const bendP = Math.max(0, sign * turnBetween(chordP, tangentP));
  const bendQ = Math.max(0, -sign * turnBetween(chordQ, tangentQ));
  if (Math.abs(turnBetween(tangentP, tangentQ)) > 1e-5) {
    if (bendP + bendQ > 0.9 * Math.abs(opening)) halve(bendP >= bendQ ? p : q, round);
    return;
  }
  const lengthP = Math.hypot(...chordP);
  const lengthQ = Math.hypot(...chordQ);
  if (Math.max(lengthP, lengthQ) < 1.2 * Math.min(lengthP, lengthQ)) return;
  const [long, short] = lengthP > lengthQ ? [p, q] : [q, p];
  const end = points.at(short.a === v ? short.b : short.a);
  if (toSegment(end, points.at(long.a), points.at(long.b)).distance > 2 * long.sag) return;
  const t = parameterAtDistance(long, v, at, Math.min(lengthP, lengthQ));
  cut(long, t, points.add(pointAt(long.strand.curve, t)), round);
}

/** Parameter on the chord's curve at straight distance `radius` from its end `v`, by bisection. */
function parameterAtDistance(chord: Chord, v: number, at: Point, radius: number): number {
  let near = chord.a === v ? chord.t0 : chord.t1;
  let far = chord.a === v ? chord.t1 : chord.t0;
  for (let i = 0; i < 52; i++) {
    const t = (near + far) / 2;
    const p = pointAt(chord.strand.curve, t);
    if (Math.hypot(p[0] - at[0], p[1] - at[1]) < radius) near = t;
    else far = t;
  }
  return (near + far) / 2;
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
