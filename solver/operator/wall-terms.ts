import type { Mesh } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import { type MediumTerms, valueAt } from '../problem/medium-terms.ts';
import type { Coefficient, Problem, Wall } from '../problem/problem.ts';
import { edgePoints, edgeWeights } from './quadrature.ts';

/** Which exits the absorbing nodes belong to: one, or the two that touch there, half each (METHODS 3). */
export type AbsorbingNodes = ReadonlyMap<number, readonly number[]>;

/** A lumped partly absorbing wall, entry by entry: node, exit it leads to, rate κ ∫ m φ_i ds. */
export interface WallRates {
  readonly node: readonly number[];
  readonly exit: readonly number[];
  readonly rate: readonly number[];
}

/**
 * The nodes where u = 0, with their exits.
 *
 * @throws {SolverError} WALL_NOT_DESCRIBED when a segment's tag has no wall
 */
export function absorbingNodes(mesh: Mesh, problem: Problem): AbsorbingNodes {
  const exits = new Map<number, number[]>();
  for (let s = 0; s < mesh.segmentTag.length; s++) {
    const wall = wallOf(mesh, problem, s);
    if (wall.kind !== 'absorbing') continue;
    for (let end = 0; end < 2; end++) {
      const node = mesh.segments[2 * s + end];
      const known = exits.get(node);
      if (!known) exits.set(node, [wall.exit]);
      else if (!known.includes(wall.exit)) known.push(wall.exit);
    }
  }
  return exits;
}

/**
 * The partly absorbing walls, lumped: each segment gives κ ∫ m φ_i ds to both of its ends, m seen from its triangle.
 * Lumping keeps the M-matrix; the consistent term gave shares from −0.12 to 1.12 (METHODS 4).
 *
 * @throws {SolverError} WALL_COEFFICIENT_NOT_POSITIVE, DIFFUSION_NOT_POSITIVE, WALL_NOT_DESCRIBED
 */
export function partlyAbsorbingRates(
  mesh: Mesh,
  problem: Problem,
  terms: readonly MediumTerms[],
  triangleOf: Int32Array,
): WallRates {
  const { nodes, segments } = mesh;
  const rates = { node: [] as number[], exit: [] as number[], rate: [] as number[] };
  const ends = new Float64Array(2);
  for (let s = 0; s < mesh.segmentTag.length; s++) {
    const wall = wallOf(mesh, problem, s);
    if (wall.kind !== 'partlyAbsorbing') continue;
    const p = segments[2 * s];
    const q = segments[2 * s + 1];
    if (!(wall.kappa > 0 && wall.kappa < Number.POSITIVE_INFINITY))
      throw kappaNotPositive(mesh, s, wall.kappa);
    integrateMass(ends, nodes, 2 * p, 2 * q, terms[mesh.regionSet[triangleOf[s]]].mass);
    rates.node.push(p, q);
    rates.exit.push(wall.exit, wall.exit);
    rates.rate.push(wall.kappa * ends[0], wall.kappa * ends[1]);
  }
  return rates;
}

/** ends[0], ends[1] ← ∫ m φ ds for the two ends of a segment. */
function integrateMass(
  ends: Float64Array,
  nodes: Float64Array,
  p: number,
  q: number,
  mass: Coefficient,
): void {
  const dx = nodes[q] - nodes[p];
  const dy = nodes[q + 1] - nodes[p + 1];
  const length = Math.hypot(dx, dy);
  ends[0] = 0;
  ends[1] = 0;
  for (let g = 0; g < edgePoints.length; g++) {
    const s = edgePoints[g];
    const share = length * edgeWeights[g] * valueAt(mass, nodes[p] + s * dx, nodes[p + 1] + s * dy);
    ends[0] += share * (1 - s);
    ends[1] += share * s;
  }
}

/** The wall a segment belongs to. */
export function wallOf(mesh: Mesh, problem: Problem, segment: number): Wall {
  const tag = mesh.segmentTag[segment];
  const wall = problem.walls.get(tag);
  if (wall) return wall;
  throw new SolverError(
    'WALL_NOT_DESCRIBED',
    `Nothing says what the wall with number ${tag} does`,
    { at: [placeOf(mesh, segment)], tags: [tag] },
    'Make it absorbing, partly absorbing or reflecting.',
  );
}

function placeOf(mesh: Mesh, segment: number): [number, number] {
  const node = mesh.segments[2 * segment];
  return [mesh.nodes[2 * node], mesh.nodes[2 * node + 1]];
}

function kappaNotPositive(mesh: Mesh, segment: number, kappa: number): SolverError {
  return new SolverError(
    'WALL_COEFFICIENT_NOT_POSITIVE',
    `The reactivity of a partly absorbing wall is ${kappa}`,
    { at: [placeOf(mesh, segment)], tags: [mesh.segmentTag[segment]] },
    'Give a positive, finite reactivity (length per time), or make the wall reflecting or absorbing.',
  );
}
