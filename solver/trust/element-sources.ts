import type { Mesh } from '../../mesher/index.ts';
import { momentsInDisc } from '../answers/disc-overlap.ts';
import { SolverError } from '../errors.ts';
import { trianglePoints, triangleWeights } from '../operator/quadrature.ts';
import { type ElementCoefficients, pointCount } from './element-coefficients.ts';
import type { ElementGeometry } from './element-geometry.ts';

/** A right-hand side f by elements. */
export interface ElementSource {
  /** ∫_T f φ, 3 per triangle. */
  readonly load: Float64Array;
  /** ‖f − mean of f‖ over each triangle; absent where f is constant in every triangle. */
  readonly oscillation?: Float64Array;
}

/** No source at all. */
export function noSource({ count }: ElementGeometry): ElementSource {
  return { load: new Float64Array(3 * count) };
}

/**
 * f = a coefficient as stored at the quadrature points (per, step as in {@link ElementCoefficients}), times a P1 field
 * where one is given.
 *
 * @param field one entry per mesh node
 */
export function coefficientSource(
  mesh: Mesh,
  geometry: ElementGeometry,
  { per, step }: Pick<ElementCoefficients, 'per' | 'step'>,
  values: Float64Array,
  field?: Float64Array,
): ElementSource {
  const { count, area } = geometry;
  const { triangles } = mesh;
  const load = new Float64Array(3 * count);
  const oscillation = step === 1 || field ? new Float64Array(count) : undefined;
  const at = new Float64Array(pointCount);
  for (let t = 0; t < count; t++) {
    const u = field ? field[triangles[3 * t]] : 1;
    const v = field ? field[triangles[3 * t + 1]] : 1;
    const w = field ? field[triangles[3 * t + 2]] : 1;
    let mean = 0;
    for (let g = 0; g < pointCount; g++) {
      const a = trianglePoints[3 * g];
      const b = trianglePoints[3 * g + 1];
      const c = trianglePoints[3 * g + 2];
      at[g] = values[t * per + g * step] * (a * u + b * v + c * w);
      const share = area[t] * triangleWeights[g] * at[g];
      mean += triangleWeights[g] * at[g];
      load[3 * t] += a * share;
      load[3 * t + 1] += b * share;
      load[3 * t + 2] += c * share;
    }
    if (oscillation) oscillation[t] = deviation(at, mean, area[t]);
  }
  return oscillation ? { load, oscillation } : { load };
}

/** ‖f − mean‖ over a triangle from the values at its points. */
export function deviation(values: Float64Array, mean: number, area: number): number {
  let sum = 0;
  for (let g = 0; g < pointCount; g++) sum += triangleWeights[g] * (values[g] - mean) ** 2;
  return Math.sqrt(sum * area);
}

/** f = 1/area on the triangles taken, 0 elsewhere. */
export function evenSource(
  mesh: Mesh,
  { area, count }: ElementGeometry,
  inside: (regionSet: number) => boolean,
): ElementSource {
  const takes = mesh.regionSets.map((_, r) => inside(r));
  const load = new Float64Array(3 * count);
  let total = 0;
  for (let t = 0; t < count; t++) {
    if (!takes[mesh.regionSet[t]]) continue;
    total += area[t];
    load.fill(area[t] / 3, 3 * t, 3 * t + 3);
  }
  if (!(total > 0)) throw outside('The region to start in has no area inside the compartment');
  for (let q = 0; q < load.length; q++) load[q] /= total;
  return { load };
}

/** f ∝ a density on the triangles taken, with ∫f = 1 by the quadrature of degree 5. */
export function densitySource(
  mesh: Mesh,
  geometry: ElementGeometry,
  density: (x: number, y: number) => number,
  inside: (regionSet: number) => boolean,
): ElementSource {
  const { nodes, triangles, regionSet } = mesh;
  const takes = mesh.regionSets.map((_, r) => inside(r));
  const values = new Float64Array(pointCount * geometry.count);
  for (let t = 0; t < geometry.count; t++) {
    if (!takes[regionSet[t]]) continue;
    for (let g = 0; g < pointCount; g++) {
      let x = 0;
      let y = 0;
      for (let v = 0; v < 3; v++) {
        x += trianglePoints[3 * g + v] * nodes[2 * triangles[3 * t + v]];
        y += trianglePoints[3 * g + v] * nodes[2 * triangles[3 * t + v] + 1];
      }
      values[pointCount * t + g] = density(x, y);
    }
  }
  const { load, oscillation } = coefficientSource(mesh, geometry, { per: pointCount, step: 1 }, values);
  const total = load.reduce((sum, part) => sum + part, 0);
  if (!(total > 0)) throw outside('The density to start with is zero throughout the compartment');
  return {
    load: load.map((part) => part / total),
    ...(oscillation ? { oscillation: oscillation.map((part) => part / total) } : {}),
  };
}

/**
 * f = 1/area on the part of a disc inside the compartment, integrated exactly, not as a polygon.
 *
 * @throws {SolverError} START_OUTSIDE when they do not overlap
 */
export function discSource(
  mesh: Mesh,
  { area, count, gradX, gradY, offX, offY }: ElementGeometry,
  x: number,
  y: number,
  radius: number,
): ElementSource {
  const { nodes, triangles } = mesh;
  const load = new Float64Array(3 * count);
  const oscillation = new Float64Array(count);
  const corners = new Float64Array(6);
  const moments = new Float64Array(3);
  let total = 0;
  for (let t = 0; t < count; t++) {
    for (let v = 0; v < 3; v++) {
      corners[2 * v] = nodes[2 * triangles[3 * t + v]] - x;
      corners[2 * v + 1] = nodes[2 * triangles[3 * t + v] + 1] - y;
    }
    if (!mayTouch(corners, radius)) continue;
    momentsInDisc(corners, radius, moments);
    const inside = Math.min(area[t], moments[0]);
    if (!(inside > 0)) continue;
    total += moments[0];
    oscillation[t] = Math.sqrt(inside * (1 - inside / area[t]));
    const mx = corners[0] - offX[3 * t];
    const my = corners[1] - offY[3 * t];
    for (let q = 3 * t; q < 3 * t + 3; q++) {
      load[q] =
        moments[0] / 3 +
        gradX[q] * (moments[1] - mx * moments[0]) +
        gradY[q] * (moments[2] - my * moments[0]);
    }
  }
  if (!(total > 0)) throw outside(`The starting spot at (${x}, ${y}) lies outside the compartment`);
  return {
    load: load.map((part) => part / total),
    oscillation: oscillation.map((part) => part / total),
  };
}

function mayTouch(c: Float64Array, radius: number): boolean {
  return (
    Math.min(c[0], c[2], c[4]) < radius &&
    Math.max(c[0], c[2], c[4]) > -radius &&
    Math.min(c[1], c[3], c[5]) < radius &&
    Math.max(c[1], c[3], c[5]) > -radius
  );
}

function outside(what: string): SolverError {
  return new SolverError('START_OUTSIDE', what, {}, 'Start inside the compartment.');
}
