import type { Mesh } from '../../mesher/index.ts';
import type { Problem } from '../problem/problem.ts';
import type { ConsistentSystem } from './consistent-system.ts';
import { discSource, type ElementSource } from './element-sources.ts';
import { sideKind } from './wall-sides.ts';

/**
 * A disc about a starting point, which stands for it exactly: with constant D, no drift and no loss in the disc
 *
 *     u(x₀) = average of u + r²/(8D),   u₂(x₀) = average of u₂ + 2(u(x₀) r²/(8D) − r⁴/(192D²)),   p(x₀) = average of p,
 *
 * for the mean exit time, its second moment and shares. Reflecting walls may run through the disc along rays from x₀ (a
 * point on a wall, or in a corner): the mean over arcs between such rays obeys the same equation.
 *
 * Proof: u + |x − x₀|²/(4D) is harmonic; the mean over arcs of a harmonic function that is even at the rays is its value
 * at the tip. The second moment: with ρ the density and D∇²g = ρ − δ, ∫g s² = ∫ρs⁴/(16D).
 */
export interface DiscStart {
  readonly source: ElementSource;
  readonly radius: number;
  /** r²/(8D): to be added to the mean. */
  readonly shift: number;
}

/** Lines and places nearer than this, relative to the size of the mesh, are the same. */
const sameness = 1e-12;

/**
 * The largest such disc about a point.
 *
 * @returns undefined where there is none: at a place on an absorbing, partly absorbing or inner wall or on a border
 *   between media, or where D varies or particles drift or are lost
 * Source: mean value property; METHODS 6.
 */
export function discStart(base: ConsistentSystem, x: number, y: number): DiscStart | undefined {
  const { system, problem, geometry, sides } = base;
  const { mesh } = system;
  const triangle = triangleAt(mesh, x, y);
  if (triangle < 0) return undefined;
  const d = plainDiffusion(problem, mesh.regionSet[triangle]);
  if (d === undefined) return undefined;
  const size = sizeOf(mesh);
  let radius = Number.POSITIVE_INFINITY;
  for (let side = 0; side < sides.kind.length; side++) {
    const kind = sides.kind[side];
    const t = (side / 3) | 0;
    if (kind === sideKind.inside) {
      const other = sides.across[side];
      if (other < side) continue;
      const beyond = mesh.regionSet[(other / 3) | 0];
      if (beyond === mesh.regionSet[t]) continue;
      const [dHere, dBeyond] = [plainDiffusion(problem, mesh.regionSet[t]), plainDiffusion(problem, beyond)];
      if (dHere !== undefined && dHere === dBeyond) continue;
    }
    const from = mesh.triangles[side % 3 === 2 ? side - 2 : side + 1];
    const to = mesh.triangles[side % 3 === 0 ? side + 2 : side - 1];
    const { distance, line } = distances(mesh.nodes, from, to, x, y);
    if (kind === sideKind.reflecting && line <= sameness * size) {
      if (distance <= sameness * size && isInner(mesh, from, to)) return undefined;
      continue;
    }
    radius = Math.min(radius, distance);
  }
  if (!(radius > 1e3 * sameness * size && radius < Number.POSITIVE_INFINITY)) return undefined;
  return { source: discSource(mesh, geometry, x, y, radius), radius, shift: (radius * radius) / (8 * d) };
}

/** D of a medium in which nothing but constant diffusion happens. */
function plainDiffusion({ media, depth }: Problem, regionSet: number): number | undefined {
  const { diffusion, tensor, drift, loss, floor } = media[regionSet];
  if (tensor || drift || loss || floor || (depth && depth.kind !== 'constant')) return undefined;
  return diffusion.kind === 'constant' ? diffusion.value : undefined;
}

/** A triangle that holds the place, its border included; −1 when there is none. */
function triangleAt({ nodes, triangles }: Mesh, x: number, y: number): number {
  for (let t = 0; t < triangles.length; t += 3) {
    const a = 2 * triangles[t];
    const b = 2 * triangles[t + 1];
    const c = 2 * triangles[t + 2];
    const wa = (nodes[b] - x) * (nodes[c + 1] - y) - (nodes[b + 1] - y) * (nodes[c] - x);
    const wb = (nodes[c] - x) * (nodes[a + 1] - y) - (nodes[c + 1] - y) * (nodes[a] - x);
    const wc = (nodes[a] - x) * (nodes[b + 1] - y) - (nodes[a + 1] - y) * (nodes[b] - x);
    if (Math.min(wa, wb, wc) >= -sameness * (wa + wb + wc)) return t / 3;
  }
  return -1;
}

/** From a place to a segment, and to the line through it. */
function distances(nodes: Float64Array, from: number, to: number, x: number, y: number) {
  const ax = nodes[2 * from] - x;
  const ay = nodes[2 * from + 1] - y;
  const dx = nodes[2 * to] - x - ax;
  const dy = nodes[2 * to + 1] - y - ay;
  const square = dx * dx + dy * dy;
  const along = Math.min(1, Math.max(0, -(ax * dx + ay * dy) / square));
  return {
    distance: Math.hypot(ax + along * dx, ay + along * dy),
    line: Math.abs(ax * dy - ay * dx) / Math.sqrt(square),
  };
}

function isInner({ segments, segmentTwin }: Mesh, from: number, to: number): boolean {
  for (let s = 0; s < segmentTwin.length; s++) {
    if (segments[2 * s] === from && segments[2 * s + 1] === to) return segmentTwin[s] >= 0;
  }
  return false;
}

function sizeOf({ nodes }: Mesh): number {
  let size = 0;
  for (let i = 2; i < nodes.length; i += 2) {
    size = Math.max(size, Math.abs(nodes[i] - nodes[0]), Math.abs(nodes[i + 1] - nodes[1]));
  }
  return size;
}
