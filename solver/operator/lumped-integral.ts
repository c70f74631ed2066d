import type { Hooks, Mesh } from '../../mesher/index.ts';
import { pollMask, stopIfAsked } from '../linear/stopping.ts';
import { valueAt } from '../problem/medium-terms.ts';
import type { Coefficient } from '../problem/problem.ts';
import { trianglePoints, triangleWeights } from './quadrature.ts';

/** Area of triangle t, positive when its nodes run counter-clockwise. */
export function triangleArea(nodes: Float64Array, triangles: Int32Array, t: number): number {
  const p = 2 * triangles[3 * t];
  const q = 2 * triangles[3 * t + 1];
  const r = 2 * triangles[3 * t + 2];
  return (
    0.5 *
    ((nodes[q] - nodes[p]) * (nodes[r + 1] - nodes[p + 1]) -
      (nodes[q + 1] - nodes[p + 1]) * (nodes[r] - nodes[p]))
  );
}

/**
 * ∫ c φ_i per node: exact for constant c, else by a rule of degree 5. With c = m the lumped mass, which is also the
 * load of the mean exit time; with c = loss the lumped loss (METHODS 4).
 *
 * @param coefficientOf c in a triangle with the given `regionSet` number; undefined for none
 * @throws {SolverError} what the coefficient throws, SOLVING_STOPPED
 */
export function lumpedIntegral(
  mesh: Mesh,
  coefficientOf: (regionSet: number) => Coefficient | undefined,
  hooks: Hooks = {},
): Float64Array {
  const { nodes, triangles, regionSet } = mesh;
  const coefficients = mesh.regionSets.map((_, r) => coefficientOf(r));
  const integral = new Float64Array(nodes.length / 2);
  for (let t = 0; t < regionSet.length; t++) {
    if ((t & pollMask) === 0) stopIfAsked(hooks);
    const c = coefficients[regionSet[t]];
    if (!c) continue;
    const area = triangleArea(nodes, triangles, t);
    if (c.kind === 'constant') {
      const third = (c.value * area) / 3;
      for (let v = 0; v < 3; v++) integral[triangles[3 * t + v]] += third;
    } else {
      addVarying(integral, nodes, triangles, t, area, c);
    }
  }
  return integral;
}

function addVarying(
  integral: Float64Array,
  nodes: Float64Array,
  triangles: Int32Array,
  t: number,
  area: number,
  c: Coefficient,
): void {
  const p = triangles[3 * t];
  const q = triangles[3 * t + 1];
  const r = triangles[3 * t + 2];
  for (let g = 0; g < triangleWeights.length; g++) {
    const a = trianglePoints[3 * g];
    const b = trianglePoints[3 * g + 1];
    const d = trianglePoints[3 * g + 2];
    const x = a * nodes[2 * p] + b * nodes[2 * q] + d * nodes[2 * r];
    const y = a * nodes[2 * p + 1] + b * nodes[2 * q + 1] + d * nodes[2 * r + 1];
    const share = area * triangleWeights[g] * valueAt(c, x, y);
    integral[p] += share * a;
    integral[q] += share * b;
    integral[r] += share * d;
  }
}
