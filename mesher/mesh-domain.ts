import { makeCompartment } from './compartment.ts';
import { findSharpCorners } from './corners.ts';
import type { Domain } from './domain.ts';
import { requireFeasible } from './estimate.ts';
import { finishMesh } from './finish.ts';
import type { HalfEdgeMesh } from './half-edge.ts';
import { makeSound } from './heal.ts';
import type { Mesh } from './mesh.ts';
import type { MeshOptions } from './options.ts';
import { refineFully } from './refine-fully.ts';
import { makeSizeField } from './size-field.ts';

/** Values used where the options leave them open; lengths relative to the diameter of the drawing. */
export const meshDefaults = {
  maxSizeOfDiameter: 1 / 20,
  growth: 0.2,
  minAngle: 28,
  maxNodes: 500_000,
} as const;

/**
 * Triangulates a compartment.
 *
 * @param domain as drawn or as {@link healDomain} gives it (healing is repeated, and finds nothing then)
 * @throws {MesherError} whatever healDomain throws, and CORNER_TOO_SHARP, TOO_MANY_CORNERS, TOO_MANY_TRIANGLES,
 *   TRIANGULATION_FAILED, MESHING_STOPPED
 */
export function meshDomain(domain: Domain, options: MeshOptions = {}): Mesh {
  const sound = makeSound(domain);
  const { mesh, regionSets } = makeCompartment(sound.graph);
  const size = makeSizeField(options, meshDefaults.maxSizeOfDiameter * diameter(mesh));
  const maxNodes = options.maxNodes ?? meshDefaults.maxNodes;
  const corners = findSharpCorners(mesh);
  const expected = requireFeasible(mesh, size, corners, maxNodes) / 2;
  const minAngle = options.minAngle ?? meshDefaults.minAngle;
  refineFully(mesh, {
    size,
    minAngle,
    maxVertices: maxNodes,
    expected,
    corners,
    ...(options.stop ? { stop: options.stop } : {}),
    ...(options.progress ? { progress: options.progress } : {}),
  });
  return finishMesh(mesh, regionSets);
}

/** Length of the diagonal of the box round the compartment. */
function diameter(mesh: HalfEdgeMesh): number {
  const { xy, from } = mesh;
  let [left, low, right, high] = [xy[2 * from[0]], xy[2 * from[0] + 1], xy[2 * from[0]], xy[2 * from[0] + 1]];
  for (let e = 0; e < 3 * mesh.triangleCount; e++) {
    const v = 2 * from[e];
    left = Math.min(left, xy[v]);
    right = Math.max(right, xy[v]);
    low = Math.min(low, xy[v + 1]);
    high = Math.max(high, xy[v + 1]);
  }
  return Math.hypot(right - left, high - low);
}
