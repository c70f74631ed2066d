import type { Mesh } from '../../mesher/index.ts';
import { diffusionAt, noiseAlpha, powerAlpha } from '../problem/medium-values.ts';
import type { Coefficient, Problem } from '../problem/problem.ts';
import type { EdgeList } from './edges.ts';
import { edgePoints, edgeWeights } from './quadrature.ts';

/**
 * Weights of the edge-averaged P1 matrix without drift: w_E = Σ over the edge's triangles ½ cot θ_T · k_{T,E}, with
 * k = D^α seen from the triangle's region and averaged harmonically along the edge (exact for the flux in one
 * dimension). On a Delaunay mesh without encroached walls every weight is ≥ 0.
 *
 * @returns one weight per edge of `edges`
 * @throws {SolverError} DIFFUSION_NOT_POSITIVE
 * Source: Xu & Zikatanov 1999 (edge averages); METHODS 4.
 */
export function edgeWeightsOf(mesh: Mesh, problem: Problem, edges: EdgeList): Float64Array {
  const { nodes, triangles, regionSet } = mesh;
  const alpha = noiseAlpha[problem.noise];
  const weight = new Float64Array(edges.count);
  const scale = new Float64Array(edges.count);
  for (let side = 0; side < triangles.length; side++) {
    const t = (side / 3) | 0;
    const r = 2 * triangles[side];
    const p = 2 * triangles[side % 3 === 2 ? side - 2 : side + 1];
    const q = 2 * triangles[side % 3 === 0 ? side + 2 : side - 1];
    const half = 0.5 * cotangent(nodes, r, p, q);
    const diffusion = problem.media[regionSet[t]].diffusion;
    const k =
      diffusion.kind === 'constant'
        ? powerAlpha(diffusionAt(diffusion, nodes[p], nodes[p + 1]), alpha)
        : harmonicMean(diffusion, alpha, nodes[p], nodes[p + 1], nodes[q], nodes[q + 1]);
    const edge = edges.ofSide[side];
    weight[edge] += half * k;
    scale[edge] += (Math.abs(half) + 1) * k;
  }
  clearRounding(weight, scale);
  return weight;
}

/** cot of the angle at r in the triangle r, p, q (indices into `nodes`), 0 where its sign is lost in rounding. */
export function cotangent(nodes: Float64Array, r: number, p: number, q: number): number {
  const ax = nodes[p] - nodes[r];
  const ay = nodes[p + 1] - nodes[r + 1];
  const bx = nodes[q] - nodes[r];
  const by = nodes[q + 1] - nodes[r + 1];
  const dot = ax * bx + ay * by;
  if (Math.abs(dot) <= 4 * Number.EPSILON * (Math.abs(ax * bx) + Math.abs(ay * by))) return 0;
  return dot / (ax * by - ay * bx);
}

/** Corners on one circle give weights that are zero in exact arithmetic: their rounding must not turn a rate negative. */
function clearRounding(weight: Float64Array, scale: Float64Array): void {
  for (let e = 0; e < weight.length; e++) {
    if (weight[e] < 0 && weight[e] > -1e-14 * scale[e]) weight[e] = 0;
  }
}

/** Harmonic mean of D^α from (px, py) to (qx, qy). */
function harmonicMean(
  diffusion: Coefficient,
  alpha: number,
  px: number,
  py: number,
  qx: number,
  qy: number,
): number {
  let sum = 0;
  for (let g = 0; g < edgePoints.length; g++) {
    const s = edgePoints[g];
    const d = diffusionAt(diffusion, px + s * (qx - px), py + s * (qy - py));
    sum += edgeWeights[g] / powerAlpha(d, alpha);
  }
  return 1 / sum;
}
