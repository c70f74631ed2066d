import { starStep } from './star-step.ts';
import { chordBits, wallBits } from './walk-chords.ts';
import type { Walker, WalkStage } from './walker.ts';
import { nearestFeature, stepReach } from './wall-ahead.ts';

/**
 * Steps at a straight border between two plain media. A walker near it goes on from the border itself, to the rim of a
 * disc that holds nothing but the border: to side i with chance p_i = D_i^α/(D_1^α + D_2^α), in an even direction,
 * after a mean time R²/4·(p_1/D_1 + p_2/D_2).
 *
 * Exact: weighted by p_i, a solution and its mirror image add up to one whose normal derivative is zero on the border,
 * because D^α ∂u/∂n goes through it unchanged (reflection principle; compare Lejay & Maire 2010, recalled).
 *
 * @param distance of the border, chord `border`
 * @returns false when another kind of step is to be taken
 */
export function borderStep(stage: WalkStage, walker: Walker, border: number, distance: number): boolean {
  const { geometry, lengths, random, shell } = stage;
  const { tree, sides, mediumOf, alpha, straightRun } = geometry;
  if (distance >= stepReach * lengths.border || straightRun[border] < 4 * lengths.border) return false;
  const left = mediumOf(sides[2 * border]);
  const right = mediumOf(sides[2 * border + 1]);
  if (!left.plain || !right.plain) return false;
  nearestFeature(tree, border, walker.x, walker.y);
  const { footX, footY } = tree;
  const radius = roomAt(stage, border, footX, footY);
  if (radius < 2 * lengths.border) return false;
  if (distance >= shell) {
    starStep(stage, walker, Math.max(shell, geometry.rims.nearest(walker.x, walker.y, distance)));
    return true;
  }
  const kLeft = left.constantDiffusion ** alpha;
  const kRight = right.constantDiffusion ** alpha;
  const toLeft = kLeft / (kLeft + kRight);
  const goes = random.uniform() < toLeft;
  const angle = Math.PI * random.uniform();
  const e = 4 * border;
  const ux = tree.ends[e + 2] - tree.ends[e];
  const uy = tree.ends[e + 3] - tree.ends[e + 1];
  const scale = radius / Math.hypot(ux, uy);
  const along = scale * Math.cos(angle);
  const away = scale * Math.sin(angle) * (goes ? 1 : -1);
  walker.x = footX + along * ux - away * uy;
  walker.y = footY + along * uy + away * ux;
  walker.time +=
    ((radius * radius) / 4) * (toLeft / left.constantDiffusion + (1 - toLeft) / right.constantDiffusion);
  walker.medium = goes ? left : right;
  walker.on = -1;
  return true;
}

/** Radius around a place on a border in which there is nothing but that border, and that straight. */
function roomAt(stage: WalkStage, border: number, x: number, y: number): number {
  const { tree, size, sides } = stage.geometry;
  const { ends } = tree;
  tree.nearest(x, y, wallBits, size);
  let room = tree.distance;
  tree.collect(x, y, chordBits.border, room);
  const e = 4 * border;
  const ux = ends[e + 2] - ends[e];
  const uy = ends[e + 3] - ends[e + 1];
  const near = 1e-9 * size * Math.hypot(ux, uy);
  for (let f = 0; f < tree.found; f++) {
    const i = tree.foundIndex[f];
    const o = 4 * i;
    const onLine =
      Math.abs(ux * (ends[o + 1] - ends[e + 1]) - uy * (ends[o] - ends[e])) <= near &&
      Math.abs(ux * (ends[o + 3] - ends[e + 1]) - uy * (ends[o + 2] - ends[e])) <= near;
    const same = sides[2 * i] === sides[2 * border] && sides[2 * i + 1] === sides[2 * border + 1];
    if (!(onLine && same)) room = Math.min(room, tree.foundDistance[f]);
  }
  return room;
}
