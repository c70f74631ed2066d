import { type HalfEdgeMesh, next, previous } from './half-edge.ts';
import { inCircle, orient } from './predicates.ts';

/** Edge flips with exact predicates: repair of rounded triangles, then constrained Delaunay (Lawson 1977). */

/** Replaces the common edge of two triangles by the other diagonal of their quadrilateral. */
export function flip(mesh: HalfEdgeMesh, e: number): void {
  const { from, opposite, segment } = mesh;
  const o = opposite[e];
  const e1 = next(e);
  const e2 = previous(e);
  const o1 = next(o);
  const o2 = previous(o);
  const a = from[e2];
  const d = from[o2];
  // Triangles (p q a) over e = p→q and (q p d) over o become (a d q) and (d a p).
  const outE1 = opposite[e1];
  const outE2 = opposite[e2];
  const outO1 = opposite[o1];
  const outO2 = opposite[o2];
  const segE1 = segment[e1];
  const segE2 = segment[e2];
  const segO1 = segment[o1];
  const segO2 = segment[o2];
  const p = from[e];
  const q = from[o];
  // First triangle keeps the half-edges of e: e = a→d, e1 = d→q, e2 = q→a.
  from[e] = a;
  from[e1] = d;
  from[e2] = q;
  join(mesh, e1, outO2, segO2);
  join(mesh, e2, outE1, segE1);
  from[o] = d;
  from[o1] = a;
  from[o2] = p;
  join(mesh, o1, outE2, segE2);
  join(mesh, o2, outO1, segO1);
}

function join(mesh: HalfEdgeMesh, e: number, out: number, seg: number): void {
  mesh.opposite[e] = out;
  mesh.segment[e] = seg;
  if (out >= 0) mesh.opposite[out] = e;
}

/**
 * Makes every triangle turn left, by flipping the longest edge of those that rounding left flat or inside out.
 *
 * @returns false if some could not be mended
 */
export function mendFlat(mesh: HalfEdgeMesh): boolean {
  for (let round = 0; round < 100; round++) {
    let bad = 0;
    let flipped = 0;
    for (let t = 0; t < mesh.triangleCount; t++) {
      if (turn(mesh, t) > 0) continue;
      bad++;
      const e = longestEdge(mesh, t);
      if (mesh.segment[e] < 0 && mesh.opposite[e] >= 0) {
        flip(mesh, e);
        flipped++;
      }
    }
    if (bad === 0) return true;
    if (flipped === 0) return false;
  }
  return false;
}

function turn(mesh: HalfEdgeMesh, t: number): number {
  const { xy, from } = mesh;
  const a = 2 * from[3 * t];
  const b = 2 * from[3 * t + 1];
  const c = 2 * from[3 * t + 2];
  return orient(xy[a], xy[a + 1], xy[b], xy[b + 1], xy[c], xy[c + 1]);
}

function longestEdge(mesh: HalfEdgeMesh, t: number): number {
  const { xy, from } = mesh;
  let longest = 3 * t;
  let most = -1;
  for (let e = 3 * t; e < 3 * t + 3; e++) {
    const a = 2 * from[e];
    const b = 2 * from[next(e)];
    const square = (xy[a] - xy[b]) ** 2 + (xy[a + 1] - xy[b + 1]) ** 2;
    if (square > most) [most, longest] = [square, e];
  }
  return longest;
}

/** True when the vertex across edge e lies inside the circle of e's triangle, exactly; false for fixed edges. */
export function breaksDelaunay(mesh: HalfEdgeMesh, e: number): boolean {
  const { xy, from } = mesh;
  const o = mesh.opposite[e];
  if (o < 0 || mesh.segment[e] >= 0) return false;
  const a = 2 * from[e];
  const b = 2 * from[next(e)];
  const c = 2 * from[previous(e)];
  const d = 2 * from[previous(o)];
  return inCircle(xy[a], xy[a + 1], xy[b], xy[b + 1], xy[c], xy[c + 1], xy[d], xy[d + 1]) > 0;
}

/** Flips until every free edge is Delaunay. Ends because each flip lowers the lifted surface (Lawson 1977). */
export function flipToDelaunay(mesh: HalfEdgeMesh): void {
  const count = 3 * mesh.triangleCount;
  const stack: number[] = [];
  for (let e = 0; e < count; e++) if (mesh.opposite[e] > e) stack.push(e);
  for (let e = stack.pop(); e !== undefined; e = stack.pop()) {
    if (!breaksDelaunay(mesh, e)) continue;
    const o = mesh.opposite[e];
    flip(mesh, e);
    stack.push(next(e), previous(e), next(o), previous(o));
  }
}
