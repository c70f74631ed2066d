import { type Chain, type Curve, type Domain, directionAt, type Point, pointAt } from '../../mesher/index.ts';
import type { Wall } from '../../solver/index.ts';
import { nearestOn, placeAt, rulerOf } from './arc-length.ts';
import { crossings } from './curve-crossings.ts';

interface Kind {
  readonly physics: Wall;
}

/**
 * Bends inside the compartment up to this many degrees over 180 are not junctions: their singular exponent,
 * π ÷ interior angle ≥ 0.9 (Grisvard 1985), costs little, and a circle drawn as a polygon has hundreds of them.
 */
const mildBend = 20;

/**
 * The places where the exit time has no bounded slope, or a share jumps: changes of the kind of wall, corners that
 * stick into the compartment, ends and bends of inner walls, and region borders with a D of their own at walls.
 */
export function junctionsOf(
  domain: Domain,
  pieces: ReadonlyMap<number, Kind>,
  hasOwnMedium: (region: number) => boolean,
): Point[] {
  const found: Point[] = [];
  const loops = [domain.outline, ...domain.holes];
  const walls = [...loops, ...domain.innerWalls];
  for (const loop of loops) {
    alongChain(loop, true, pieces, (turn) => turn < -mildBend, found);
  }
  for (const wall of domain.innerWalls) {
    const others = walls.filter((chain) => chain !== wall);
    const closed = alongChain(wall, false, pieces, (turn) => Math.abs(turn) > mildBend, found);
    if (!closed) found.push(...endsThatCount(wall, others, pieces, domain.tolerance));
  }
  for (const [i, wall] of domain.innerWalls.entries()) {
    for (const other of domain.innerWalls.slice(i + 1))
      found.push(...changesAtCrossings(wall, other, pieces, domain));
  }
  for (const [region, border] of domain.regions.entries()) {
    if (hasOwnMedium(region))
      for (const wall of walls) found.push(...contacts(border, wall, domain.tolerance));
  }
  return distinct(found, domain.tolerance);
}

/** Adds the joints of a chain where the kind changes or the bend counts; says whether the chain is closed. */
function alongChain(
  chain: Chain,
  isLoop: boolean,
  kinds: ReadonlyMap<number, Kind>,
  counts: (turn: number) => boolean,
  found: Point[],
): boolean {
  const { pieces } = chain;
  const first = pieces[0]?.curve.from;
  const last = pieces.at(-1)?.curve.to;
  const closed = isLoop || (first?.[0] === last?.[0] && first?.[1] === last?.[1]);
  for (let i = closed ? 0 : 1; i < pieces.length; i++) {
    const before = pieces[i === 0 ? pieces.length - 1 : i - 1];
    const after = pieces[i];
    if (!before || !after) continue;
    const changes = kindOf(kinds, before.tag) !== kindOf(kinds, after.tag);
    if (changes || counts(turnBetween(before.curve, after.curve))) found.push(after.curve.from);
  }
  return closed;
}

/** What a stretch does, as one text to compare; different exits differ, as shares jump between them. */
function kindOf(kinds: ReadonlyMap<number, Kind>, tag: number): string {
  return JSON.stringify(kinds.get(tag)?.physics ?? null);
}

/** Degrees from the end of one curve to the start of the next, counter-clockwise positive, −180 to 180. */
function turnBetween(before: Curve, after: Curve): number {
  const [ax, ay] = slopeAt(before, 1);
  const [bx, by] = slopeAt(after, 0);
  return (Math.atan2(ax * by - ay * bx, ax * bx + ay * by) * 180) / Math.PI;
}

/** Direction at an end; where the derivative vanishes there (a control point on the end), that of a short chord. */
function slopeAt(curve: Curve, t: 0 | 1): Point {
  const [dx, dy] = directionAt(curve, t);
  const [ax, ay] = pointAt(curve, t === 0 ? 0 : 1 - 1e-4);
  const [bx, by] = pointAt(curve, t === 0 ? 1e-4 : 1);
  const chord: Point = [(bx - ax) * 1e4, (by - ay) * 1e4];
  return Math.hypot(dx, dy) > 1e-3 * Math.hypot(...chord) ? [dx, dy] : chord;
}

/** Free ends of an inner wall, and ends on a wall of another kind. */
function endsThatCount(
  wall: Chain,
  others: readonly Chain[],
  kinds: ReadonlyMap<number, Kind>,
  tolerance: number,
): Point[] {
  const [first, last] = [wall.pieces[0], wall.pieces.at(-1)];
  if (!first || !last) return [];
  const ends = [
    { at: first.curve.from, kind: kindOf(kinds, first.tag) },
    { at: last.curve.to, kind: kindOf(kinds, last.tag) },
  ];
  return ends
    .filter(({ at, kind }) => others.every((chain) => kindTouched(chain, at, kinds, tolerance) !== kind))
    .map(({ at }) => at);
}

/** Kind of the wall that a point lies on, if it lies on the chain. */
function kindTouched(
  chain: Chain,
  at: Point,
  kinds: ReadonlyMap<number, Kind>,
  tolerance: number,
): string | undefined {
  const ruler = rulerOf(chain);
  const { s, distance } = nearestOn(ruler, at);
  if (distance > Math.max(4 * tolerance, 1e-12 * ruler.length)) return undefined;
  return kindOf(kinds, chain.pieces[placeAt(ruler, s).piece]?.tag ?? -1);
}

function changesAtCrossings(
  a: Chain,
  b: Chain,
  kinds: ReadonlyMap<number, Kind>,
  { tolerance }: Domain,
): Point[] {
  return a.pieces.flatMap((one) =>
    b.pieces.flatMap((other) =>
      kindOf(kinds, one.tag) === kindOf(kinds, other.tag) ? [] : crossings(one.curve, other.curve, tolerance),
    ),
  );
}

/** Where a border meets a wall: crossings, and ends of pieces of either that lie on the other. */
function contacts(border: Chain, wall: Chain, tolerance: number): Point[] {
  const found = border.pieces.flatMap(({ curve }) =>
    wall.pieces.flatMap((piece) => crossings(curve, piece.curve, tolerance)),
  );
  const near = Math.max(4 * tolerance, 1e-12 * rulerOf(wall).length);
  for (const { curve } of border.pieces) {
    if (nearestOn(rulerOf(wall), curve.from).distance <= near) found.push(curve.from);
  }
  return found;
}

function distinct(points: readonly Point[], tolerance: number): Point[] {
  const kept: Point[] = [];
  for (const p of points) {
    if (!kept.some((q) => Math.hypot(p[0] - q[0], p[1] - q[1]) <= 4 * tolerance)) kept.push(p);
  }
  return kept;
}
