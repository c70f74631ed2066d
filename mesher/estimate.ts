import type { SharpCorner } from './corners.ts';
import { MesherError } from './errors.ts';
import type { HalfEdgeMesh } from './half-edge.ts';
import { placeText } from './place-text.ts';
import type { SizeField } from './size-field.ts';

/** Triangles per area over size squared that refinement makes where only the size asks for them; measured. */
const trianglesPerSize = 5;
/** Triangles per degree of sharpness and doubling of the distance from the corner; measured on wedges. */
const perDegreeAndShell = 86;
/** Places at which a size field is asked for one estimate. */
const mostSamples = 40_000;

/**
 * About how many triangles the size field asks for: ∫ dA/h² over the first triangulation, each triangle quartered
 * until it is no larger than a few sizes.
 */
export function estimateTriangles(mesh: HalfEdgeMesh, size: SizeField | number): number {
  const { xy, from } = mesh;
  let sum = 0;
  let samples = 0;
  const add = (
    ax: number,
    ay: number,
    bx: number,
    by: number,
    cx: number,
    cy: number,
    depth: number,
  ): void => {
    const h = typeof size === 'number' ? size : size((ax + bx + cx) / 3, (ay + by + cy) / 3);
    const area = ((bx - ax) * (cy - ay) - (by - ay) * (cx - ax)) / 2;
    const reach = Math.max(
      Math.hypot(bx - ax, by - ay),
      Math.hypot(cx - bx, cy - by),
      Math.hypot(ax - cx, ay - cy),
    );
    samples++;
    if (typeof size === 'number' || reach <= 3 * h || depth >= 24 || samples > mostSamples) {
      sum += area / (h * h);
      return;
    }
    const [px, py, qx, qy, rx, ry] = [
      (ax + bx) / 2,
      (ay + by) / 2,
      (bx + cx) / 2,
      (by + cy) / 2,
      (cx + ax) / 2,
      (cy + ay) / 2,
    ];
    add(ax, ay, px, py, rx, ry, depth + 1);
    add(px, py, bx, by, qx, qy, depth + 1);
    add(rx, ry, qx, qy, cx, cy, depth + 1);
    add(px, py, qx, qy, rx, ry, depth + 1);
  };
  for (let e = 0; e < 3 * mesh.triangleCount; e += 3) {
    const a = 2 * from[e];
    const b = 2 * from[e + 1];
    const c = 2 * from[e + 2];
    add(xy[a], xy[a + 1], xy[b], xy[b + 1], xy[c], xy[c + 1], 0);
  }
  return Math.ceil(trianglesPerSize * sum);
}

/**
 * Refuses what cannot be meshed with `maxNodes` nodes, before anything is refined.
 *
 * @returns about how many triangles there will be
 * @throws {MesherError} CORNER_TOO_SHARP, TOO_MANY_TRIANGLES
 */
export function requireFeasible(
  mesh: HalfEdgeMesh,
  size: SizeField | number,
  corners: readonly SharpCorner[],
  maxNodes: number,
): number {
  let sharp = 0;
  for (const { vertex, angle, chordAngle, reach } of corners) {
    const [x, y] = [mesh.xy[2 * vertex], mesh.xy[2 * vertex + 1]];
    const h = typeof size === 'number' ? size : size(x, y);
    // Between curves the angle shrinks with the pieces, from that of the first chords to that of the curves.
    const open = angle + (chordAngle - angle) * Math.min(1, h / reach);
    const degrees = (open * 180) / Math.PI;
    const count = (perDegreeAndShell / degrees) * Math.max(1, Math.log2(reach / h));
    if (count > 2 * maxNodes) {
      throw new MesherError(
        'CORNER_TOO_SHARP',
        `the corner at ${placeText([x, y])} of ${degrees.toPrecision(3)} degrees is too sharp: it alone needs about ${count.toPrecision(2)} triangles`,
        { at: [[x, y]] },
        'Blunt the corner, or allow more nodes.',
      );
    }
    sharp += count;
  }
  const expected = estimateTriangles(mesh, size) + sharp;
  if (expected > 2 * maxNodes) throw tooMany(expected, maxNodes);
  return expected;
}

export function tooMany(triangles: number, maxNodes: number): MesherError {
  return new MesherError(
    'TOO_MANY_TRIANGLES',
    `the mesh would have about ${triangles.toPrecision(2)} triangles, more than ${maxNodes} nodes allow`,
    {},
    'Allow more nodes, ask for a larger size, or widen narrow places.',
  );
}
