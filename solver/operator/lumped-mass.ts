import type { Mesh } from '../../mesher/index.ts';
import { diffusionAt, noiseAlpha, powerAlphaLessOne } from '../problem/medium-values.ts';
import type { Coefficient, Problem } from '../problem/problem.ts';
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
 * Lumped mass M_i = ∫ m φ_i with m = D^(α−1): exact for constant D, else by a rule of degree 5.
 *
 * @returns one entry per node; without drift also the load of the mean exit time
 * @throws {SolverError} DIFFUSION_NOT_POSITIVE
 * Source: METHODS 4.
 */
export function lumpedMass(mesh: Mesh, problem: Problem): Float64Array {
  const { nodes, triangles, regionSet } = mesh;
  const alpha = noiseAlpha[problem.noise];
  const mass = new Float64Array(nodes.length / 2);
  for (let t = 0; t < regionSet.length; t++) {
    const area = triangleArea(nodes, triangles, t);
    const diffusion = problem.media[regionSet[t]].diffusion;
    if (diffusion.kind === 'constant') {
      const third = (powerAlphaLessOne(diffusion.value, alpha) * area) / 3;
      for (let v = 0; v < 3; v++) mass[triangles[3 * t + v]] += third;
    } else {
      addVarying(mass, nodes, triangles, t, area, diffusion, alpha);
    }
  }
  return mass;
}

function addVarying(
  mass: Float64Array,
  nodes: Float64Array,
  triangles: Int32Array,
  t: number,
  area: number,
  diffusion: Coefficient,
  alpha: number,
): void {
  const p = triangles[3 * t];
  const q = triangles[3 * t + 1];
  const r = triangles[3 * t + 2];
  for (let g = 0; g < triangleWeights.length; g++) {
    const a = trianglePoints[3 * g];
    const b = trianglePoints[3 * g + 1];
    const c = trianglePoints[3 * g + 2];
    const x = a * nodes[2 * p] + b * nodes[2 * q] + c * nodes[2 * r];
    const y = a * nodes[2 * p + 1] + b * nodes[2 * q + 1] + c * nodes[2 * r + 1];
    const share = area * triangleWeights[g] * powerAlphaLessOne(diffusionAt(diffusion, x, y), alpha);
    mass[p] += share * a;
    mass[q] += share * b;
    mass[r] += share * c;
  }
}
