import { Cavity } from './cavity.ts';
import type { HalfEdgeMesh } from './half-edge.ts';
import { mendAngles } from './mend-angles.ts';
import { refine } from './refine.ts';
import type { RefineGoal } from './refine-goal.ts';

/** Rounds in which pieces at sharp corners are granted one more halving. */
const mostRounds = 5;

/**
 * Below this (4°, in radians) halving helps no more where both sides of a wall are meshed: the pieces of the next
 * shell are shorter than the one at the corner by about twice the angle, and half a turn of good triangles round
 * their common end can only bridge a ratio of about 30.
 */
const hopelessAngle = 0.07;

/**
 * Refines, moves vertices of the triangles left below the goal, and where that is not enough lets the wall pieces of
 * sharp corners that stood in the way be halved once more, a few times.
 *
 * @throws {MesherError} TOO_MANY_TRIANGLES, MESHING_STOPPED
 */
export function refineFully(mesh: HalfEdgeMesh, goal: Omit<RefineGoal, 'granted'>): void {
  const granted = new Float64Array(mesh.vertexCount).fill(Number.POSITIVE_INFINITY);
  const isSharp = new Uint8Array(mesh.vertexCount);
  for (const { vertex } of goal.corners) isSharp[vertex] = 1;
  for (const { vertex, angle } of goal.corners) if (angle < hopelessAngle) isSharp[vertex] = 0;
  for (let round = 0; ; round++) {
    refine(mesh, { ...goal, granted });
    const left = mendAngles(mesh, goal.minAngle, false);
    if (left.length === 0) return;
    if (round === mostRounds || !grant(mesh, left, isSharp, granted)) break;
  }
  mendAngles(mesh, goal.minAngle, true);
}

/** Grants a halving to the pieces near which the points that triangles `left` would need stand. */
function grant(
  mesh: HalfEdgeMesh,
  left: readonly number[],
  isSharp: Uint8Array,
  granted: Float64Array,
): boolean {
  const cavity = new Cavity();
  const { xy, from, segmentFrom, segmentTo } = mesh;
  let any = false;
  for (const t of left) {
    const [x, y] = circumcentre(xy, 2 * from[3 * t], 2 * from[3 * t + 1], 2 * from[3 * t + 2]);
    const hit: number[] = [];
    cavity.collect(mesh, t, x, y);
    cavity.look(mesh, x, y, hit);
    for (let e = 3 * t; e < 3 * t + 3; e++) if (mesh.segment[e] >= 0) hit.push(mesh.segment[e]);
    for (const s of hit) {
      const a = segmentFrom[s];
      const b = segmentTo[s];
      const length = Math.hypot(xy[2 * a] - xy[2 * b], xy[2 * a + 1] - xy[2 * b + 1]);
      for (const v of [a, b]) {
        if (v >= isSharp.length || !isSharp[v] || granted[v] < length) continue;
        granted[v] = 0.75 * length;
        any = true;
      }
    }
  }
  return any;
}

function circumcentre(xy: Float64Array, a: number, b: number, c: number): readonly [number, number] {
  const dx = xy[b] - xy[a];
  const dy = xy[b + 1] - xy[a + 1];
  const ex = xy[c] - xy[a];
  const ey = xy[c + 1] - xy[a + 1];
  const dd = dx * dx + dy * dy;
  const ee = ex * ex + ey * ey;
  const scale = 0.5 / (dx * ey - dy * ex);
  return [xy[a] + (ey * dd - dy * ee) * scale, xy[a + 1] + (dx * ee - ex * dd) * scale];
}
