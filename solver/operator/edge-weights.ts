import type { Hooks, Mesh } from '../../mesher/index.ts';
import { pollMask, stopIfAsked } from '../linear/stopping.ts';
import { type MediumTerms, valueAt } from '../problem/medium-terms.ts';
import type { Coefficient, Tensor } from '../problem/problem.ts';
import { tensorAt } from '../problem/tensor-terms.ts';
import type { EdgeList } from './edges.ts';
import { edgePoints, edgeWeights, trianglePoints, triangleWeights } from './quadrature.ts';

/** Weights of the edge-averaged matrix before drift. */
export interface EdgeWeights {
  /** Per edge: Σ over its triangles. */
  readonly ofEdge: Float64Array;
  /** Per side of a triangle: its part. */
  readonly ofSide: Float64Array;
}

/**
 * Weights of the edge-averaged P1 matrix without drift: w_E = Σ over the edge's triangles ½ cot θ_T · k_{T,E}, with
 * k = h D^α seen from the triangle's region and averaged harmonically along the edge (exact for the flux in one
 * dimension); for a tensor −∫∇φ_i·hD∇φ_j. On a Delaunay mesh (in the metric D⁻¹) without encroached walls all are ≥ 0.
 *
 * @throws {SolverError} DIFFUSION_NOT_POSITIVE, DEPTH_NOT_POSITIVE, SOLVING_STOPPED
 * Source: Xu & Zikatanov 1999 (edge averages); METHODS 4.
 */
export function edgeWeightsOf(
  mesh: Mesh,
  terms: readonly MediumTerms[],
  edges: EdgeList,
  hooks: Hooks = {},
): EdgeWeights {
  const { nodes, triangles, regionSet } = mesh;
  const ofEdge = new Float64Array(edges.count);
  const ofSide = new Float64Array(triangles.length);
  const scale = new Float64Array(edges.count);
  // Both sides of an edge within one medium share its mean.
  const mean = new Float64Array(edges.count);
  const meanOf = new Int32Array(edges.count).fill(-1);
  for (let side = 0; side < triangles.length; side++) {
    if ((side & pollMask) === 0) stopIfAsked(hooks);
    const t = (side / 3) | 0;
    const medium = regionSet[t];
    const { conductivity, tensor } = terms[medium];
    if (tensor) {
      if (side % 3 === 0) tensorSides(ofSide, nodes, triangles, t, tensor);
      continue;
    }
    const r = 2 * triangles[side];
    const p = 2 * triangles[side % 3 === 2 ? side - 2 : side + 1];
    const q = 2 * triangles[side % 3 === 0 ? side + 2 : side - 1];
    const edge = edges.ofSide[side];
    let k = 0;
    if (conductivity.kind === 'constant') k = conductivity.value;
    else if (meanOf[edge] === medium) k = mean[edge];
    else {
      k = harmonicMean(conductivity, nodes[p], nodes[p + 1], nodes[q], nodes[q + 1]);
      mean[edge] = k;
      meanOf[edge] = medium;
    }
    ofSide[side] = 0.5 * cotangent(nodes, r, p, q) * k;
    scale[edge] += k;
  }
  for (let side = 0; side < triangles.length; side++) {
    ofEdge[edges.ofSide[side]] += ofSide[side];
    scale[edges.ofSide[side]] += Math.abs(ofSide[side]);
  }
  clearRounding(ofEdge, scale);
  return { ofEdge, ofSide };
}

/** cot of the angle at r in the triangle r, p, q (indices into `nodes`), 0 where its sign is lost in rounding. */
function cotangent(nodes: Float64Array, r: number, p: number, q: number): number {
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

/** Harmonic mean of k from (px, py) to (qx, qy). */
function harmonicMean(k: Coefficient, px: number, py: number, qx: number, qy: number): number {
  let sum = 0;
  for (let g = 0; g < edgePoints.length; g++) {
    const s = edgePoints[g];
    sum += edgeWeights[g] / valueAt(k, px + s * (qx - px), py + s * (qy - py));
  }
  return 1 / sum;
}

/** The three weights −∫∇φ_i·hD∇φ_j of triangle t, each on the side opposite to the third vertex. */
function tensorSides(
  ofSide: Float64Array,
  nodes: Float64Array,
  triangles: Int32Array,
  t: number,
  tensor: Tensor,
): void {
  const a = 2 * triangles[3 * t];
  const b = 2 * triangles[3 * t + 1];
  const c = 2 * triangles[3 * t + 2];
  const points = tensor.kind === 'constant' ? 1 : triangleWeights.length;
  let xx = 0;
  let xy = 0;
  let yy = 0;
  for (let g = 0; g < points; g++) {
    const wa = trianglePoints[3 * g];
    const wb = trianglePoints[3 * g + 1];
    const wc = trianglePoints[3 * g + 2];
    const x = wa * nodes[a] + wb * nodes[b] + wc * nodes[c];
    const y = wa * nodes[a + 1] + wb * nodes[b + 1] + wc * nodes[c + 1];
    const d = tensorAt(tensor, x, y);
    const weight = points === 1 ? 1 : triangleWeights[g];
    xx += weight * d[0];
    xy += weight * d[1];
    yy += weight * d[2];
  }
  const double =
    (nodes[b] - nodes[a]) * (nodes[c + 1] - nodes[a + 1]) -
    (nodes[b + 1] - nodes[a + 1]) * (nodes[c] - nodes[a]);
  for (let v = 0; v < 3; v++) {
    const r = v === 0 ? a : v === 1 ? b : c;
    const p = v === 0 ? b : v === 1 ? c : a;
    const q = v === 0 ? c : v === 1 ? a : b;
    // ∇φ of a vertex is its opposite side turned by a right angle, over twice the area.
    const ix = nodes[q + 1] - nodes[r + 1];
    const iy = nodes[r] - nodes[q];
    const jx = nodes[r + 1] - nodes[p + 1];
    const jy = nodes[p] - nodes[r];
    ofSide[3 * t + v] = -(ix * (xx * jx + xy * jy) + iy * (xy * jx + yy * jy)) / (2 * double);
  }
}
