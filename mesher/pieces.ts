import type { Mesh } from './mesh.ts';
import { oppositeHalfEdges } from './quality.ts';

/** The connected pieces of a compartment: parts that no path inside joins. */
export interface ConnectedPieces {
  readonly count: number;
  /** Per triangle: its piece, numbered in the order of their first triangles. */
  readonly ofTriangle: Int32Array;
  /** Per node: its piece; each node belongs to one, because touching corners have a node per piece. */
  readonly ofNode: Int32Array;
  /** Per wall segment: the piece it bounds; which pieces have a way out follows from the kinds of their walls. */
  readonly ofSegment: Int32Array;
}

/** Finds the connected pieces of a mesh in linear time. Both sides of an inner wall count as walls. */
export function connectedPieces(mesh: Mesh): ConnectedPieces {
  const opposite = oppositeHalfEdges(mesh);
  const { triangles, segments } = mesh;
  const ofTriangle = new Int32Array(opposite.length / 3).fill(-1);
  const ofNode = new Int32Array(mesh.nodes.length / 2);
  const stack = new Int32Array(ofTriangle.length);
  let count = 0;
  for (let start = 0; start < ofTriangle.length; start++) {
    if (ofTriangle[start] >= 0) continue;
    let top = 0;
    stack[top++] = start;
    ofTriangle[start] = count;
    while (top > 0) {
      const t = stack[--top];
      for (let e = 3 * t; e < 3 * t + 3; e++) {
        ofNode[triangles[e]] = count;
        const o = opposite[e];
        if (o < 0) continue;
        const u = (o / 3) | 0;
        if (ofTriangle[u] >= 0) continue;
        ofTriangle[u] = count;
        stack[top++] = u;
      }
    }
    count++;
  }
  const ofSegment = new Int32Array(segments.length / 2);
  for (let i = 0; i < ofSegment.length; i++) ofSegment[i] = ofNode[segments[2 * i]];
  return { count, ofTriangle, ofNode, ofSegment };
}
