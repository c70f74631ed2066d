import { MesherError } from './errors.ts';
import { HalfEdgeMesh, next, pairHalfEdges } from './half-edge.ts';
import { flipToDelaunay, mendFlat } from './lawson.ts';
import type { LineGraph } from './line-graph.ts';
import { type BoxTriangulation, triangulateBox } from './triangulate.ts';

/** The first triangulation of a compartment: constrained Delaunay, walls and region borders as segments. */
export interface Compartment {
  readonly mesh: HalfEdgeMesh;
  readonly regionSets: readonly (readonly number[])[];
}

/**
 * Triangulates the lines in a box, keeps what lies inside the outline and outside all holes by winding number, and
 * tells which regions each triangle lies in.
 *
 * @throws {MesherError} TOO_MANY_CORNERS, TRIANGULATION_FAILED, NO_AREA
 */
export function makeCompartment(graph: LineGraph): Compartment {
  let whole: HalfEdgeMesh | undefined;
  triangulateBox(graph.points, graph.ends, (candidate) => {
    whole = fromBox(graph, candidate);
    return whole !== undefined;
  });
  if (!whole)
    throw new MesherError('TRIANGULATION_FAILED', 'no first triangulation', {}, 'Simplify the drawing.');
  const start = whole.triangleCount - 1;
  const outer = cornerTriangle(whole, graph.points.length / 2) ?? start;
  const inside = flood(whole, outer, graph.spin);
  const { sets, setOf } = findRegionSets(whole, outer, graph);
  const mesh = keep(whole, inside, setOf);
  if (mesh.triangleCount === 0) {
    throw new MesherError(
      'NO_AREA',
      'nothing is left inside the outline',
      {},
      'Leave out holes that fill it.',
    );
  }
  return { mesh, regionSets: sets };
}

/** Half-edges with segments over the sweep's triangles; undefined unless each line is there and all turn left. */
function fromBox(graph: LineGraph, candidate: BoxTriangulation): HalfEdgeMesh | undefined {
  const curves = graph.owner.map((chord) => chord.strand.curve);
  const tags = Int32Array.from(graph.owner, (c) => (c.strand.role === 'region' ? -1 : c.strand.tag));
  const mesh = new HalfEdgeMesh(curves, tags);
  const triangles = candidate.triangles.length / 3;
  mesh.reserve(candidate.points.length / 2, triangles, graph.owner.length);
  mesh.xy.set(candidate.points);
  mesh.vertexCount = candidate.points.length / 2;
  mesh.from.set(candidate.triangles);
  mesh.triangleCount = triangles;
  mesh.segment.fill(-1);
  pairHalfEdges(mesh);
  const lineOf = new Map<number, number>();
  const n = mesh.vertexCount;
  graph.owner.forEach((chord, line) => {
    lineOf.set(Math.min(chord.a, chord.b) * n + Math.max(chord.a, chord.b), line);
    mesh.addSegment(line, chord.t0, chord.t1, chord.a, chord.b);
  });
  let seen = 0;
  let rim = 0;
  for (let e = 0; e < 3 * triangles; e++) {
    const a = mesh.from[e];
    const b = mesh.from[next(e)];
    if (mesh.opposite[e] < 0) rim++;
    const line = lineOf.get(Math.min(a, b) * n + Math.max(a, b));
    if (line === undefined) continue;
    mesh.segment[e] = line;
    seen++;
  }
  if (rim !== 4 || seen !== 2 * graph.owner.length || !mendFlat(mesh)) return undefined;
  if (!fillsBox(mesh)) return undefined;
  flipToDelaunay(mesh);
  return mesh;
}

/** All triangles turn left, so their areas add up to the box's only if none lies on another. */
function fillsBox(mesh: HalfEdgeMesh): boolean {
  const { xy, from } = mesh;
  const n = mesh.vertexCount;
  const box = (xy[2 * n - 4] - xy[2 * n - 8]) * (xy[2 * n - 3] - xy[2 * n - 7]);
  let sum = 0;
  for (let e = 0; e < 3 * mesh.triangleCount; e += 3) {
    const a = 2 * from[e];
    const b = 2 * from[e + 1];
    const c = 2 * from[e + 2];
    sum += ((xy[b] - xy[a]) * (xy[c + 1] - xy[a + 1]) - (xy[b + 1] - xy[a + 1]) * (xy[c] - xy[a])) / 2;
  }
  return Math.abs(sum - box) <= 1e-9 * box;
}

function cornerTriangle(mesh: HalfEdgeMesh, corner: number): number | undefined {
  for (let e = 0; e < 3 * mesh.triangleCount; e++) if (mesh.from[e] === corner) return Math.floor(e / 3);
  return undefined;
}

/** How often the lines wind round each triangle, starting with 0 at `outer`. */
function flood(mesh: HalfEdgeMesh, outer: number, spin: Int32Array): Int32Array {
  const { from, opposite, segment, segmentFrom } = mesh;
  const unknown = -0x40000000;
  const winding = new Int32Array(mesh.triangleCount).fill(unknown);
  const stack = [outer];
  winding[outer] = 0;
  for (let t = stack.pop(); t !== undefined; t = stack.pop()) {
    for (let e = 3 * t; e < 3 * t + 3; e++) {
      const o = opposite[e];
      if (o < 0) continue;
      const u = Math.floor(o / 3);
      if (winding[u] !== unknown) continue;
      const s = segment[e];
      // Going from the left of e to its right loses the turns of what runs along e.
      const along = s < 0 ? 0 : segmentFrom[s] === from[e] ? spin[s] : -spin[s];
      winding[u] = winding[t] - along;
      stack.push(u);
    }
  }
  return winding;
}

function findRegionSets(
  mesh: HalfEdgeMesh,
  outer: number,
  graph: LineGraph,
): { sets: number[][]; setOf: Int32Array } {
  const sets: number[][] = [[]];
  const setOf = new Int32Array(mesh.triangleCount);
  for (let region = 0; region < graph.regionCount; region++) {
    const spin = new Int32Array(graph.owner.length);
    for (const [line, of, step] of graph.regionSpin) if (of === region) spin[line] += step;
    const winding = flood(mesh, outer, spin);
    const enlarged = new Map<number, number>();
    for (let t = 0; t < setOf.length; t++) {
      if (winding[t] === 0) continue;
      let to = enlarged.get(setOf[t]);
      if (to === undefined) {
        to = sets.length;
        sets.push([...sets[setOf[t]], region]);
        enlarged.set(setOf[t], to);
      }
      setOf[t] = to;
    }
  }
  return { sets, setOf };
}

/**
 * The triangles wound round once, without the box; half-edges to the outside become −1.
 *
 * Triangles start from their lowest vertex and are in order of their vertices, which are in drawing order: so the
 * same drawing turned or scaled is refined in the same order, whatever the sweep made of it.
 */
function keep(whole: HalfEdgeMesh, winding: Int32Array, setOf: Int32Array): HalfEdgeMesh {
  const { from, opposite, segment } = whole;
  const inside: number[] = [];
  for (let t = 0; t < whole.triangleCount; t++) if (winding[t] === 1) inside.push(lowestCorner(from, t));
  inside.sort((e, o) => from[e] - from[o] || from[next(e)] - from[next(o)]);
  const mesh = new HalfEdgeMesh(whole.curves, whole.tags);
  mesh.reserve(whole.vertexCount, inside.length, whole.segmentCount);
  mesh.vertexCount = whole.vertexCount - 4;
  mesh.triangleCount = inside.length;
  mesh.xy.set(whole.xy.subarray(0, 2 * mesh.vertexCount));
  for (let s = 0; s < whole.segmentCount; s++) {
    const [t0, t1] = [whole.segmentSpan[2 * s], whole.segmentSpan[2 * s + 1]];
    mesh.addSegment(whole.segmentCurve[s], t0, t1, whole.segmentFrom[s], whole.segmentTo[s]);
  }
  const number = new Int32Array(3 * whole.triangleCount).fill(-1);
  inside.forEach((first, t) => {
    let e = first;
    for (let i = 0; i < 3; i++, e = next(e)) number[e] = 3 * t + i;
    mesh.regionSet[t] = setOf[Math.floor(first / 3)];
  });
  for (let e = 0; e < number.length; e++) {
    const to = number[e];
    if (to < 0) continue;
    mesh.from[to] = from[e];
    mesh.segment[to] = segment[e];
    mesh.opposite[to] = opposite[e] < 0 ? -1 : number[opposite[e]];
  }
  return mesh;
}

/** The half-edge of triangle t that starts from its vertex with the smallest number. */
function lowestCorner(from: Int32Array, t: number): number {
  let lowest = 3 * t;
  for (let e = 3 * t + 1; e < 3 * t + 3; e++) if (from[e] < from[lowest]) lowest = e;
  return lowest;
}
