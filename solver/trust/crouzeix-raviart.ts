import type { ConsistentSystem } from './consistent-system.ts';
import { perExchange, sideKind } from './wall-sides.ts';

/**
 * 1/8 + j₁,₁⁻², j₁,₁ = 3.8317… the first zero of the Bessel function J₁: ‖v − Iv‖ ≤ √this · h‖∇(v − Iv)‖ on a triangle
 * for the interpolation by means over sides.
 *
 * Source: Carstensen & Gedicke 2014, theorem 2.1 (recalled).
 */
const interpolation = 1 / 8 + 3.8317059702075125 ** -2;

/** The pencil K_CR − λM_CR: one unknown per side that is not absorbing, M_CR diagonal. */
export interface CrouzeixRaviart {
  readonly size: number;
  readonly first: Int32Array;
  readonly second: Int32Array;
  /** Entry of K_CR per pair. */
  readonly value: Float64Array;
  readonly diagonal: Float64Array;
  readonly mass: Float64Array;
  /** Midpoints of the sides, x and y. */
  readonly middle: Float64Array;
  /** Means over sides of a P1 field. */
  readonly interpolate: (field: Float64Array) => Float64Array;
  /** λ₁ ≥ this, when no eigenvalue of the pencil lies below `rate`. */
  readonly lowerBound: (rate: number) => number;
}

/**
 * Assembles the pencil with k̂, ĉ, κ̂ and P̂ replaced by their least and m̂ by its largest value in each triangle or on each
 * wall segment, which lowers λ₁.
 *
 * Lower bound. Let u be the first eigenfunction with ∫m̂u² = 1, I its interpolation, δ = ‖k̂^½∇(u − Iu)‖, H² = max h²m̂/k̂.
 * ∇Iu is the mean of ∇u, so ‖k̂^½∇Iu‖² = ‖k̂^½∇u‖² − δ²; walls: a mean squared is at most the mean of the square. Loss:
 * ‖ĉ^½u‖² ≥ (1 − s)‖ĉ^½Iu‖² − (1/s − 1)CJ²δ², J² = max h²ĉ/k̂, for any 0 < s < 1. With b = 1 − (1/s − 1)CJ² and loss
 * taken (1 − s) times: λ_CR(1 − √C Hδ)² ≤ λ₁ − bδ², whence λ₁ ≥ λ_CR/(1 + C H²λ_CR/b).
 *
 * Source: Carstensen & Gedicke 2014; the term with loss is ours.
 */
export function crouzeixRaviart(base: ConsistentSystem): CrouzeixRaviart {
  const { geometry, coefficients, sides, system } = base;
  const { area, diameter, count } = geometry;
  const { leastK, leastLoss, mostMass } = coefficients;
  let h2 = 0;
  let j2 = 0;
  for (let t = 0; t < count; t++) {
    const square = (diameter[t] * diameter[t]) / leastK[t];
    h2 = Math.max(h2, square * mostMass[t]);
    if (leastLoss) j2 = Math.max(j2, square * leastLoss[t]);
  }
  const part = Math.min(0.5, 2 * interpolation * j2);
  const b = part > 0 ? 1 - (1 / part - 1) * interpolation * j2 : 1;
  const { unknown, size } = numberSides(base);
  const pairs = { first: [] as number[], second: [] as number[], value: [] as number[] };
  const diagonal = new Float64Array(size);
  const mass = new Float64Array(size);
  const middle = new Float64Array(2 * size);
  const { nodes, triangles } = system.mesh;
  for (let side = 0; side < triangles.length; side++) {
    const i = unknown[side];
    if (i < 0) continue;
    const t = (side / 3) | 0;
    const next = side % 3 === 2 ? side - 2 : side + 1;
    const last = side % 3 === 0 ? side + 2 : side - 1;
    diagonal[i] += stiffness(base, t, side, side);
    if (leastLoss) diagonal[i] += ((1 - part) * leastLoss[t] * area[t]) / 3;
    mass[i] += (mostMass[t] * area[t]) / 3;
    middle[2 * i] = (nodes[2 * triangles[next]] + nodes[2 * triangles[last]]) / 2;
    middle[2 * i + 1] = (nodes[2 * triangles[next] + 1] + nodes[2 * triangles[last] + 1]) / 2;
    const j = unknown[next];
    if (j < 0) continue;
    pairs.first.push(i);
    pairs.second.push(j);
    pairs.value.push(stiffness(base, t, side, next));
  }
  const { exchanges } = sides;
  for (let w = 0; w < exchanges.count; w++) {
    const rate = exchanges.rate.subarray(perExchange * w, perExchange * (w + 1));
    const least = exchanges.length[w] * Math.min(...rate);
    const i = unknown[exchanges.side[w]];
    diagonal[i] += least;
    if (exchanges.behind[w] < 0) continue;
    const j = unknown[exchanges.behind[w]];
    diagonal[j] += least;
    pairs.first.push(i);
    pairs.second.push(j);
    pairs.value.push(-least);
  }
  return {
    ...{ size, diagonal, mass, middle, value: Float64Array.from(pairs.value) },
    ...{ first: Int32Array.from(pairs.first), second: Int32Array.from(pairs.second) },
    interpolate: (field) => {
      const means = new Float64Array(size);
      for (let side = 0; side < triangles.length; side++) {
        if (unknown[side] < 0) continue;
        const next = side % 3 === 2 ? side - 2 : side + 1;
        const last = side % 3 === 0 ? side + 2 : side - 1;
        means[unknown[side]] = (field[triangles[next]] + field[triangles[last]]) / 2;
      }
      return means;
    },
    lowerBound: (rate) => (b > 0 ? rate / (1 + (interpolation * h2 * rate) / b) : 0),
  };
}

/** ∫k̂∇ψ_p·∇ψ_q of two sides of triangle t: 4 times that of the vertices opposite to them. */
function stiffness({ geometry, coefficients }: ConsistentSystem, t: number, p: number, q: number): number {
  const { area, gradX, gradY } = geometry;
  const { step, leastK, meanXx, meanXy, meanYy } = coefficients;
  const xx = step ? leastK[t] : meanXx[t];
  const xy = step ? 0 : meanXy[t];
  const yy = step ? leastK[t] : meanYy[t];
  return (
    4 * area[t] * (gradX[p] * (xx * gradX[q] + xy * gradY[q]) + gradY[p] * (xy * gradX[q] + yy * gradY[q]))
  );
}

function numberSides({ sides }: ConsistentSystem): { readonly unknown: Int32Array; readonly size: number } {
  const { across, kind } = sides;
  const unknown = new Int32Array(kind.length).fill(-1);
  let size = 0;
  for (let side = 0; side < kind.length; side++) {
    if (kind[side] === sideKind.absorbing) continue;
    const other = across[side];
    unknown[side] = other >= 0 && other < side ? unknown[other] : size++;
  }
  return { unknown, size };
}
