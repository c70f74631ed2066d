import type { Hooks, Mesh } from '../../mesher/index.ts';
import { pollMask, stopIfAsked } from '../linear/stopping.ts';
import { type DriftAlong, driftNotFinite, type MediumTerms, valueAt } from '../problem/medium-terms.ts';
import type { EdgeList } from './edges.ts';
import { edgePoints, edgeWeights } from './quadrature.ts';

/** β = ∫(b/D)·dx along every edge, from its first to its second node, seen from each of its triangles. */
export interface SideDrift {
  /** Per side of a triangle. */
  readonly beta: Float64Array;
  /** Per side: how far β may be off by rounding and quadrature. */
  readonly slack: Float64Array;
}

/**
 * Integrates the drift along the edges: potential differences as they are, fields by 2 × 5 Gauss points, whose
 * difference to 5 points is kept as their (over-)estimated error.
 *
 * @returns undefined when no medium in use has a drift
 * @throws {SolverError} DRIFT_NOT_FINITE, DIFFUSION_NOT_POSITIVE, SOLVING_STOPPED
 */
export function sideDrift(
  mesh: Mesh,
  terms: readonly MediumTerms[],
  edges: EdgeList,
  hooks: Hooks = {},
): SideDrift | undefined {
  const { nodes, triangles, regionSet } = mesh;
  if (!terms.some((medium) => medium.drift)) return undefined;
  const beta = new Float64Array(triangles.length);
  const slack = new Float64Array(triangles.length);
  const firstSide = new Int32Array(edges.count).fill(-1);
  const out = new Float64Array(4);
  for (let side = 0; side < triangles.length; side++) {
    if ((side & (pollMask >> 3)) === 0) stopIfAsked(hooks);
    const medium = regionSet[(side / 3) | 0];
    const along = terms[medium].drift;
    const edge = edges.ofSide[side];
    const known = firstSide[edge];
    if (known >= 0 && regionSet[(known / 3) | 0] === medium) {
      beta[side] = beta[known];
      slack[side] = slack[known];
      continue;
    }
    firstSide[edge] = side;
    if (!along) continue;
    const p = 2 * edges.first[edge];
    const q = 2 * edges.second[edge];
    integrate(along, nodes[p], nodes[p + 1], nodes[q], nodes[q + 1], out);
    if (!Number.isFinite(out[0])) throw driftNotFinite(nodes[p], nodes[p + 1], out[0]);
    beta[side] = out[0];
    slack[side] = out[1];
  }
  return { beta, slack };
}

/** out[0], out[1] ← β and its slack. */
function integrate(
  along: DriftAlong,
  px: number,
  py: number,
  qx: number,
  qy: number,
  out: Float64Array,
): void {
  if (along.kind === 'potential') {
    const from = valueAt(along.psi, px, py);
    const to = valueAt(along.psi, qx, qy);
    out[0] = to - from;
    out[1] = 16 * Number.EPSILON * (Math.abs(to) + Math.abs(from));
    return;
  }
  const dx = qx - px;
  const dy = qy - py;
  if (along.constant) {
    gauss(along, px, py, dx, dy, out);
    out[1] = 32 * Number.EPSILON * (Math.abs(out[0]) + out[1]);
    return;
  }
  gauss(along, px, py, dx, dy, out);
  const whole = out[0];
  gauss(along, px, py, dx / 2, dy / 2, out);
  const lower = out[0];
  const size = out[1];
  gauss(along, px + dx / 2, py + dy / 2, dx / 2, dy / 2, out);
  out[0] += lower;
  out[1] = Math.abs(whole - out[0]) + 32 * Number.EPSILON * (size + out[1]);
}

/** out[0] ← ∫ field·dx along (dx, dy), out[1] ← the same of absolute values. */
function gauss(
  along: Extract<DriftAlong, { kind: 'field' }>,
  px: number,
  py: number,
  dx: number,
  dy: number,
  out: Float64Array,
): void {
  let sum = 0;
  let size = 0;
  for (let g = 0; g < edgePoints.length; g++) {
    along.at(px + edgePoints[g] * dx, py + edgePoints[g] * dy, point);
    sum += edgeWeights[g] * (point[0] * dx + point[1] * dy);
    size += edgeWeights[g] * (Math.abs(point[0] * dx) + Math.abs(point[1] * dy));
  }
  out[0] = sum;
  out[1] = size;
}

const point = new Float64Array(2);

/**
 * Bernoulli function B(t) = t/(eᵗ − 1), right for every finite t: `expm1` keeps the digits near 0, its overflow to
 * infinity gives the limit 0.
 *
 * Source: Scharfetter & Gummel 1969 (recalled).
 */
export function bernoulli(t: number): number {
  return t === 0 ? 1 : t / Math.expm1(t);
}

/** (δ/2)/sinh(δ/2) = √(B(δ)B(−δ)): the symmetric form of the two rates of an edge. */
export function symmetricBernoulli(delta: number): number {
  return delta === 0 ? 1 : delta / 2 / Math.sinh(delta / 2);
}
