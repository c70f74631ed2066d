import { bernoulli, type SideDrift, symmetricBernoulli } from './drift.ts';
import type { EdgeWeights } from './edge-weights.ts';
import type { EdgeList } from './edges.ts';
import type { Bridges } from './permeable-bridges.ts';

/** Pairs of nodes a particle jumps between, edges of the mesh first, then bridges through permeable walls. */
export interface Links {
  readonly first: Int32Array;
  readonly second: Int32Array;
  /** Rate from first to second, in the scaling of the system. */
  readonly forth: Float64Array;
  readonly back: Float64Array;
}

/**
 * Rates scaled by e^ψ of their row: symmetric, w e^((ψ_i+ψ_j)/2) (δ/2)/sinh(δ/2) with δ = ψ_j − ψ_i.
 *
 * @param psi per node, ≤ 0; undefined without drift
 */
export function symmetricLinks(
  edges: EdgeList,
  weights: EdgeWeights,
  bridges: Bridges,
  psi: Float64Array | undefined,
): Links {
  const links = allPairs(edges, bridges);
  const { first, second, forth } = links;
  forth.set(weights.ofEdge);
  forth.set(bridges.rate, edges.count);
  if (psi) {
    for (let l = 0; l < forth.length; l++) {
      const a = psi[first[l]];
      const b = psi[second[l]];
      forth[l] *= Math.exp((a + b) / 2) * symmetricBernoulli(b - a);
    }
  }
  return { ...links, back: forth };
}

/** Plain rates, from i to j: Σ over the edge's triangles w B(−β_ij). Source: Xu & Zikatanov 1999; METHODS 4. */
export function plainLinks(edges: EdgeList, weights: EdgeWeights, bridges: Bridges, drift: SideDrift): Links {
  const links = allPairs(edges, bridges);
  const { forth } = links;
  const back = new Float64Array(forth.length);
  for (let side = 0; side < weights.ofSide.length; side++) {
    const edge = edges.ofSide[side];
    const w = weights.ofSide[side];
    forth[edge] += w * bernoulli(-drift.beta[side]);
    back[edge] += w * bernoulli(drift.beta[side]);
  }
  for (let e = 0; e < edges.count; e++) {
    if (weights.ofEdge[e] !== 0) continue; // rounding was cleared there
    forth[e] = 0;
    back[e] = 0;
  }
  forth.set(bridges.rate, edges.count);
  back.set(bridges.rate, edges.count);
  return { ...links, back };
}

function allPairs(edges: EdgeList, bridges: Bridges): Omit<Links, 'back'> {
  const count = edges.count + bridges.rate.length;
  const first = new Int32Array(count);
  const second = new Int32Array(count);
  first.set(edges.first);
  second.set(edges.second);
  for (let b = 0; b < bridges.rate.length; b++) {
    first[edges.count + b] = bridges.pairs[2 * b];
    second[edges.count + b] = bridges.pairs[2 * b + 1];
  }
  return { first, second, forth: new Float64Array(count) };
}
