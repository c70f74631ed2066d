import type { Mesh } from './mesh.ts';

/** Figures of a mesh; angles in degrees, area in the length unit squared. */
export interface MeshQuality {
  readonly nodes: number;
  readonly triangles: number;
  readonly area: number;
  readonly minAngle: number;
  /** Leaves out triangles over a wall or region corner that is sharper than the goal. */
  readonly minAngleElsewhere: number;
}

/** @param goal smallest angle that was asked for, in degrees */
export function meshQuality(mesh: Mesh, goal = 28): MeshQuality {
  const { nodes, triangles } = mesh;
  const fixed = fixedEdges(mesh);
  let area = 0;
  let minAngle = 180;
  let minAngleElsewhere = 180;
  for (let t = 0; t < triangles.length / 3; t++) {
    for (let i = 0; i < 3; i++) {
      const j = (i + 1) % 3;
      const k = (i + 2) % 3;
      const a = 2 * triangles[3 * t + i];
      const b = 2 * triangles[3 * t + j];
      const c = 2 * triangles[3 * t + k];
      const ux = nodes[b] - nodes[a];
      const uy = nodes[b + 1] - nodes[a + 1];
      const wx = nodes[c] - nodes[a];
      const wy = nodes[c + 1] - nodes[a + 1];
      const twice = ux * wy - uy * wx;
      const angle = (Math.atan2(twice, ux * wx + uy * wy) * 180) / Math.PI;
      if (i === 0) area += twice / 2;
      if (angle < minAngle) minAngle = angle;
      const atCorner = angle < goal && fixed[3 * t + i] === 1 && fixed[3 * t + k] === 1;
      if (!atCorner && angle < minAngleElsewhere) minAngleElsewhere = angle;
    }
  }
  return { nodes: nodes.length / 2, triangles: triangles.length / 3, area, minAngle, minAngleElsewhere };
}

/** Per half-edge 3t + i (corner i to the next): 1 on walls and on borders between region sets. */
export function fixedEdges(mesh: Mesh): Uint8Array {
  const opposite = oppositeHalfEdges(mesh);
  const fixed = new Uint8Array(opposite.length);
  for (let e = 0; e < opposite.length; e++) {
    const o = opposite[e];
    const other = o < 0 ? -1 : mesh.regionSet[Math.floor(o / 3)];
    if (o < 0 || other !== mesh.regionSet[Math.floor(e / 3)]) fixed[e] = 1;
  }
  return fixed;
}

/** Per half-edge: the half-edge of the neighbour with the same two nodes, −1 at walls. */
export function oppositeHalfEdges(mesh: Mesh): Int32Array {
  const { triangles } = mesh;
  const count = triangles.length;
  const nodeCount = mesh.nodes.length / 2;
  // Half-edges chained by their smaller node: few per node, so no hashing is needed.
  const head = new Int32Array(nodeCount).fill(-1);
  const chain = new Int32Array(count);
  const opposite = new Int32Array(count).fill(-1);
  for (let e = 0; e < count; e++) {
    const a = triangles[e];
    const b = triangles[e % 3 === 2 ? e - 2 : e + 1];
    const low = Math.min(a, b);
    const high = Math.max(a, b);
    let f = head[low];
    while (f >= 0) {
      const p = triangles[f];
      const q = triangles[f % 3 === 2 ? f - 2 : f + 1];
      if (p === b && Math.max(p, q) === high && opposite[f] < 0) break;
      f = chain[f];
    }
    if (f >= 0) {
      opposite[e] = f;
      opposite[f] = e;
    }
    chain[e] = head[low];
    head[low] = e;
  }
  return opposite;
}
