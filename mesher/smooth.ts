import { MesherError } from './errors.ts';
import type { HalfEdgeMesh } from './half-edge.ts';
import type { Hooks } from './hooks.ts';
import { VertexMover } from './move-vertex.ts';

/** Guarded smoothing of a refined mesh: vertices off the walls move where that makes the smallest angle larger. */

/**
 * Three sweeps over all free vertices towards the mean of their neighbours.
 *
 * @throws {MesherError} MESHING_STOPPED
 */
export function smooth(mesh: HalfEdgeMesh, hooks: Hooks, sweeps = 3): void {
  const mover = new VertexMover(mesh);
  for (let sweep = 0; sweep < sweeps; sweep++) {
    for (let v = 0; v < mesh.vertexCount; v++) {
      if ((v & 1023) === 0 && hooks.stop?.()) {
        throw new MesherError('MESHING_STOPPED', 'meshing was stopped', {}, 'Start it again when wanted.');
      }
      if (!mover.pick(v)) continue;
      const [x, y] = mover.centre();
      if (mover.worst(x, y) < mover.worst(mesh.xy[2 * v], mesh.xy[2 * v + 1])) mover.move(v, x, y);
    }
  }
}
