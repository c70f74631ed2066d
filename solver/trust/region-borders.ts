import type { Point } from '../../mesher/index.ts';
import { ChordTree } from './chord-tree.ts';
import type { Loops } from './loops.ts';

/** A piece of a region's line inside the compartment, with the regions on its two sides. */
export interface BorderPiece {
  readonly from: Point;
  readonly to: Point;
  /** Masks of the regions left and right of it; undefined where that side is outside the compartment. */
  readonly left: number | undefined;
  readonly right: number | undefined;
  /** True where it runs along a wall: then it divides nothing. */
  readonly onWall: boolean;
}

/**
 * Region lines cut wherever they meet a wall or another region line, so that each piece has one set of regions on either
 * side of it.
 *
 * @param polygons corners of the region lines
 * @param compartment outline and holes: a place is inside when an odd number of them hold it
 * @param walls 4 per wall chord
 * @param near lines closer than this are one, in the length unit
 */
export function borderPieces(
  polygons: readonly (readonly Point[])[],
  regions: Loops,
  compartment: Loops,
  walls: Float64Array,
  near: number,
): BorderPiece[] {
  const ends = [...walls];
  const wallCount = walls.length / 4;
  for (const corners of polygons) {
    corners.forEach((from, i) => {
      const to = corners[(i + 1) % corners.length];
      if (from[0] !== to[0] || from[1] !== to[1]) ends.push(...from, ...to);
    });
  }
  const all = Float64Array.from(ends);
  const bits = new Uint8Array(all.length / 4).fill(2).fill(1, 0, wallCount);
  const tree = new ChordTree(all, bits);
  const pieces: BorderPiece[] = [];
  for (let c = wallCount; c < bits.length; c++) {
    const cuts = cutsOf(tree, c, near);
    for (let i = 0; i + 1 < cuts.length; i++) {
      const piece = pieceBetween(all, c, cuts[i], cuts[i + 1], near, regions, compartment, tree);
      if (piece) pieces.push(piece);
    }
  }
  return pieces;
}

/** Parameters at which chord `c` meets others or their ends, with 0 and 1, ascending and not closer than `near`. */
function cutsOf(tree: ChordTree, c: number, near: number): number[] {
  const { ends } = tree;
  const ax = ends[4 * c];
  const ay = ends[4 * c + 1];
  const ux = ends[4 * c + 2] - ax;
  const uy = ends[4 * c + 3] - ay;
  const length = Math.hypot(ux, uy);
  const found: number[] = [];
  tree.collect(ax + ux / 2, ay + uy / 2, 3, length / 2 + 2 * near);
  for (let f = 0; f < tree.found; f++) {
    const o = 4 * tree.foundIndex[f];
    if (o === 4 * c) continue;
    const vx = ends[o + 2] - ends[o];
    const vy = ends[o + 3] - ends[o + 1];
    for (const end of [o, o + 2]) {
      const px = ends[end] - ax;
      const py = ends[end + 1] - ay;
      if (Math.abs(ux * py - uy * px) <= near * length) found.push((px * ux + py * uy) / (length * length));
    }
    const cross = ux * vy - uy * vx;
    if (Math.abs(cross) <= 1e-12 * length * Math.hypot(vx, vy)) continue;
    const wx = ends[o] - ax;
    const wy = ends[o + 1] - ay;
    const other = (wx * uy - wy * ux) / cross;
    if (other >= 0 && other <= 1) found.push((wx * vy - wy * vx) / cross);
  }
  const gap = near / length;
  const cuts = [0];
  for (const t of found.sort((a, b) => a - b)) {
    if (t > cuts[cuts.length - 1] + gap && t < 1 - gap) cuts.push(t);
  }
  cuts.push(1);
  return cuts;
}

function pieceBetween(
  ends: Float64Array,
  c: number,
  t0: number,
  t1: number,
  near: number,
  regions: Loops,
  compartment: Loops,
  tree: ChordTree,
): BorderPiece | undefined {
  const ux = ends[4 * c + 2] - ends[4 * c];
  const uy = ends[4 * c + 3] - ends[4 * c + 1];
  const at = (t: number): Point => [ends[4 * c] + t * ux, ends[4 * c + 1] + t * uy];
  const [x, y] = at((t0 + t1) / 2);
  const length = Math.hypot(ux, uy);
  // Far enough from the line to be clear of rounding, and less than what tells lines apart.
  const aside = near / 4;
  const side = (sign: 1 | -1): number | undefined => {
    const px = x - (sign * aside * uy) / length;
    const py = y + (sign * aside * ux) / length;
    return isInside(compartment, px, py) ? regions.mask(px, py) : undefined;
  };
  const left = side(1);
  const right = side(-1);
  if (left === undefined && right === undefined) return undefined;
  tree.nearest(x, y, 1, near);
  return { from: at(t0), to: at(t1), left, right, onWall: tree.index >= 0 };
}

/** True inside the outline and outside every hole. */
export function isInside(compartment: Loops, x: number, y: number): boolean {
  let crossings = 0;
  for (let k = 0; k < compartment.count; k++) if (compartment.holds(k, x, y)) crossings++;
  return crossings % 2 === 1;
}
