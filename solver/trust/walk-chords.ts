import { type Chain, type Curve, chordSag, type Domain, type Point, pointAt } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import type { Wall } from '../problem/problem.ts';

/** What a chord is to a walker; one bit each, so that a search can ask for several. */
export const chordBits = {
  absorbing: 1,
  reflecting: 2,
  partlyAbsorbing: 4,
  permeable: 8,
  border: 16,
} as const;

/** Every kind of wall. */
export const wallBits = 15;

/** The walls of a compartment as chords, the compartment on the left of each unless it has it on both sides. */
export interface WallChords {
  /** 4 per chord: x, y of its first and second end. */
  readonly ends: number[];
  readonly bits: number[];
  readonly twoSided: boolean[];
  /** κ or P; 0 where the wall has none. */
  readonly coefficient: number[];
  /** −1 where the wall catches nothing. */
  readonly exit: number[];
}

/** Most that a chord lies beside its curve, as a part of √area. */
export const relativeSag = 2e-5;

/**
 * All walls of a domain as chords.
 *
 * @param sag largest distance between a curve and its chord, in the length unit
 * @throws {SolverError} WALL_NOT_DESCRIBED when a piece's tag has no wall
 */
export function wallChords(domain: Domain, walls: ReadonlyMap<number, Wall>, sag: number): WallChords {
  const chords: WallChords = { ends: [], bits: [], twoSided: [], coefficient: [], exit: [] };
  const add = (chain: Chain, twoSided: boolean): void => {
    for (const { curve, tag } of chain.pieces) {
      const wall = walls.get(tag) ?? notDescribed(tag, curve.from);
      const points = chordPoints(curve, sag);
      for (let i = 0; i + 1 < points.length; i++) {
        if (samePlace(points[i], points[i + 1])) continue;
        chords.ends.push(...points[i], ...points[i + 1]);
        chords.bits.push(chordBits[wall.kind]);
        chords.twoSided.push(twoSided);
        chords.coefficient.push(coefficientOf(wall));
        chords.exit.push('exit' in wall ? wall.exit : -1);
      }
    }
  };
  add(domain.outline, false);
  for (const hole of domain.holes) add(hole, false);
  for (const inner of domain.innerWalls) add(inner, true);
  return chords;
}

/** A closed line as a polygon: its corners in order, the first not repeated. */
export function polygonOf(chain: Chain, sag: number): Point[] {
  return chain.pieces.flatMap(({ curve }) => chordPoints(curve, sag).slice(0, -1));
}

/** Places on a curve from its start to its end, each chord between them within `sag` of it. */
export function chordPoints(curve: Curve, sag: number): Point[] {
  if (curve.kind === 'line') return [curve.from, curve.to];
  const points: Point[] = [curve.from];
  // At least four per curve, so that a chord of a full turn does not come out as nothing.
  for (let i = 0; i < 4; i++) halve(curve, i / 4, (i + 1) / 4, sag, points, 0);
  return points;
}

function halve(curve: Curve, t0: number, t1: number, sag: number, points: Point[], depth: number): void {
  if (depth >= 20 || chordSag(curve, t0, t1) <= sag) {
    points.push(pointAt(curve, t1));
    return;
  }
  const middle = (t0 + t1) / 2;
  halve(curve, t0, middle, sag, points, depth + 1);
  halve(curve, middle, t1, sag, points, depth + 1);
}

function samePlace(a: Point, b: Point): boolean {
  return a[0] === b[0] && a[1] === b[1];
}

function coefficientOf(wall: Wall): number {
  switch (wall.kind) {
    case 'absorbing':
    case 'reflecting':
      return 0;
    case 'partlyAbsorbing':
      return wall.kappa;
    case 'permeable':
      return wall.permeability;
  }
}

function notDescribed(tag: number, at: Point): never {
  throw new SolverError(
    'WALL_NOT_DESCRIBED',
    `Nothing says what the wall with number ${tag} does`,
    { at: [at], tags: [tag] },
    'Make it absorbing, partly absorbing or reflecting.',
  );
}

/**
 * Corners at which reflecting walls may hide something: where they turn away from the compartment, and free ends.
 *
 * @param ends 4 per chord
 * @returns 6 per corner, for the search among rims
 */
export function hidingCorners(ends: Float64Array, bits: Uint8Array, twoSided: Uint8Array): Float64Array {
  const leaving = new Map<string, number[]>();
  const arriving = new Map<string, number[]>();
  const note = (map: Map<string, number[]>, x: number, y: number, chord: number): void => {
    const key = `${x} ${y}`;
    const known = map.get(key);
    if (known) known.push(chord);
    else map.set(key, [chord]);
  };
  for (let i = 0; i < bits.length; i++) {
    if ((bits[i] & wallBits) === 0) continue;
    note(leaving, ends[4 * i], ends[4 * i + 1], i);
    note(arriving, ends[4 * i + 2], ends[4 * i + 3], i);
  }
  const corners: number[] = [];
  for (let i = 0; i < bits.length; i++) {
    if (bits[i] !== chordBits.reflecting) continue;
    const [px, py, vx, vy] = ends.subarray(4 * i, 4 * i + 4);
    const next = (leaving.get(`${vx} ${vy}`) ?? []).find((j) => twoSided[j] === twoSided[i]);
    const meeting = (x: number, y: number): number =>
      (leaving.get(`${x} ${y}`)?.length ?? 0) + (arriving.get(`${x} ${y}`)?.length ?? 0);
    if (next === undefined) {
      if (meeting(vx, vy) === 1) corners.push(vx, vy, vx, vy, px, py);
    } else {
      const qx = ends[4 * next + 2];
      const qy = ends[4 * next + 3];
      const turn = (vx - px) * (qy - vy) - (vy - py) * (qx - vx);
      const away = twoSided[i] === 1 ? turn !== 0 : turn < 0;
      if (away) corners.push(vx, vy, px, py, qx, qy);
    }
    if (meeting(px, py) === 1) corners.push(px, py, px, py, vx, vy);
  }
  return Float64Array.from(corners);
}
