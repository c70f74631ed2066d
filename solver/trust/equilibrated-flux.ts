import { pollMask, stopIfAsked } from '../linear/stopping.ts';
import type { ConsistentSystem } from './consistent-system.ts';
import { endSide, startSide } from './fans.ts';
import { sideKind } from './wall-sides.ts';

/** Rounds of local improvement after the patches; measured in tests/bench/bracket.bench.ts. */
const improvements = 1;

/**
 * A flux σ ∈ RT0, σ ≈ k̂∇u_h, with −∇·σ = Π(f − ĉu_h) in every triangle, σ·n = 0 on reflecting walls and σ·n = the mean
 * of what the wall condition asks on exchanging ones.
 *
 * One small problem per vertex: the fluxes through the edges of its fan follow from balance in each of its triangles,
 * but for one number where a flux can circulate, and that is chosen to make ‖k̂^−½(σ − k̂∇u_h)‖ smallest. A few rounds
 * of the same choice on the whole σ follow. What the balance lacks at a vertex (the residual of the linear solve) is
 * led through a tree of triangles to a wall, so that σ is exact however well u_h was solved for.
 *
 * @param gradients k̂∇u_h per triangle, 2 entries
 * @param residual ∫_T (f − ĉu_h)φ − k̂∇u_h·∇φ, 3 per triangle
 * @param wallFlux ∫ of the wanted outward flux times φ of first and second end, 2 per exchanging wall
 * @returns outward flux through each side, 3 per triangle, and what is left in the roots of the tree (see
 *   {@link leadAway})
 * Source: Braess & Schöberl 2008; Ern & Vohralík 2015; Prager & Synge 1947.
 */
export function equilibratedFlux(
  base: ConsistentSystem,
  gradients: Float64Array,
  residual: Float64Array,
  wallFlux: Float64Array,
): { readonly flux: Float64Array; readonly leftOver: Float64Array } {
  const flux = new Float64Array(residual.length);
  const inverse = inverseMeans(base);
  const work = new Float64Array(64);
  patches(base, gradients, residual, wallFlux, inverse, flux, work);
  for (let round = 0; round < improvements; round++) {
    improve(base, gradients, inverse, flux);
  }
  return { flux, leftOver: leadAway(base, residual, flux) };
}

/** Inverse of the mean of k̂ per triangle: entries xx, xy, yy. */
function inverseMeans({ coefficients, geometry }: ConsistentSystem): Float64Array {
  const { meanXx, meanXy, meanYy } = coefficients;
  const inverse = new Float64Array(3 * geometry.count);
  for (let t = 0; t < geometry.count; t++) {
    const det = meanXx[t] * meanYy[t] - meanXy[t] * meanXy[t];
    inverse[3 * t] = meanYy[t] / det;
    inverse[3 * t + 1] = -meanXy[t] / det;
    inverse[3 * t + 2] = meanXx[t] / det;
  }
  return inverse;
}

/** Outward flux that an end of a fan's wall side is bound to, as the share of the fan's vertex. */
function boundFlux(base: ConsistentSystem, wallFlux: Float64Array, side: number, atStart: boolean): number {
  const { sides } = base;
  const w = sides.exchangeOf[side];
  if (w < 0) return 0;
  if (sides.exchanges.side[w] === side) return wallFlux[2 * w + (atStart ? 0 : 1)];
  return -wallFlux[2 * w + (atStart ? 1 : 0)];
}

function patches(
  base: ConsistentSystem,
  gradients: Float64Array,
  residual: Float64Array,
  wallFlux: Float64Array,
  inverse: Float64Array,
  flux: Float64Array,
  scratch: Float64Array,
): void {
  const { fans, sides, geometry } = base;
  let through = scratch;
  for (let f = 0; f < fans.count; f++) {
    if ((f & pollMask) === 0) stopIfAsked(base.hooks);
    const begin = fans.start[f];
    const n = fans.start[f + 1] - begin;
    if (through.length <= n) through = new Float64Array(2 * n + 2);
    const entry = startSide(fans.corner[begin]);
    const end = endSide(fans.corner[begin + n - 1]);
    through[0] = -boundFlux(base, wallFlux, entry, true);
    for (let j = 0; j < n; j++) through[j + 1] = through[j] - residual[fans.corner[begin + j]];
    if (fans.turns[f]) {
      if (fans.closed[f]) through[n] = through[0];
      const c = circulation(geometry, gradients, inverse, through, fans.corner, begin, n);
      for (let j = 0; j <= n; j++) through[j] += c;
    } else if (sides.kind[entry] === sideKind.absorbing) {
      const shift = boundFlux(base, wallFlux, end, false) - through[n];
      for (let j = 0; j <= n; j++) through[j] += shift;
    } else if (sides.kind[end] !== sideKind.absorbing) {
      through[n] = boundFlux(base, wallFlux, end, false);
    }
    for (let j = 0; j < n; j++) {
      const corner = fans.corner[begin + j];
      flux[endSide(corner)] += through[j + 1];
      flux[startSide(corner)] -= through[j];
    }
  }
}

/** The number to add to all fluxes of a fan that makes its own part of σ − k̂∇u_h smallest. */
function circulation(
  geometry: ConsistentSystem['geometry'],
  gradients: Float64Array,
  inverse: Float64Array,
  through: Float64Array,
  corners: Int32Array,
  begin: number,
  n: number,
): number {
  const { area, gradX, gradY, offX, offY } = geometry;
  let slope = 0;
  let curvature = 0;
  for (let j = 0; j < n; j++) {
    const corner = corners[begin + j];
    const t = (corner / 3) | 0;
    // The side that ends the triangle's part lies opposite to vertex b, the one that starts it opposite to c.
    const b = endSide(corner);
    const c = startSide(corner);
    const kx = area[t] * gradients[2 * t];
    const ky = area[t] * gradients[2 * t + 1];
    const out = through[j + 1] + kx * gradX[b] + ky * gradY[b];
    const into = -through[j] + kx * gradX[c] + ky * gradY[c];
    const fx = -(out * offX[b] + into * offX[c]) / (2 * area[t]);
    const fy = -(out * offY[b] + into * offY[c]) / (2 * area[t]);
    const dx = offX[c] - offX[b];
    const dy = offY[c] - offY[b];
    const ix = inverse[3 * t] * dx + inverse[3 * t + 1] * dy;
    const iy = inverse[3 * t + 1] * dx + inverse[3 * t + 2] * dy;
    slope += 0.5 * (ix * fx + iy * fy);
    curvature += (ix * dx + iy * dy) / (4 * area[t]);
  }
  return -slope / curvature;
}

/** One round over all vertices: each lets the circulation run that makes the whole ‖σ − k̂∇u_h‖ smallest. */
function improve(
  { fans, geometry, hooks }: ConsistentSystem,
  gradients: Float64Array,
  inverse: Float64Array,
  flux: Float64Array,
): void {
  const { area, offX, offY } = geometry;
  for (let f = 0; f < fans.count; f++) {
    if ((f & pollMask) === 0) stopIfAsked(hooks);
    if (!fans.turns[f]) continue;
    let slope = 0;
    let curvature = 0;
    for (let j = fans.start[f]; j < fans.start[f + 1]; j++) {
      const corner = fans.corner[j];
      const t = (corner / 3) | 0;
      const b = endSide(corner);
      const c = startSide(corner);
      let sx = 0;
      let sy = 0;
      for (let q = 3 * t; q < 3 * t + 3; q++) {
        sx -= flux[q] * offX[q];
        sy -= flux[q] * offY[q];
      }
      const fx = sx / (2 * area[t]) - gradients[2 * t];
      const fy = sy / (2 * area[t]) - gradients[2 * t + 1];
      const dx = offX[c] - offX[b];
      const dy = offY[c] - offY[b];
      const ix = inverse[3 * t] * dx + inverse[3 * t + 1] * dy;
      const iy = inverse[3 * t + 1] * dx + inverse[3 * t + 2] * dy;
      slope += 0.5 * (ix * fx + iy * fy);
      curvature += (ix * dx + iy * dy) / (4 * area[t]);
    }
    const step = -slope / curvature;
    for (let j = fans.start[f]; j < fans.start[f + 1]; j++) {
      flux[endSide(fans.corner[j])] += step;
      flux[startSide(fans.corner[j])] -= step;
    }
  }
}

/**
 * Leads what the balance of each triangle lacks along a tree to an absorbing or partly absorbing wall; in parts that
 * have none it stays in a triangle with loss.
 *
 * @returns per triangle what stayed (all 0 where every part has such a wall)
 */
function leadAway({ tree }: ConsistentSystem, residual: Float64Array, flux: Float64Array): Float64Array {
  const left = new Float64Array(residual.length / 3);
  for (let t = 0; t < left.length; t++) {
    for (let q = 3 * t; q < 3 * t + 3; q++) left[t] += flux[q] + residual[q];
  }
  for (let p = tree.order.length - 1; p >= 0; p--) {
    const t = tree.order[p];
    const side = tree.side[t];
    if (side < 0) continue;
    const amount = left[t];
    flux[side] -= amount;
    left[t] = 0;
    const other = tree.onto[t];
    if (other < 0) continue;
    flux[other] += amount;
    left[(other / 3) | 0] += amount;
  }
  return left;
}
