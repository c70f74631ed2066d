import type { Domain, Point } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import type { Coefficient, Medium, NoiseConvention, Wall } from '../problem/problem.ts';
import { ChordTree } from './chord-tree.ts';
import { Loops, polygonArea } from './loops.ts';
import { borderPieces, isInside } from './region-borders.ts';
import { RimTree } from './rim-tree.ts';
import { chordBits, hidingCorners, polygonOf, relativeSag, wallChords } from './walk-chords.ts';
import {
  alphaOf,
  noStretch,
  type Stretch,
  sameMedium,
  stretchOf,
  type WalkMedium,
  walkMedium,
} from './walk-media.ts';

/** The physics for walkers; as {@link Problem}, but its media by sets of regions, because walkers have no mesh. */
export interface WalkProblem {
  readonly noise: NoiseConvention;
  /** The medium where exactly these regions (indices, ascending) lie over one another. */
  readonly medium: (regionSet: readonly number[]) => Medium;
  readonly walls: ReadonlyMap<number, Wall>;
  readonly exitCount: number;
  readonly depth?: Coefficient;
}

/** What walkers see of a compartment: chords, corners, media. Places are in walking coordinates x′ = S⁻¹x. */
export interface WalkGeometry {
  readonly tree: ChordTree;
  readonly rims: RimTree;
  /** Per chord. */
  readonly twoSided: Uint8Array;
  /** κ or P of a wall per unit of D, scaled to walking coordinates. */
  readonly coefficient: Float64Array;
  readonly exit: Int32Array;
  /** Masks of the regions left and right of a border; 0 for walls. */
  readonly sides: Float64Array;
  /** Length of the straight run of border that a chord is part of; 0 for walls. */
  readonly straightRun: Float64Array;
  readonly stretch: Stretch;
  readonly alpha: number;
  /** √area in walking coordinates. */
  readonly size: number;
  /** Length of the shortest wall piece with a kind of its own, in walking coordinates. */
  readonly shortestWall: number;
  readonly exitCount: number;
  /** True when every step can go to the rim of what a walker sees: one plain medium, absorbing and reflecting walls. */
  readonly plain: boolean;
  readonly hasBorders: boolean;
  /** The medium under a mask of regions. */
  readonly mediumOf: (mask: number) => WalkMedium;
  readonly maskAt: (x: number, y: number) => number;
  readonly inside: (x: number, y: number) => boolean;
  readonly inRegion: (region: number, x: number, y: number) => boolean;
  /** Smallest and largest x and y. */
  readonly box: readonly [number, number, number, number];
}

/** Most regions that walkers tell apart: as many as a number has bits. */
const mostRegions = 52;

/**
 * Geometry and coefficients of a compartment as walkers use them: the drawing's own curves as fine chords; nothing of a
 * mesh.
 *
 * @throws {SolverError} WALK_NOT_AVAILABLE for what walkers have no step for
 */
export function walkGeometry(domain: Domain, problem: WalkProblem): WalkGeometry {
  const rough = Math.sqrt(Math.abs(polygonArea(polygonOf(domain.outline, Number.POSITIVE_INFINITY))));
  const sag = relativeSag * rough;
  const loops = [domain.outline, ...domain.holes].map((chain) => polygonOf(chain, sag));
  const area = loops.reduce((sum, corners) => sum + polygonArea(corners), 0);
  const walls = wallChords(domain, problem.walls, sag);
  const regionCorners = domain.regions.map((chain) => polygonOf(chain, sag));
  if (regionCorners.length > mostRegions) {
    throw notAvailable(`more than ${mostRegions} regions`, 'Leave out regions that nothing refers to.');
  }
  const regions = new Loops(regionCorners);
  const compartment = new Loops(loops);
  const pieces = borderPieces(regionCorners, regions, compartment, Float64Array.from(walls.ends), 2 * sag);
  const media = mediaByMask(problem);
  const masks = new Set<number>([regions.mask(...someInside(compartment, walls.ends, sag))]);
  for (const { left, right } of pieces)
    for (const side of [left, right]) if (side !== undefined) masks.add(side);
  const stretch = stretchOf([...masks].map(media));
  if (!stretch) {
    throw notAvailable(
      'a diffusion tensor that varies from place to place',
      'Take one tensor for the whole compartment to have the check.',
    );
  }
  const dividing = pieces.filter(
    ({ left, right, onWall }) =>
      !onWall && left !== undefined && right !== undefined && !sameMedium(media(left), media(right)),
  );
  return assembled({ loops, regionCorners, area, walls, dividing, media, masks, stretch }, problem);
}

interface Parts {
  readonly loops: readonly (readonly Point[])[];
  readonly regionCorners: readonly (readonly Point[])[];
  readonly area: number;
  readonly walls: ReturnType<typeof wallChords>;
  readonly dividing: ReturnType<typeof borderPieces>;
  readonly media: (mask: number) => Medium;
  readonly masks: ReadonlySet<number>;
  readonly stretch: Stretch;
}

function assembled(parts: Parts, problem: WalkProblem): WalkGeometry {
  const { walls, dividing, stretch, media } = parts;
  const wallCount = walls.bits.length;
  const n = wallCount + dividing.length;
  const plainEnds = Float64Array.from([
    ...walls.ends,
    ...dividing.flatMap(({ from, to }) => [...from, ...to]),
  ]);
  const ends = new Float64Array(4 * n);
  for (let i = 0; i < 4 * n; i += 2) {
    const [x, y] = toWalking(stretch, plainEnds[i], plainEnds[i + 1]);
    ends[i] = x;
    ends[i + 1] = y;
  }
  const bits = new Uint8Array(n).fill(chordBits.border);
  bits.set(walls.bits);
  const twoSided = new Uint8Array(n);
  const coefficient = new Float64Array(n);
  const exit = new Int32Array(n).fill(-1);
  const sides = new Float64Array(2 * n);
  for (let i = 0; i < wallCount; i++) {
    twoSided[i] = walls.twoSided[i] ? 1 : 0;
    exit[i] = walls.exit[i];
    coefficient[i] = walls.coefficient[i] / normalStretch(stretch, plainEnds, i);
  }
  dividing.forEach(({ left, right }, b) => {
    sides[2 * (wallCount + b)] = left ?? 0;
    sides[2 * (wallCount + b) + 1] = right ?? 0;
  });
  const det = stretch[0] * stretch[2] - stretch[1] * stretch[1];
  const size = Math.sqrt(parts.area / det);
  const setting = { noise: problem.noise, stretch, size, ...(problem.depth && { depth: problem.depth }) };
  const compiled = new Map<number, WalkMedium>();
  const mediumOf = (mask: number): WalkMedium => {
    const known = compiled.get(mask);
    if (known) return known;
    const made = walkMedium(media(mask), setting);
    compiled.set(mask, made);
    return made;
  };
  const walking = (corners: readonly (readonly Point[])[]): Loops =>
    new Loops(corners.map((loop) => loop.map(([x, y]) => toWalking(stretch, x, y))));
  const compartment = walking(parts.loops);
  const regions = walking(parts.regionCorners);
  const special = chordBits.partlyAbsorbing | chordBits.permeable | chordBits.border;
  const plain =
    bits.every((bit) => (bit & special) === 0) && [...parts.masks].every((mask) => mediumOf(mask).plain);
  return {
    tree: new ChordTree(ends, bits),
    rims: new RimTree(hidingCorners(ends, bits, twoSided)),
    twoSided,
    coefficient,
    exit,
    sides,
    straightRun: straightRuns(ends, wallCount),
    stretch,
    alpha: alphaOf(problem.noise, stretch),
    size,
    shortestWall: shortestWall(walls) / Math.max(1, stretch[0] + stretch[2]),
    exitCount: problem.exitCount,
    plain,
    hasBorders: dividing.length > 0,
    mediumOf,
    maskAt: (x, y) => regions.mask(x, y),
    inside: (x, y) => isInside(compartment, x, y),
    inRegion: (region, x, y) => regions.holds(region, x, y),
    box: compartment.box(),
  };
}

/** Joins border chords that follow one another on one line; per chord the length of its whole run. */
function straightRuns(ends: Float64Array, wallCount: number): Float64Array {
  const n = ends.length / 4;
  const run = new Float64Array(n);
  let from = wallCount;
  let length = 0;
  for (let i = wallCount; i < n; i++) {
    const a = 4 * i;
    length += Math.hypot(ends[a + 2] - ends[a], ends[a + 3] - ends[a + 1]);
    const ux = ends[a + 2] - ends[a];
    const uy = ends[a + 3] - ends[a + 1];
    const vx = ends[a + 6] - ends[a + 4];
    const vy = ends[a + 7] - ends[a + 5];
    const goesOn =
      i + 1 < n &&
      ends[a + 4] === ends[a + 2] &&
      ends[a + 5] === ends[a + 3] &&
      Math.abs(ux * vy - uy * vx) <= 1e-9 * Math.hypot(ux, uy) * Math.hypot(vx, vy);
    if (goesOn) continue;
    run.fill(length, from, i + 1);
    from = i + 1;
    length = 0;
  }
  return run;
}

/** x′ = S⁻¹x. */
export function toWalking(stretch: Stretch, x: number, y: number): [number, number] {
  if (stretch === noStretch) return [x, y];
  const det = stretch[0] * stretch[2] - stretch[1] * stretch[1];
  return [(stretch[2] * x - stretch[1] * y) / det, (stretch[0] * y - stretch[1] * x) / det];
}

/** |Sn| of chord `i` with normal n: n·D∇u = |Sn| n′·∇′u. */
function normalStretch(stretch: Stretch, ends: Float64Array, i: number): number {
  if (stretch === noStretch) return 1;
  const ux = ends[4 * i + 2] - ends[4 * i];
  const uy = ends[4 * i + 3] - ends[4 * i + 1];
  const length = Math.hypot(ux, uy);
  return Math.hypot(stretch[0] * -uy + stretch[1] * ux, stretch[1] * -uy + stretch[2] * ux) / length;
}

function mediaByMask(problem: WalkProblem): (mask: number) => Medium {
  const known = new Map<number, Medium>();
  return (mask) => {
    const found = known.get(mask);
    if (found) return found;
    const set: number[] = [];
    for (let k = 0, rest = mask; rest > 0; k++, rest = Math.floor(rest / 2)) if (rest % 2 === 1) set.push(k);
    const medium = problem.medium(set);
    known.set(mask, medium);
    return medium;
  };
}

/** A place just inside the first chord of the outline. */
function someInside(compartment: Loops, ends: readonly number[], sag: number): [number, number] {
  const ux = ends[2] - ends[0];
  const uy = ends[3] - ends[1];
  const length = Math.hypot(ux, uy);
  for (let aside = Math.min(length / 4, 8 * sag); aside > 0; aside /= 2) {
    const x = (ends[0] + ends[2]) / 2 - (aside * uy) / length;
    const y = (ends[1] + ends[3]) / 2 + (aside * ux) / length;
    if (isInside(compartment, x, y)) return [x, y];
  }
  return [ends[0], ends[1]];
}

/** Length of the shortest run of one kind of wall on a loop that has several, by chords. */
function shortestWall({ bits, exit, ends }: ReturnType<typeof wallChords>): number {
  let least = Number.POSITIVE_INFINITY;
  let run = 0;
  for (let i = 0; i < bits.length; i++) {
    run += Math.hypot(ends[4 * i + 2] - ends[4 * i], ends[4 * i + 3] - ends[4 * i + 1]);
    const joined =
      i + 1 < bits.length && ends[4 * i + 4] === ends[4 * i + 2] && ends[4 * i + 5] === ends[4 * i + 3];
    if (joined && bits[i + 1] === bits[i] && exit[i + 1] === exit[i]) continue;
    if (joined) least = Math.min(least, run);
    run = 0;
  }
  return least;
}

function notAvailable(what: string, remedy: string): SolverError {
  return new SolverError(
    'WALK_NOT_AVAILABLE',
    `The check by trajectories does not do ${what} yet`,
    {},
    remedy,
  );
}
