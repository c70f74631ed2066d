import type { Domain } from './domain.ts';
import type { Mesh } from './mesh.ts';
import { connectedPieces } from './pieces.ts';
import { inCircle, orient } from './predicates.ts';
import { fixedEdges, oppositeHalfEdges } from './quality.ts';

/**
 * What is wrong with a mesh, in words; empty when every promise of {@link Mesh} holds.
 *
 * Looked at: indices, orientation, that every half-edge without a neighbour is a listed wall and the other way round,
 * twins, Delaunay (exact in-circle), no obtuse angle facing a wall or a region border, area against the walls, Euler's
 * number of every connected piece, and with `domain` that each tag is one of its pieces.
 */
export function checkMesh(mesh: Mesh, domain?: Domain): string[] {
  const broken = checkIndices(mesh);
  if (broken.length > 0) return broken;
  const opposite = oppositeHalfEdges(mesh);
  checkTriangles(mesh, opposite, broken);
  checkWalls(mesh, opposite, broken);
  checkArea(mesh, broken);
  checkEuler(mesh, opposite, broken);
  if (domain) checkTags(mesh, domain, broken);
  return broken;
}

function checkIndices(mesh: Mesh): string[] {
  const broken: string[] = [];
  const nodes = mesh.nodes.length / 2;
  const used = new Uint8Array(nodes);
  for (const v of mesh.triangles) {
    if (v < 0 || v >= nodes) broken.push(`a triangle names node ${v} of ${nodes}`);
    else used[v] = 1;
  }
  const unused = used.indexOf(0);
  if (unused >= 0) broken.push(`node ${unused} belongs to no triangle`);
  for (const v of mesh.segments) if (v < 0 || v >= nodes) broken.push(`a wall names node ${v} of ${nodes}`);
  const badSet = mesh.regionSet.findIndex((set) => set < 0 || set >= mesh.regionSets.length);
  if (badSet >= 0) broken.push(`triangle ${badSet} names a region set that is not there`);
  if (mesh.regionSets[0]?.length !== 0) broken.push('the first region set is not the empty one');
  for (const value of mesh.nodes) if (!Number.isFinite(value)) broken.push('a coordinate is not finite');
  return broken;
}

function checkTriangles(mesh: Mesh, opposite: Int32Array, broken: string[]): void {
  const { nodes, triangles } = mesh;
  const fixed = fixedEdges(mesh);
  let turned = 0;
  let notDelaunay = 0;
  let obtuse = 0;
  for (let e = 0; e < triangles.length; e++) {
    const [a, b, c] = corners(triangles, e);
    const ax = nodes[2 * a];
    const ay = nodes[2 * a + 1];
    const bx = nodes[2 * b];
    const by = nodes[2 * b + 1];
    const cx = nodes[2 * c];
    const cy = nodes[2 * c + 1];
    if (e % 3 === 0 && orient(ax, ay, bx, by, cx, cy) <= 0) turned++;
    if (fixed[e] && (ax - cx) * (bx - cx) + (ay - cy) * (by - cy) < 0) obtuse++;
    const o = opposite[e];
    if (o < e || fixed[e]) continue;
    const d = corners(triangles, o)[2];
    if (inCircle(ax, ay, bx, by, cx, cy, nodes[2 * d], nodes[2 * d + 1]) > 0) notDelaunay++;
  }
  if (turned > 0) broken.push(`${turned} triangles are flat or run clockwise`);
  if (notDelaunay > 0) broken.push(`${notDelaunay} edges are not Delaunay`);
  if (obtuse > 0) broken.push(`${obtuse} obtuse angles face a wall or a region border`);
}

function corners(triangles: Int32Array, e: number): [number, number, number] {
  const t = e - (e % 3);
  return [triangles[e], triangles[t + ((e + 1) % 3)], triangles[t + ((e + 2) % 3)]];
}

function checkWalls(mesh: Mesh, opposite: Int32Array, broken: string[]): void {
  const { triangles, segments, segmentTwin, nodes } = mesh;
  const open = new Set<string>();
  for (let e = 0; e < triangles.length; e++) {
    const [a, b] = corners(triangles, e);
    const o = opposite[e];
    if (o < 0) open.add(`${a} ${b}`);
    else if (opposite[o] !== e) broken.push(`half-edge ${e} and its opposite do not agree`);
  }
  const count = segments.length / 2;
  if (open.size !== count)
    broken.push(`${open.size} triangle sides are at walls, but ${count} walls are listed`);
  for (let i = 0; i < count; i++) {
    if (!open.has(`${segments[2 * i]} ${segments[2 * i + 1]}`))
      broken.push(`wall ${i} is no side of a triangle`);
    const j = segmentTwin[i];
    if (j < 0) continue;
    if (segmentTwin[j] !== i) broken.push(`walls ${i} and ${j} are not each other's twins`);
    for (const [p, q] of [
      [segments[2 * i], segments[2 * j + 1]],
      [segments[2 * i + 1], segments[2 * j]],
    ]) {
      if (nodes[2 * p] !== nodes[2 * q] || nodes[2 * p + 1] !== nodes[2 * q + 1]) {
        broken.push(`twins ${i} and ${j} lie at different places`);
      }
    }
  }
}

/** Sum of the triangles against Green's sum over the walls, about one corner of the drawing. */
function checkArea(mesh: Mesh, broken: string[]): void {
  const { nodes, triangles, segments } = mesh;
  const [ox, oy] = nodes;
  const cross = (p: number, q: number): number =>
    (nodes[2 * p] - ox) * (nodes[2 * q + 1] - oy) - (nodes[2 * p + 1] - oy) * (nodes[2 * q] - ox);
  let inner = 0;
  let rim = 0;
  let size = 0;
  for (let e = 0; e < triangles.length; e += 3) {
    const [a, b, c] = corners(triangles, e);
    inner += (nodes[2 * b] - nodes[2 * a]) * (nodes[2 * c + 1] - nodes[2 * a + 1]);
    inner -= (nodes[2 * b + 1] - nodes[2 * a + 1]) * (nodes[2 * c] - nodes[2 * a]);
  }
  for (let i = 0; i < segments.length; i += 2) {
    rim += cross(segments[i], segments[i + 1]);
    size = Math.max(size, (nodes[2 * segments[i]] - ox) ** 2 + (nodes[2 * segments[i] + 1] - oy) ** 2);
  }
  if (Math.abs(inner - rim) > 1e-12 * size)
    broken.push(`area ${inner / 2} differs from the walls' ${rim / 2}`);
}

/** V − E + F of each connected piece is 1 − its number of holes, so V − E + F = 2·pieces − loops of walls. */
function checkEuler(mesh: Mesh, opposite: Int32Array, broken: string[]): void {
  const nodeCount = mesh.nodes.length / 2;
  const faces = mesh.triangles.length / 3;
  let inner = 0;
  for (const o of opposite) if (o >= 0) inner++;
  const edges = inner / 2 + mesh.segments.length / 2;
  const loops = countLoops(mesh, broken);
  const pieces = connectedPieces(mesh).count;
  if (nodeCount - edges + faces !== 2 * pieces - loops) {
    broken.push(`Euler: ${nodeCount} − ${edges} + ${faces} is not 2·${pieces} − ${loops}`);
  }
}

function countLoops(mesh: Mesh, broken: string[]): number {
  const { segments } = mesh;
  const after = new Map<number, number>();
  for (let i = 0; i < segments.length; i += 2) {
    if (after.has(segments[i])) broken.push(`two walls start from node ${segments[i]}`);
    after.set(segments[i], segments[i + 1]);
  }
  let loops = 0;
  for (let [start] = after.keys(); start !== undefined; [start] = after.keys()) {
    loops++;
    for (let v: number | undefined = start; v !== undefined; ) {
      const to: number | undefined = after.get(v);
      after.delete(v);
      v = to;
    }
  }
  return loops;
}

function checkTags(mesh: Mesh, domain: Domain, broken: string[]): void {
  const known = new Set<number>();
  for (const chain of [domain.outline, ...domain.holes, ...domain.innerWalls]) {
    for (const piece of chain.pieces) known.add(piece.tag);
  }
  const seen = new Set(mesh.segmentTag);
  for (const tag of seen) if (!known.has(tag)) broken.push(`walls carry tag ${tag}, which no piece has`);
}
