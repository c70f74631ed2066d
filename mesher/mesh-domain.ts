import { makeCompartment } from './compartment.ts';
import { findSharpCorners, type SharpCorner } from './corners.ts';
import type { Domain } from './domain.ts';
import { MesherError } from './errors.ts';
import { requireFeasible } from './estimate.ts';
import { finishMesh } from './finish.ts';
import type { HalfEdgeMesh } from './half-edge.ts';
import { makeSound } from './heal.ts';
import type { Mesh } from './mesh.ts';
import type { MeshOptions } from './options.ts';
import { refineFully } from './refine-fully.ts';
import { makeSizeField } from './size-field.ts';
import { smooth } from './smooth.ts';

/** Values used where the options leave them open; lengths relative to the diameter of the drawing. */
export const meshDefaults = {
  maxSizeOfDiameter: 1 / 20,
  growth: 0.2,
  minAngle: 28,
  maxNodes: 500_000,
  smoothing: 0,
} as const;

/** What {@link remesh} needs beside the arrays of a mesh. */
interface Origin {
  /** The first triangulation, of the drawing's corners alone. */
  readonly start: HalfEdgeMesh;
  readonly refined: HalfEdgeMesh;
  readonly regionSets: readonly (readonly number[])[];
  readonly corners: readonly SharpCorner[];
}

const origins = new WeakMap<Mesh, Origin>();

/**
 * Triangulates a compartment.
 *
 * @param domain as drawn or as {@link healDomain} gives it (healing is repeated, and finds nothing then)
 * @throws {MesherError} whatever healDomain throws, and CORNER_TOO_SHARP, TOO_MANY_CORNERS, TOO_MANY_TRIANGLES,
 *   TRIANGULATION_FAILED, MESHING_STOPPED
 */
export function meshDomain(domain: Domain, options: MeshOptions = {}): Mesh {
  const sound = makeSound(domain);
  const { mesh: start, regionSets } = makeCompartment(sound.graph);
  const corners = findSharpCorners(start);
  return build({ start, refined: start.copy(), regionSets, corners }, options);
}

/**
 * The same compartment with another size field.
 *
 * All vertices of `previous` stay where they are (but for a few moved near sharp corners) and more are added where the
 * new field asks for them; with `fromStart` it is meshed afresh from the stored first triangulation, the only way to
 * coarsen. `previous` is left as it is, and has to be a mesh of this thread: a copy sent elsewhere has lost its origin.
 *
 * @throws {MesherError} MESH_NOT_FROM_HERE, CORNER_TOO_SHARP, TOO_MANY_TRIANGLES, MESHING_STOPPED
 */
export function remesh(previous: Mesh, options: MeshOptions & { readonly fromStart?: boolean } = {}): Mesh {
  const origin = origins.get(previous);
  if (!origin) {
    throw new MesherError(
      'MESH_NOT_FROM_HERE',
      'this mesh was not made in this thread, or is a copy',
      {},
      'Mesh the domain again, or pass the mesh object that meshDomain returned.',
    );
  }
  const refined = (options.fromStart ? origin.start : origin.refined).copy();
  return build({ ...origin, refined }, options);
}

function build(origin: Origin, options: MeshOptions): Mesh {
  const { start, refined, corners, regionSets } = origin;
  const size = makeSizeField(options, meshDefaults.maxSizeOfDiameter * diameter(start));
  const maxVertices = options.maxNodes ?? meshDefaults.maxNodes;
  const minAngle = options.minAngle ?? meshDefaults.minAngle;
  const expected = requireFeasible(start, size, corners, maxVertices) / 2;
  // Room for what is expected: growing by doubling would copy everything again and hold both copies at the peak.
  refined.reserve(Math.ceil(1.04 * expected), Math.ceil(2.08 * expected), 0);
  const hooks = {
    ...(options.stop ? { stop: options.stop } : {}),
    ...(options.progress ? { progress: options.progress } : {}),
  };
  refineFully(refined, { size, minAngle, maxVertices, expected, corners, ...hooks });
  smooth(refined, hooks, options.smoothing ?? meshDefaults.smoothing);
  const mesh = finishMesh(refined, regionSets);
  origins.set(mesh, origin);
  options.progress?.(1);
  return mesh;
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
