import type { Mesh } from '../../mesher/index.ts';
import type { EdgeList } from './edges.ts';

/**
 * The triangle behind every wall segment: the one that runs along it in the same sense.
 *
 * @returns one triangle number per segment; −1 where the mesh has none (a fault of the mesh)
 */
export function segmentTriangles(mesh: Mesh, edges: EdgeList): Int32Array {
  const { segments, triangles } = mesh;
  const byStart = new Map<number, number[]>();
  const count = segments.length / 2;
  for (let s = 0; s < count; s++) {
    const list = byStart.get(segments[2 * s]);
    if (list) list.push(s);
    else byStart.set(segments[2 * s], [s]);
  }
  const found = new Int32Array(count).fill(-1);
  for (let side = 0; side < edges.ofSide.length; side++) {
    const from = triangles[side % 3 === 2 ? side - 2 : side + 1];
    const candidates = byStart.get(from);
    if (!candidates) continue;
    const to = triangles[side % 3 === 0 ? side + 2 : side - 1];
    for (const s of candidates) if (segments[2 * s + 1] === to) found[s] = (side / 3) | 0;
  }
  return found;
}
