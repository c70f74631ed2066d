import { chordSag, directionAt, pointAt } from './curves.ts';
import type { Chain, Curve, Domain, Point } from './domain.ts';
import { PointIndex } from './point-index.ts';

export type StrandRole = 'wall' | 'innerWall' | 'region';

/** A piece of the drawing with what is asked of it while lines are compared. */
export interface Strand {
  readonly curve: Curve;
  readonly tag: number;
  readonly role: StrandRole;
  /** Index of the chain among all chains of its role; the outline is wall 0, hole i is wall i + 1. */
  readonly chain: number;
  /** Position of the piece in its chain. */
  readonly place: number;
  readonly name: string;
}

/** The straight line across a strand from parameter t0 to t1, between points a and b. */
export interface Chord {
  readonly strand: Strand;
  readonly t0: number;
  readonly t1: number;
  readonly a: number;
  readonly b: number;
  /** Largest distance of the curve from the chord. */
  readonly sag: number;
}

/** Chords of a tidy domain, in drawing order, short enough to stand for the curves. */
export function makeChords(domain: Domain): { chords: Chord[]; points: PointIndex } {
  const points = new PointIndex(domain.tolerance);
  const chords: Chord[] = [];
  const add = (chain: Chain, role: StrandRole, index: number): void => {
    chain.pieces.forEach(({ curve, tag }, place) => {
      const strand: Strand = { curve, tag, role, chain: index, place, name: chain.name };
      const t = firstCuts(curve);
      const vertices = t.map((at) => points.add(pointAt(curve, at)));
      for (let i = 0; i + 1 < t.length; i++) {
        chords.push(makeChord(strand, t[i], t[i + 1], vertices[i], vertices[i + 1]));
      }
    });
  };
  [domain.outline, ...domain.holes].forEach((chain, i) => {
    add(chain, 'wall', i);
  });
  domain.innerWalls.forEach((chain, i) => {
    add(chain, 'innerWall', i);
  });
  domain.regions.forEach((chain, i) => {
    add(chain, 'region', i);
  });
  return { chords, points };
}

export function makeChord(strand: Strand, t0: number, t1: number, a: number, b: number): Chord {
  return { strand, t0, t1, a, b, sag: chordSag(strand.curve, t0, t1) };
}

/** Largest turning of the curve along one starting chord: 24 chords to a circle. */
const mostTurn = Math.PI / 12;

function firstCuts(curve: Curve): number[] {
  if (curve.kind === 'line') return [0, 1];
  if (curve.kind === 'arc') {
    const [a, b] = curve.radii;
    const flat = Math.sqrt(Math.max(a, b) / Math.min(a, b));
    const count = Math.max(1, Math.ceil((Math.abs(curve.sweep) * flat) / mostTurn - 1e-9));
    return Array.from({ length: count + 1 }, (_, i) => i / count);
  }
  const cuts = [0];
  halve(curve, 0, 1, 0, cuts);
  return cuts;
}

/** At least four chords unless the whole curve is nearly straight: an S-shape can end as it began. */
function halve(curve: Curve, t0: number, t1: number, depth: number, cuts: number[]): void {
  const short = depth >= 2 || (depth === 0 && isStraight(curve));
  if ((short && !bends(curve, t0, t1)) || depth >= 14) {
    cuts.push(t1);
    return;
  }
  const middle = (t0 + t1) / 2;
  halve(curve, t0, middle, depth + 1, cuts);
  halve(curve, middle, t1, depth + 1, cuts);
}

function isStraight(curve: Curve): boolean {
  const length = Math.hypot(curve.to[0] - curve.from[0], curve.to[1] - curve.from[1]);
  return chordSag(curve, 0, 1) < 1e-3 * length && !bends(curve, 0, 1) && !bends(curve, 0, 0.5);
}

function bends(curve: Curve, t0: number, t1: number): boolean {
  const a = pointAt(curve, t0);
  const b = pointAt(curve, t1);
  const length = Math.hypot(b[0] - a[0], b[1] - a[1]);
  const chord: Point = [b[0] - a[0], b[1] - a[1]];
  const turn = turning(chord, directionAt(curve, t0)) + turning(chord, directionAt(curve, t1));
  return length === 0 || turn > mostTurn || chordSag(curve, t0, t1) > 0.1 * length;
}

/** Angle between two directions; 0 where one of them vanishes (a Bézier curve with a doubled control point). */
function turning(a: Point, b: Point): number {
  return Math.abs(Math.atan2(a[0] * b[1] - a[1] * b[0], a[0] * b[0] + a[1] * b[1]));
}
