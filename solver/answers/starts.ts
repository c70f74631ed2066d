import { type Mesh, placeText } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import { lumpedIntegral, triangleArea } from '../operator/lumped-integral.ts';
import { momentsInDisc } from './disc-overlap.ts';

/**
 * Start spread evenly over the triangles for which `inside` holds: exact ∫φ_i over them ÷ their area.
 *
 * @param inside told a triangle's `regionSet` number; default: everywhere
 * @returns weights, one per mesh node, sum 1
 * @throws {SolverError} START_OUTSIDE when no triangle is inside
 */
export function evenStart(mesh: Mesh, inside: (regionSet: number) => boolean = () => true): Float64Array {
  const { nodes, triangles, regionSet } = mesh;
  const weights = new Float64Array(nodes.length / 2);
  const takes = mesh.regionSets.map((_, r) => inside(r));
  let total = 0;
  for (let t = 0; t < regionSet.length; t++) {
    if (!takes[regionSet[t]]) continue;
    const area = triangleArea(nodes, triangles, t);
    total += area;
    for (let v = 0; v < 3; v++) weights[triangles[3 * t + v]] += area / 3;
  }
  if (!(total > 0)) {
    throw new SolverError(
      'START_OUTSIDE',
      'The region to start in has no area inside the compartment',
      {},
      'Start in another region.',
    );
  }
  return scaled(weights, total);
}

/**
 * Start spread with a density ρ ≥ 0 (any scale): ∫ρφ_i ÷ ∫ρ by a rule of degree 5 on every triangle.
 *
 * @param density per area at (x, y) in the length unit
 * @param inside told a triangle's `regionSet` number; default: everywhere
 * @returns weights, one per mesh node, sum 1
 * @throws {SolverError} START_OUTSIDE when the density is negative or not finite somewhere, or zero throughout
 */
export function densityStart(
  mesh: Mesh,
  density: (x: number, y: number) => number,
  inside: (regionSet: number) => boolean = () => true,
): Float64Array {
  const at = (x: number, y: number): number => {
    const value = density(x, y);
    if (value >= 0 && value < Number.POSITIVE_INFINITY) return value;
    throw new SolverError(
      'START_OUTSIDE',
      `The density to start with is ${value} at ${placeText([x, y])}`,
      { at: [[x, y]] },
      'Give a density that is zero or positive, and finite, everywhere in the compartment.',
    );
  };
  const weights = lumpedIntegral(mesh, (region) => (inside(region) ? { kind: 'varying', at } : undefined));
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  if (total > 0) return scaled(weights, total);
  throw new SolverError(
    'START_OUTSIDE',
    'The density to start with is zero throughout the compartment',
    {},
    'Give a density that is positive somewhere in it.',
  );
}

/**
 * Start at one point.
 *
 * @param triangle the triangle the point lies in
 * @param coordinates barycentric coordinates of the point for that triangle's three nodes
 * @returns weights, one per mesh node, sum 1
 */
export function pointStart(
  mesh: Mesh,
  triangle: number,
  coordinates: readonly [number, number, number],
): Float64Array {
  const weights = new Float64Array(mesh.nodes.length / 2);
  const sum = coordinates[0] + coordinates[1] + coordinates[2];
  for (let v = 0; v < 3; v++) weights[mesh.triangles[3 * triangle + v]] += coordinates[v as 0 | 1 | 2] / sum;
  return weights;
}

/**
 * Start spread evenly over the part of a disc that lies in the compartment, integrated exactly (no quadrature).
 *
 * @param x, y, radius in the length unit, radius > 0
 * @returns weights, one per mesh node, sum 1
 * @throws {SolverError} START_OUTSIDE when disc and compartment do not overlap
 */
export function spotStart(mesh: Mesh, x: number, y: number, radius: number): Float64Array {
  const { nodes, triangles, regionSet } = mesh;
  const weights = new Float64Array(nodes.length / 2);
  const corners = new Float64Array(6);
  const moments = new Float64Array(3);
  let total = 0;
  for (let t = 0; t < regionSet.length; t++) {
    for (let v = 0; v < 3; v++) {
      corners[2 * v] = nodes[2 * triangles[3 * t + v]] - x;
      corners[2 * v + 1] = nodes[2 * triangles[3 * t + v] + 1] - y;
    }
    if (!mayTouch(corners, radius)) continue;
    momentsInDisc(corners, radius, moments);
    if (!(moments[0] > 0)) continue;
    const area = triangleArea(nodes, triangles, t);
    for (let v = 0; v < 3; v++) {
      const next = 2 * ((v + 1) % 3);
      const last = 2 * ((v + 2) % 3);
      // φ_v is affine: the doubled area of the triangle on the opposite side, seen from the place, over the whole's.
      const ex = corners[last] - corners[next];
      const ey = corners[last + 1] - corners[next + 1];
      const part =
        ex * (moments[2] - corners[next + 1] * moments[0]) - ey * (moments[1] - corners[next] * moments[0]);
      const share = Math.max(0, part / (2 * area));
      weights[triangles[3 * t + v]] += share;
      total += share;
    }
  }
  if (total > 0) return scaled(weights, total);
  throw new SolverError(
    'START_OUTSIDE',
    `The starting spot at ${placeText([x, y])} with radius ${radius} lies outside the compartment`,
    { at: [[x, y]] },
    'Move the spot into the compartment.',
  );
}

function mayTouch(c: Float64Array, radius: number): boolean {
  return (
    Math.min(c[0], c[2], c[4]) < radius &&
    Math.max(c[0], c[2], c[4]) > -radius &&
    Math.min(c[1], c[3], c[5]) < radius &&
    Math.max(c[1], c[3], c[5]) > -radius
  );
}

function scaled(weights: Float64Array, total: number): Float64Array {
  for (let i = 0; i < weights.length; i++) weights[i] /= total;
  return weights;
}
