import type { Hooks, Mesh, Point } from '../../mesher/index.ts';
import { pollMask, stopIfAsked } from '../linear/stopping.ts';
import type { SideDrift } from './drift.ts';
import type { EdgeList } from './edges.ts';

/** A closed way round which the drift does work: Σβ ≠ 0. */
export interface Cycle {
  /** Round one triangle, across a border between two media, or round a hole or through a permeable wall. */
  readonly around: 'triangle' | 'border' | 'hole';
  readonly at: Point;
  /** Σβ, in units of kT. */
  readonly work: number;
}

/** ψ with b/D = ∇ψ on the nodes, or the cycle that shows there is none. */
export type Reversibility =
  | { readonly reversible: true; readonly psi: Float64Array; readonly range: number }
  | { readonly reversible: false; readonly cycle: Cycle };

/**
 * Tests Kolmogorov's cycle criterion on the edges: β must agree on both sides of each edge and sum to zero round every
 * triangle and every hole, to rounding and quadrature. Then ψ is summed along a tree.
 *
 * @param bridges pairs of nodes joined by permeable walls, β = 0
 * @returns ψ per node with largest value 0 in every piece, and its range over one piece
 * Source: Kolmogorov 1936 (recalled); METHODS 1.
 */
export function testReversibility(
  mesh: Mesh,
  edges: EdgeList,
  drift: SideDrift,
  bridges: Int32Array,
  hooks: Hooks = {},
): Reversibility {
  const { beta, slack } = drift;
  const { triangles } = mesh;
  const sideOf = new Int32Array(edges.count).fill(-1);
  for (let side = 0; side < triangles.length; side++) {
    if ((side & pollMask) === 0) stopIfAsked(hooks);
    const edge = edges.ofSide[side];
    const known = sideOf[edge];
    if (known < 0) sideOf[edge] = side;
    else if (Math.abs(beta[side] - beta[known]) > slack[side] + slack[known]) {
      return failed(
        'border',
        beta[side] - beta[known],
        middle(mesh, [edges.first[edge], edges.second[edge]]),
      );
    }
  }
  for (let t = 0; t < triangles.length; t += 3) {
    let sum = 0;
    let allowed = 0;
    for (let side = t; side < t + 3; side++) {
      const from = triangles[side === t + 2 ? t : side + 1];
      sum += edges.first[edges.ofSide[side]] === from ? beta[side] : -beta[side];
      allowed += slack[side];
    }
    if (Math.abs(sum) > allowed) {
      return failed('triangle', sum, middle(mesh, [triangles[t], triangles[t + 1], triangles[t + 2]]));
    }
  }
  const edgeBeta = new Float64Array(edges.count);
  const edgeSlack = new Float64Array(edges.count);
  for (let e = 0; e < edges.count; e++) {
    edgeBeta[e] = beta[sideOf[e]];
    edgeSlack[e] = slack[sideOf[e]];
  }
  return sumAlongTree(mesh, edges, edgeBeta, edgeSlack, bridges, hooks);
}

function failed(around: Cycle['around'], work: number, at: Point): Reversibility {
  return { reversible: false, cycle: { around, at, work } };
}

function middle(mesh: Mesh, of: readonly number[]): Point {
  let x = 0;
  let y = 0;
  for (const node of of) {
    x += mesh.nodes[2 * node] / of.length;
    y += mesh.nodes[2 * node + 1] / of.length;
  }
  return [x, y];
}

function sumAlongTree(
  mesh: Mesh,
  edges: EdgeList,
  edgeBeta: Float64Array,
  edgeSlack: Float64Array,
  bridges: Int32Array,
  hooks: Hooks,
): Reversibility {
  const nodeCount = mesh.nodes.length / 2;
  const links = edges.count + bridges.length / 2;
  const end = (link: number, which: 0 | 1): number =>
    link < edges.count
      ? which === 0
        ? edges.first[link]
        : edges.second[link]
      : bridges[2 * (link - edges.count) + which];
  const start = new Int32Array(nodeCount + 1);
  for (let link = 0; link < links; link++) {
    start[end(link, 0) + 1]++;
    start[end(link, 1) + 1]++;
  }
  for (let node = 0; node < nodeCount; node++) start[node + 1] += start[node];
  const incident = new Int32Array(2 * links);
  const next = start.slice(0, nodeCount);
  for (let link = 0; link < links; link++) {
    incident[next[end(link, 0)]++] = link;
    incident[next[end(link, 1)]++] = link;
  }
  const psi = new Float64Array(nodeCount);
  const error = new Float64Array(nodeCount);
  const reached = new Uint8Array(nodeCount);
  const queue = new Int32Array(nodeCount);
  let range = 0;
  for (let root = 0; root < nodeCount; root++) {
    if (reached[root]) continue;
    reached[root] = 1;
    queue[0] = root;
    let length = 1;
    for (let head = 0; head < length; head++) {
      if ((head & pollMask) === 0) stopIfAsked(hooks);
      const node = queue[head];
      for (let p = start[node]; p < start[node + 1]; p++) {
        const link = incident[p];
        const forth = end(link, 0) === node;
        const other = end(link, forth ? 1 : 0);
        const step = link < edges.count ? (forth ? edgeBeta[link] : -edgeBeta[link]) : 0;
        const value = psi[node] + step;
        const allowed =
          error[node] + (link < edges.count ? edgeSlack[link] : 0) + 8 * Number.EPSILON * Math.abs(value);
        if (!reached[other]) {
          reached[other] = 1;
          psi[other] = value;
          error[other] = allowed;
          queue[length++] = other;
        } else if (Math.abs(value - psi[other]) > allowed + error[other]) {
          return failed('hole', value - psi[other], middle(mesh, [node, other]));
        }
      }
    }
    range = Math.max(range, shiftToZero(psi, queue, length));
  }
  return { reversible: true, psi, range };
}

/** Subtracts the largest ψ of a piece from it; returns the range. */
function shiftToZero(psi: Float64Array, piece: Int32Array, length: number): number {
  let high = Number.NEGATIVE_INFINITY;
  let low = Number.POSITIVE_INFINITY;
  for (let q = 0; q < length; q++) {
    high = Math.max(high, psi[piece[q]]);
    low = Math.min(low, psi[piece[q]]);
  }
  for (let q = 0; q < length; q++) psi[piece[q]] -= high;
  return high - low;
}
