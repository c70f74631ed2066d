import { type Mesh, placeText } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';

/**
 * Refuses a compartment with a piece that nothing can ever leave: its mean exit time is infinite.
 *
 * @param links pairs of nodes a particle can go between: 2 node numbers per link
 * @param leads 1 per node from which particles are caught or lost there, else 0
 * @throws {SolverError} NO_WAY_OUT with the middle of one triangle of such a piece, and the tags of the piece's walls
 */
export function requireWayOut(mesh: Mesh, links: readonly Int32Array[], leads: Uint8Array): void {
  const root = new Int32Array(leads.length);
  for (let i = 0; i < root.length; i++) root[i] = i;
  const find = (node: number): number => {
    let top = node;
    while (root[top] !== top) {
      root[top] = root[root[top]];
      top = root[top];
    }
    return top;
  };
  for (const pairs of links) {
    for (let p = 0; p < pairs.length; p += 2) {
      const a = find(pairs[p]);
      const b = find(pairs[p + 1]);
      if (a !== b) root[Math.max(a, b)] = Math.min(a, b);
    }
  }
  const open = new Uint8Array(leads.length);
  for (let i = 0; i < leads.length; i++) if (leads[i]) open[find(i)] = 1;
  for (let t = 0; t < mesh.regionSet.length; t++) {
    const piece = find(mesh.triangles[3 * t]);
    if (!open[piece]) throw noWayOut(mesh, t, (node) => find(node) === piece);
  }
}

function noWayOut(mesh: Mesh, triangle: number, inPiece: (node: number) => boolean): SolverError {
  const { nodes, triangles } = mesh;
  let x = 0;
  let y = 0;
  for (let v = 0; v < 3; v++) {
    x += nodes[2 * triangles[3 * triangle + v]] / 3;
    y += nodes[2 * triangles[3 * triangle + v] + 1] / 3;
  }
  const tags = new Set<number>();
  for (let s = 0; s < mesh.segmentTag.length; s++) {
    if (inPiece(mesh.segments[2 * s])) tags.add(mesh.segmentTag[s]);
  }
  return new SolverError(
    'NO_WAY_OUT',
    `Nothing can leave the part of the compartment around ${placeText([x, y])}: the mean exit time there is infinite`,
    { at: [[x, y]], tags: [...tags].sort((a, b) => a - b) },
    'Make one of its walls absorbing or partly absorbing.',
  );
}
