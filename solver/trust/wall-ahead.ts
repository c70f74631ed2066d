import type { ChordTree } from './chord-tree.ts';
import { chordBits, wallBits } from './walk-chords.ts';
import type { Walker, WalkStage } from './walker.ts';

/** The wall that a step in time has to do with, and how long the step may be. */
export interface WallAhead {
  /** Chord, −1 when no wall is within reach. */
  index: number;
  distance: number;
  /** Unit normal from the wall to the walker. */
  normalX: number;
  normalY: number;
  /** Standard deviation of the step per axis. */
  length: number;
  /** True once the walker went through it. */
  crossed: boolean;
}

/** A step reaches no farther than this many of its standard deviations (normals are cut at 5, drift adds up to ½). */
export const stepReach = 6;
/** A wall counts as straight as long as it stays within this slope of its tangent. */
const straightSlope = 0.15;
/** Standard deviations of a coarse step that the second nearest wall is away: the nearest alone has a say in most. */
const secondWall = 3;

/** Filled anew by every call: one walker at a time. */
const ahead: WallAhead = { index: -1, distance: 0, normalX: 0, normalY: 0, length: 0, crossed: false };

/**
 * Looks for the nearest wall and for how far it is straight and alone, and chooses the length of the step by both.
 * Leaves the chords within reach collected in the tree.
 *
 * @param longest length that the step may have without walls
 */
export function wallAhead(stage: WalkStage, x: number, y: number, longest: number): WallAhead {
  const { geometry, lengths } = stage;
  const { tree } = geometry;
  const reach = stepReach * longest;
  tree.nearest(x, y, wallBits, reach);
  ahead.index = tree.index;
  ahead.crossed = false;
  ahead.length = longest;
  if (tree.index < 0) {
    tree.found = 0;
    return ahead;
  }
  tree.collect(x, y, wallBits, reach);
  normalTo(stage, x, y);
  const alone = (lengths.scale * straightAndAlone(stage, x, y, reach)) / secondWall;
  ahead.length = Math.max(lengths.least, Math.min(longest, alone));
  return ahead;
}

/** Normal and distance of the nearest wall, from its line, or from its corner where that is nearer. */
function normalTo(stage: WalkStage, x: number, y: number): void {
  const { tree, twoSided } = stage.geometry;
  const { ends, index, footX, footY, distance } = tree;
  const e = 4 * index;
  const ux = ends[e + 2] - ends[e];
  const uy = ends[e + 3] - ends[e + 1];
  const length = Math.sqrt(ux * ux + uy * uy);
  const left = (ux * (y - ends[e + 1]) - uy * (x - ends[e])) / length;
  const along = Math.abs((x - footX) * ux + (y - footY) * uy) / length;
  if (along > 1e-6 * distance && distance > stage.aside) {
    ahead.normalX = (x - footX) / distance;
    ahead.normalY = (y - footY) / distance;
    ahead.distance = distance;
    return;
  }
  const side = twoSided[index] === 1 && left < 0 ? -1 : 1;
  ahead.normalX = (-side * uy) / length;
  ahead.normalY = (side * ux) / length;
  ahead.distance = Math.max(0, side * left);
}

/** Distance of the nearest chord that is not, to within a slope, the continuation of the wall ahead. */
function straightAndAlone(stage: WalkStage, x: number, y: number, reach: number): number {
  const { tree, exit, coefficient } = stage.geometry;
  const { ends, bits, found, foundIndex, foundDistance, foundFoot } = tree;
  const { index, normalX, normalY, distance } = ahead;
  let least = reach;
  for (let f = 0; f < found; f++) {
    const i = foundIndex[f];
    if (i === index || foundDistance[f] >= least) continue;
    const same = bits[i] === bits[index] && exit[i] === exit[index] && coefficient[i] === coefficient[index];
    if (same) {
      const e = 4 * i;
      const ux = ends[e + 2] - ends[e];
      const uy = ends[e + 3] - ends[e + 1];
      const rise = Math.abs(ux * normalX + uy * normalY);
      const beside = distance + (foundFoot[2 * f] - x) * normalX + (foundFoot[2 * f + 1] - y) * normalY;
      if (
        rise * rise <= straightSlope * straightSlope * (ux * ux + uy * uy) &&
        Math.abs(beside) <= straightSlope * foundDistance[f]
      )
        continue;
    }
    least = foundDistance[f];
  }
  return least;
}

/** Nearest point of one chord, into the tree's foot. */
export function nearestFeature(tree: ChordTree, chord: number, x: number, y: number): void {
  const { ends } = tree;
  const e = 4 * chord;
  const ux = ends[e + 2] - ends[e];
  const uy = ends[e + 3] - ends[e + 1];
  const along = ((x - ends[e]) * ux + (y - ends[e + 1]) * uy) / (ux * ux + uy * uy);
  const t = along > 0 ? Math.min(along, 1) : 0;
  tree.footX = ends[e] + t * ux;
  tree.footY = ends[e + 1] + t * uy;
}

/**
 * The first collected wall that the straight way leads through, −1 for none. An outer wall is met from inside only, so
 * that a walker that rounding put outside comes back.
 *
 * @param through true when the walker went through a permeable wall: then those are no obstacle
 */
export function crossingWall(
  stage: WalkStage,
  fromX: number,
  fromY: number,
  toX: number,
  toY: number,
  through: boolean,
): number {
  const { tree, twoSided } = stage.geometry;
  const { ends, bits, found, foundIndex } = tree;
  let first = 2;
  let met = -1;
  for (let f = 0; f < found; f++) {
    const i = foundIndex[f];
    if (through && bits[i] === chordBits.permeable) continue;
    const e = 4 * i;
    const ux = ends[e + 2] - ends[e];
    const uy = ends[e + 3] - ends[e + 1];
    const before = ux * (fromY - ends[e + 1]) - uy * (fromX - ends[e]);
    const after = ux * (toY - ends[e + 1]) - uy * (toX - ends[e]);
    const crosses = twoSided[i] === 1 ? before * after < 0 : before >= 0 && after < 0;
    if (!crosses) continue;
    const t = before / (before - after);
    if (t >= first) continue;
    const px = fromX + t * (toX - fromX) - ends[e];
    const py = fromY + t * (toY - fromY) - ends[e + 1];
    const along = (px * ux + py * uy) / (ux * ux + uy * uy);
    if (along < -1e-9 || along > 1 + 1e-9) continue;
    first = t;
    met = i;
  }
  return met;
}

/** Moves a walker that stands on a wall's line a little off it, so that its side stays beyond doubt. */
export function putOffWall(stage: WalkStage, walker: Walker, chord: number): void {
  const { ends } = stage.geometry.tree;
  const e = 4 * chord;
  const ux = ends[e + 2] - ends[e];
  const uy = ends[e + 3] - ends[e + 1];
  const length = Math.sqrt(ux * ux + uy * uy);
  const left = (ux * (walker.y - ends[e + 1]) - uy * (walker.x - ends[e])) / length;
  if (Math.abs(left) >= stage.aside) return;
  const side = left < 0 && stage.geometry.twoSided[chord] === 1 ? -1 : 1;
  const off = (side * stage.aside - left) / length;
  walker.x -= off * uy;
  walker.y += off * ux;
}
