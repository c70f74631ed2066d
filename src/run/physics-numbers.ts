import type { Mesh } from '../../mesher/index.ts';
import type { Coefficient, Drift, Medium, Problem } from '../../solver/index.ts';

/** Numbers that say what rules a problem, most without a dimension; the largest anywhere, absent where nothing of the kind is. */
export interface PhysicsNumbers {
  /** L: longer side of the box around the compartment, in the length unit. */
  readonly longestExtent: number;
  /** |b|L/D, the Péclet number: drift against diffusion. With a tensor |D⁻¹b|L. */
  readonly peclet?: number;
  /** κL/D of partly absorbing walls: catching against diffusion. With a tensor D across the wall, n·Dn. */
  readonly kappaLOverD?: number;
  /** cL²/D: loss against diffusion. With a tensor its smaller principal value. */
  readonly cL2OverD?: number;
  /** Largest h²/D along catching wall: earlier times are not resolved by the mesh (METHODS 5). In the time unit. */
  readonly lowestTime?: number;
}

/** Entries xx, xy, yy of D at a place; D on the diagonal where it is scalar. */
type Entries = readonly [xx: number, xy: number, yy: number];

/**
 * Finds the numbers on a mesh: coefficients in the middle of every triangle, κ in the middle of every wall segment.
 *
 * @param problem one that `assemble` has accepted on this mesh
 * @throws {SolverError} what its coefficients throw
 */
export function physicsNumbers(mesh: Mesh, problem: Problem): PhysicsNumbers {
  const extent = longestExtent(mesh.nodes);
  const { media } = problem;
  const loss = media.some((medium) => medium.loss) ? largestLoss(mesh, media) : undefined;
  const drift = media.some((medium) => medium.drift) ? largestDrift(mesh, media) : undefined;
  const { kappa, lowestTime } = alongWalls(mesh, problem);
  return {
    longestExtent: extent,
    ...(drift === undefined ? {} : { peclet: extent * drift }),
    ...(kappa === undefined ? {} : { kappaLOverD: extent * kappa }),
    ...(loss === undefined ? {} : { cL2OverD: extent * extent * loss }),
    ...(lowestTime === undefined ? {} : { lowestTime }),
  };
}

function longestExtent(nodes: Float64Array): number {
  const low = [Number.POSITIVE_INFINITY, Number.POSITIVE_INFINITY] as [number, number];
  const high = [Number.NEGATIVE_INFINITY, Number.NEGATIVE_INFINITY] as [number, number];
  for (let i = 0; i < nodes.length; i++) {
    const axis = (i % 2) as 0 | 1;
    low[axis] = Math.min(low[axis], nodes[i] ?? 0);
    high[axis] = Math.max(high[axis], nodes[i] ?? 0);
  }
  return Math.max(high[0] - low[0], high[1] - low[1]);
}

/** Largest |D⁻¹b| in the middle of a triangle. */
function largestDrift(mesh: Mesh, media: readonly Medium[]): number {
  let largest = 0;
  for (let t = 0; t < mesh.regionSet.length; t++) {
    const medium = media[mesh.regionSet[t] ?? 0];
    if (!medium?.drift) continue;
    const corners = cornersOf(mesh, t);
    const [bx, by] =
      medium.drift.kind === 'potential'
        ? slope(medium.drift.value, corners)
        : overD(medium, medium.drift, ...middleOf(corners));
    largest = Math.max(largest, Math.hypot(bx, by));
  }
  return largest;
}

/** Largest c ÷ D in the middle of a triangle. */
function largestLoss(mesh: Mesh, media: readonly Medium[]): number {
  let largest = 0;
  for (let t = 0; t < mesh.regionSet.length; t++) {
    const medium = media[mesh.regionSet[t] ?? 0];
    if (!medium?.loss) continue;
    const [x, y] = middleOf(cornersOf(mesh, t));
    const [xx, xy, yy] = entriesAt(medium, x, y);
    const smaller = (xx + yy) / 2 - Math.hypot((xx - yy) / 2, xy);
    largest = Math.max(largest, valueAt(medium.loss, x, y) / smaller);
  }
  return largest;
}

/** Largest κ ÷ n·Dn of partly absorbing segments and length² ÷ n·Dn of all that catch; undefined without one. */
function alongWalls(mesh: Mesh, { walls, media }: Problem): { kappa?: number; lowestTime?: number } {
  const { segments, segmentTag, triangles, regionSet } = mesh;
  const nodeCount = mesh.nodes.length / 2;
  const kappaOf = new Map<number, number>();
  for (let s = 0; s < segmentTag.length; s++) {
    const wall = walls.get(segmentTag[s] ?? -1);
    if (wall?.kind !== 'partlyAbsorbing' && wall?.kind !== 'absorbing') continue;
    const kappa = wall.kind === 'absorbing' ? Number.NaN : wall.kappa;
    kappaOf.set((segments[2 * s] ?? 0) * nodeCount + (segments[2 * s + 1] ?? 0), kappa);
  }
  const largest: { kappa?: number; lowestTime?: number } = {};
  for (let side = 0; side < triangles.length && kappaOf.size > 0; side++) {
    const from = triangles[side] ?? 0;
    const to = triangles[side % 3 === 2 ? side - 2 : side + 1] ?? 0;
    const kappa = kappaOf.get(from * nodeCount + to) ?? kappaOf.get(to * nodeCount + from);
    const medium = media[regionSet[Math.floor(side / 3)] ?? 0];
    if (kappa === undefined || !medium) continue;
    const a = nodeAt(mesh, from);
    const b = nodeAt(mesh, to);
    const [xx, xy, yy] = entriesAt(medium, (a[0] + b[0]) / 2, (a[1] + b[1]) / 2);
    const [nx, ny] = [b[1] - a[1], a[0] - b[0]];
    const square = nx * nx + ny * ny;
    const across = (xx * nx * nx + 2 * xy * nx * ny + yy * ny * ny) / square;
    largest.lowestTime = Math.max(largest.lowestTime ?? 0, square / across);
    if (!Number.isNaN(kappa)) largest.kappa = Math.max(largest.kappa ?? 0, kappa / across);
  }
  return largest;
}

type Place = readonly [x: number, y: number];
type Corners = readonly [Place, Place, Place];

function nodeAt({ nodes }: Mesh, node: number): Place {
  return [nodes[2 * node] ?? 0, nodes[2 * node + 1] ?? 0];
}

function cornersOf(mesh: Mesh, triangle: number): Corners {
  const at = (v: number): Place => nodeAt(mesh, mesh.triangles[3 * triangle + v] ?? 0);
  return [at(0), at(1), at(2)];
}

function middleOf([a, b, c]: Corners): Place {
  return [(a[0] + b[0] + c[0]) / 3, (a[1] + b[1] + c[1]) / 3];
}

/** ∇V of the plane through the values at the corners: |∇V| = |b|/D. */
function slope(potential: Coefficient, [a, b, c]: Corners): Place {
  const [p, q, r] = [a, b, c].map(([x, y]) => valueAt(potential, x, y)) as [number, number, number];
  const [ux, uy, vx, vy] = [b[0] - a[0], b[1] - a[1], c[0] - a[0], c[1] - a[1]];
  const area = ux * vy - uy * vx;
  return [((q - p) * vy - (r - p) * uy) / area, ((r - p) * ux - (q - p) * vx) / area];
}

/** D⁻¹b. */
function overD(medium: Medium, drift: Extract<Drift, { kind: 'components' }>, x: number, y: number): Place {
  const [xx, xy, yy] = entriesAt(medium, x, y);
  const [bx, by] = [valueAt(drift.x, x, y), valueAt(drift.y, x, y)];
  const det = xx * yy - xy * xy;
  return [(yy * bx - xy * by) / det, (xx * by - xy * bx) / det];
}

/**
 * D⁻¹b of a medium at a place, zero without drift; a potential's slope by central differences.
 *
 * @param step for the differences, in the length unit
 */
export function driftOverD(medium: Medium, [x, y]: Place, step: number): Place {
  const { drift } = medium;
  if (!drift) return [0, 0];
  if (drift.kind === 'components') return overD(medium, drift, x, y);
  const v = (dx: number, dy: number): number => valueAt(drift.value, x + dx, y + dy);
  return [(v(-step, 0) - v(step, 0)) / (2 * step), (v(0, -step) - v(0, step)) / (2 * step)];
}

function entriesAt({ tensor, diffusion }: Medium, x: number, y: number): Entries {
  if (tensor) return tensor.kind === 'constant' ? tensor.value : tensor.at(x, y);
  const d = valueAt(diffusion, x, y);
  return [d, 0, d];
}

function valueAt(c: Coefficient, x: number, y: number): number {
  return c.kind === 'constant' ? c.value : c.at(x, y);
}
