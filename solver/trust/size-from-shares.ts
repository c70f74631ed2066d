import type { Mesh } from '../../mesher/index.ts';
import { triangleArea } from '../operator/lumped-integral.ts';

/** What the next mesh should be like. */
export interface NextSizes {
  /** Edge length wanted at each node, in the length unit. */
  readonly atNode: Float64Array;
  /** Triangles it is expected to have. */
  readonly triangles: number;
}

/** The mesher's triangles are smaller than equilateral ones of the size asked for; mean edge ÷ size on even domains. */
const edgeOfSize = 0.68;

/** No edge is asked to shrink or grow by more than this in one round: far ahead the shares are no guide. */
const largestStep = 16;

/**
 * Sizes that bring the sum of the shares to a goal with the fewest triangles. A share falls like h⁴ (norms of both
 * residuals like h², area included), so equal shares e are best: h_new = h (e/share)^¼, with e from Σ√share · √e = goal.
 *
 * @param shares per triangle, ≥ 0; their sum is the width of the bracket
 * @param goal what the sum is to become
 * @param growth largest change of the size per distance
 * @param mostTriangles the sizes are enlarged together to keep to it
 * Source: equidistribution, e.g. Babuška & Rheinboldt 1978 (recalled).
 */
export function sizesFromShares(
  mesh: Mesh,
  shares: Float64Array,
  goal: number,
  growth: number,
  mostTriangles: number,
): NextSizes {
  const { nodes, triangles } = mesh;
  let roots = 0;
  for (let t = 0; t < shares.length; t++) roots += Math.sqrt(shares[t]);
  // √e; more triangles than allowed would need Σ√share/√e of them.
  const root = Math.max(goal / roots, roots / mostTriangles);
  const atNode = new Float64Array(nodes.length / 2).fill(Number.POSITIVE_INFINITY);
  let expected = 0;
  for (let t = 0; t < shares.length; t++) {
    const edge = Math.sqrt((4 / Math.sqrt(3)) * triangleArea(nodes, triangles, t));
    const wanted = Math.sqrt(root / Math.sqrt(shares[t]));
    const step = Math.min(largestStep, Math.max(1 / largestStep, wanted));
    expected += 1 / (step * step);
    for (let v = 0; v < 3; v++) {
      const node = triangles[3 * t + v];
      atNode[node] = Math.min(atNode[node], (edge * step) / edgeOfSize);
    }
  }
  limitGrowth(mesh, atNode, growth);
  return { atNode, triangles: expected };
}

/** Lowers sizes until none exceeds a neighbour's by more than growth × distance. */
function limitGrowth({ nodes, triangles }: Mesh, size: Float64Array, growth: number): void {
  for (let changed = true; changed; ) {
    changed = false;
    for (let q = 0; q < triangles.length; q++) {
      const a = triangles[q];
      const b = triangles[q % 3 === 2 ? q - 2 : q + 1];
      const step = growth * Math.hypot(nodes[2 * a] - nodes[2 * b], nodes[2 * a + 1] - nodes[2 * b + 1]);
      if (size[a] > (size[b] + step) * (1 + 1e-12)) {
        size[a] = size[b] + step;
        changed = true;
      } else if (size[b] > (size[a] + step) * (1 + 1e-12)) {
        size[b] = size[a] + step;
        changed = true;
      }
    }
  }
}
