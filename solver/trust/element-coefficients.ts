import type { Hooks, Mesh } from '../../mesher/index.ts';
import { pollMask, stopIfAsked } from '../linear/stopping.ts';
import { edgePoints, edgeWeights, trianglePoints, triangleWeights } from '../operator/quadrature.ts';
import type { System } from '../operator/system.ts';
import { type MediumTerms, valueAt } from '../problem/medium-terms.ts';
import type { Coefficient } from '../problem/problem.ts';
import { tensorAt } from '../problem/tensor-terms.ts';

/** Quadrature points per triangle. */
export const pointCount = triangleWeights.length;

/**
 * k̂, m̂ and ĉ (METHODS 1, Names) at the quadrature points of every triangle: entry t·per + g·step of point g in
 * triangle t. Where every coefficient is constant in each region, one entry per triangle serves all its points.
 */
export interface ElementCoefficients {
  readonly per: number;
  readonly step: 0 | 1;
  /** Entries of k̂; `xy` is absent where k̂ is a number, and `yy` is then the same array as `xx`. */
  readonly xx: Float64Array;
  readonly xy: Float64Array | undefined;
  readonly yy: Float64Array;
  readonly mass: Float64Array;
  /** ĉ, catching floors included; absent when nothing is lost anywhere. */
  readonly loss: Float64Array | undefined;
  /** The part of ĉ that belongs to catching floors. */
  readonly floor: Float64Array | undefined;
  /** Exit of the floor per `regionSet` number, −1 for none. */
  readonly floorExit: Int32Array;
  /** Means of k̂ over each triangle. */
  readonly meanXx: Float64Array;
  readonly meanXy: Float64Array;
  readonly meanYy: Float64Array;
  /** Smallest (eigen)value of k̂ and of ĉ, and largest m̂, at the points of each triangle. */
  readonly leastK: Float64Array;
  readonly leastLoss: Float64Array | undefined;
  readonly mostMass: Float64Array;
}

/**
 * Evaluates the coefficients of the symmetric form.
 *
 * @param system gives ψ on the nodes where there is a drift
 * @throws {SolverError} what the coefficients throw, SOLVING_STOPPED
 */
export function elementCoefficients(
  system: System,
  terms: readonly MediumTerms[],
  hooks: Hooks = {},
): ElementCoefficients {
  const { mesh } = system;
  const { triangles, regionSet } = mesh;
  const count = regionSet.length;
  const flat = terms.every(isConstant);
  const per = flat ? 1 : pointCount;
  const tensorial = terms.some((medium) => medium.tensor);
  const lossy = terms.some((medium) => medium.loss || medium.floor);
  const floors = terms.some((medium) => medium.floor);
  const xx = new Float64Array(per * count);
  const xy = tensorial ? new Float64Array(per * count) : undefined;
  const yy = tensorial ? new Float64Array(per * count) : xx;
  const mass = new Float64Array(per * count);
  const loss = lossy ? new Float64Array(per * count) : undefined;
  const floor = floors ? new Float64Array(per * count) : undefined;
  const psi = psiInside(system, terms);
  const place = new Float64Array(2);
  for (let t = 0; t < count; t++) {
    if ((t & (pollMask >> 3)) === 0) stopIfAsked(hooks);
    const medium = terms[regionSet[t]];
    for (let g = 0; g < per; g++) {
      placeOf(mesh, triangles, t, g, place);
      const [x, y] = place;
      const at = t * per + g;
      const scale = psi ? Math.exp(psi(t, x, y)) : 1;
      if (medium.tensor) {
        const d = tensorAt(medium.tensor, x, y);
        xx[at] = scale * d[0];
        if (xy) xy[at] = scale * d[1];
        yy[at] = scale * d[2];
      } else {
        xx[at] = scale * valueAt(medium.conductivity, x, y);
        if (tensorial) yy[at] = xx[at];
      }
      mass[at] = scale * valueAt(medium.mass, x, y);
      if (floor && medium.floor) floor[at] = scale * valueAt(medium.floor.rate, x, y);
      if (loss) loss[at] = (medium.loss ? scale * valueAt(medium.loss, x, y) : 0) + (floor ? floor[at] : 0);
    }
  }
  const values = { per, step: (flat ? 0 : 1) as 0 | 1, xx, xy, yy, mass, loss, floor };
  const floorExit = Int32Array.from(terms, (medium) => medium.floor?.exit ?? -1);
  return { ...values, floorExit, ...summaries(values, count) };
}

type Values = Pick<ElementCoefficients, 'per' | 'step' | 'xx' | 'xy' | 'yy' | 'mass' | 'loss'>;

function summaries({ per, step, xx, xy, yy, mass, loss }: Values, count: number) {
  const meanXx = new Float64Array(count);
  const meanXy = new Float64Array(count);
  const meanYy = new Float64Array(count);
  const leastK = new Float64Array(count).fill(Number.POSITIVE_INFINITY);
  const leastLoss = loss && new Float64Array(count).fill(Number.POSITIVE_INFINITY);
  const mostMass = new Float64Array(count);
  for (let t = 0; t < count; t++) {
    for (let g = 0; g < pointCount; g++) {
      const at = t * per + g * step;
      const w = triangleWeights[g];
      meanXx[t] += w * xx[at];
      meanYy[t] += w * yy[at];
      let least = xx[at];
      if (xy) {
        meanXy[t] += w * xy[at];
        least = (xx[at] + yy[at]) / 2 - Math.hypot((xx[at] - yy[at]) / 2, xy[at]);
      }
      leastK[t] = Math.min(leastK[t], least);
      mostMass[t] = Math.max(mostMass[t], mass[at]);
      if (leastLoss && loss) leastLoss[t] = Math.min(leastLoss[t], loss[at]);
    }
  }
  return { meanXx, meanXy, meanYy, leastK, leastLoss, mostMass };
}

function placeOf(mesh: Mesh, triangles: Int32Array, t: number, g: number, place: Float64Array): void {
  const { nodes } = mesh;
  place.fill(0);
  for (let v = 0; v < 3; v++) {
    const share = trianglePoints[3 * g + v];
    place[0] += share * nodes[2 * triangles[3 * t + v]];
    place[1] += share * nodes[2 * triangles[3 * t + v] + 1];
  }
}

function isConstant(medium: MediumTerms): boolean {
  const parts: (Coefficient | undefined)[] = [medium.mass, medium.floor?.rate];
  if (medium.loss) return false;
  if (!medium.tensor) parts.push(medium.conductivity);
  return (
    !medium.drift &&
    (medium.tensor?.kind ?? 'constant') === 'constant' &&
    parts.every((part) => !part || part.kind === 'constant')
  );
}

/**
 * ψ at a place of a triangle: its value at the triangle's first node and what the drift adds on the way.
 *
 * @returns undefined without drift
 */
export function psiInside(
  system: System,
  terms: readonly MediumTerms[],
): ((t: number, x: number, y: number) => number) | undefined {
  const { psi, mesh } = system;
  if (!psi) return undefined;
  const { nodes, triangles, regionSet } = mesh;
  const out = new Float64Array(2);
  return (t, x, y) => {
    const node = triangles[3 * t];
    const along = terms[regionSet[t]].drift;
    if (!along) return psi[node];
    const ax = nodes[2 * node];
    const ay = nodes[2 * node + 1];
    if (along.kind === 'potential') {
      return psi[node] + valueAt(along.psi, x, y) - valueAt(along.psi, ax, ay);
    }
    let sum = psi[node];
    for (let g = 0; g < edgePoints.length; g++) {
      along.at(ax + edgePoints[g] * (x - ax), ay + edgePoints[g] * (y - ay), out);
      sum += edgeWeights[g] * (out[0] * (x - ax) + out[1] * (y - ay));
      if (!along.constant) continue;
      return psi[node] + out[0] * (x - ax) + out[1] * (y - ay);
    }
    return sum;
  };
}
