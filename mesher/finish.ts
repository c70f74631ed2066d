import { chordSag } from './curves.ts';
import { grownFloat, type HalfEdgeMesh, next, previous } from './half-edge.ts';
import type { Mesh } from './mesh.ts';

/**
 * The finished mesh: every vertex split into one node per part of the compartment that meets in it, so that both
 * sides of inner walls, and parts that touch in a point, have nodes of their own; walls listed side by side.
 */
export function finishMesh(mesh: HalfEdgeMesh, regionSets: readonly (readonly number[])[]): Mesh {
  const { from, opposite, segment, tags, segmentCurve } = mesh;
  const corners = 3 * mesh.triangleCount;
  const isWall = (e: number): boolean => {
    const s = segment[e];
    return s < 0 ? opposite[e] < 0 : tags[segmentCurve[s]] >= 0;
  };
  const triangles = new Int32Array(corners).fill(-1);
  const onWall = wallVertices(mesh);
  const nodeOf = new Int32Array(mesh.vertexCount).fill(-1);
  let nodes = new Float64Array(2 * mesh.vertexCount);
  let count = 0;
  const addNode = (v: number): number => {
    if (2 * count === nodes.length) nodes = grownFloat(nodes, 2 * count + 2);
    nodes[2 * count] = mesh.xy[2 * v];
    nodes[2 * count + 1] = mesh.xy[2 * v + 1];
    return count++;
  };
  for (let e = 0; e < corners; e++) {
    if (triangles[e] >= 0) continue;
    const v = from[e];
    if (!onWall[v]) {
      if (nodeOf[v] < 0) nodeOf[v] = addNode(v);
      triangles[e] = nodeOf[v];
      continue;
    }
    const node = addNode(v);
    // Clockwise to the first wall, then counter-clockwise through the whole part.
    let start = e;
    while (!isWall(start)) {
      start = next(opposite[start]);
      if (start === e) break;
    }
    let at = start;
    do {
      triangles[at] = node;
      const back = previous(at);
      if (isWall(back)) break;
      at = opposite[back];
    } while (at !== start);
  }
  const walls = listWalls(mesh, triangles, isWall);
  const regionSet = mesh.regionSet.slice(0, mesh.triangleCount);
  return { nodes: nodes.slice(0, 2 * count), triangles, regionSet, regionSets, ...walls };
}

/** Per vertex: 1 where a wall segment ends. */
function wallVertices(mesh: HalfEdgeMesh): Uint8Array {
  const onWall = new Uint8Array(mesh.vertexCount);
  for (let s = 0; s < mesh.segmentCount; s++) {
    if (mesh.tags[mesh.segmentCurve[s]] < 0) continue;
    onWall[mesh.segmentFrom[s]] = 1;
    onWall[mesh.segmentTo[s]] = 1;
  }
  return onWall;
}

function listWalls(
  mesh: HalfEdgeMesh,
  triangles: Int32Array,
  isWall: (e: number) => boolean,
): Pick<Mesh, 'segments' | 'segmentTag' | 'segmentSpan' | 'segmentTwin' | 'chordError'> {
  const { from, opposite, segment, tags } = mesh;
  const edges: number[] = [];
  for (let e = 0; e < triangles.length; e++) if (isWall(e)) edges.push(e);
  const place = new Map<number, number>();
  edges.forEach((e, i) => {
    if (opposite[e] >= 0) place.set(e, i);
  });
  const segments = new Int32Array(2 * edges.length);
  const segmentTag = new Int32Array(edges.length);
  const segmentSpan = new Float64Array(2 * edges.length);
  const segmentTwin = new Int32Array(edges.length).fill(-1);
  let chordError = 0;
  edges.forEach((e, i) => {
    const s = segment[e];
    const curve = mesh.segmentCurve[s];
    const t0 = mesh.segmentSpan[2 * s];
    const t1 = mesh.segmentSpan[2 * s + 1];
    const forward = mesh.segmentFrom[s] === from[e];
    segments[2 * i] = triangles[e];
    segments[2 * i + 1] = triangles[next(e)];
    segmentTag[i] = tags[curve];
    segmentSpan[2 * i] = forward ? t0 : t1;
    segmentSpan[2 * i + 1] = forward ? t1 : t0;
    segmentTwin[i] = opposite[e] >= 0 ? (place.get(opposite[e]) ?? -1) : -1;
    chordError = Math.max(chordError, chordSag(mesh.curves[curve], t0, t1));
  });
  return { segments, segmentTag, segmentSpan, segmentTwin, chordError };
}
