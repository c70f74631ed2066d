import type { Mesh, Point } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import { type MediumTerms, valueAt } from '../problem/medium-terms.ts';
import type { Coefficient, Problem } from '../problem/problem.ts';
import { edgePoints, edgeWeights } from './quadrature.ts';
import { wallOf } from './wall-terms.ts';

/** Pairs of nodes on the two sides of permeable walls, each pair once. */
export interface Bridges {
  /** 2 node numbers per bridge. */
  readonly pairs: Int32Array;
  /** P ∫ m̄ φ_i ds, the same both ways. */
  readonly rate: Float64Array;
  /** A place where m differs across the wall, so that J·n = P m̄ (p₁/m₁ − p₂/m₂) is what is solved (METHODS 2). */
  readonly unequalAt: Point | undefined;
}

/**
 * Permeable inner walls, lumped: each segment joins its two pairs of ends. Free tips, shared by both sides, are left out.
 *
 * @throws {SolverError} WALL_NOT_INNER, WALL_COEFFICIENT_NOT_POSITIVE
 */
export function permeableBridges(
  mesh: Mesh,
  problem: Problem,
  terms: readonly MediumTerms[],
  triangleOf: Int32Array,
): Bridges {
  const { nodes, segments, segmentTwin, regionSet } = mesh;
  const nodeCount = nodes.length / 2;
  const rates = new Map<number, number>();
  let unequalAt: Point | undefined;
  for (let s = 0; s < mesh.segmentTag.length; s++) {
    const wall = wallOf(mesh, problem, s);
    if (wall.kind !== 'permeable') continue;
    const twin = segmentTwin[s];
    const from = segments[2 * s];
    const to = segments[2 * s + 1];
    const at: Point = [nodes[2 * from], nodes[2 * from + 1]];
    const good = wall.permeability > 0 && wall.permeability < Number.POSITIVE_INFINITY;
    if (twin < 0 || !good) throw refusal(twin < 0, wall.permeability, at, mesh.segmentTag[s]);
    if (twin < s) continue;
    const here = terms[regionSet[triangleOf[s]]].mass;
    const there = terms[regionSet[triangleOf[twin]]].mass;
    const ends = [0, 0];
    for (let g = 0; g < edgePoints.length; g++) {
      const t = edgePoints[g];
      const x = nodes[2 * from] + t * (nodes[2 * to] - nodes[2 * from]);
      const y = nodes[2 * from + 1] + t * (nodes[2 * to + 1] - nodes[2 * from + 1]);
      const [m1, m2] = massesAt(here, there, x, y);
      if (Math.abs(m1 - m2) > 1e-12 * (m1 + m2)) unequalAt ??= [x, y];
      ends[0] += edgeWeights[g] * (1 - t) * 0.5 * (m1 + m2);
      ends[1] += edgeWeights[g] * t * 0.5 * (m1 + m2);
    }
    const length = Math.hypot(nodes[2 * to] - nodes[2 * from], nodes[2 * to + 1] - nodes[2 * from + 1]);
    addBridge(rates, nodeCount, from, segments[2 * twin + 1], wall.permeability * length * ends[0]);
    addBridge(rates, nodeCount, to, segments[2 * twin], wall.permeability * length * ends[1]);
  }
  const pairs = new Int32Array(2 * rates.size);
  const rate = new Float64Array(rates.size);
  let b = 0;
  for (const [key, value] of rates) {
    pairs[2 * b] = Math.floor(key / nodeCount);
    pairs[2 * b + 1] = key % nodeCount;
    rate[b++] = value;
  }
  return { pairs, rate, unequalAt };
}

function massesAt(here: Coefficient, there: Coefficient, x: number, y: number): [number, number] {
  return [valueAt(here, x, y), valueAt(there, x, y)];
}

function addBridge(rates: Map<number, number>, nodeCount: number, a: number, b: number, rate: number): void {
  if (a === b) return;
  const key = Math.min(a, b) * nodeCount + Math.max(a, b);
  rates.set(key, (rates.get(key) ?? 0) + rate);
}

function refusal(outer: boolean, permeability: number, at: Point, tag: number): SolverError {
  return outer
    ? new SolverError(
        'WALL_NOT_INNER',
        'A permeable wall has nothing on its other side',
        { at: [at], tags: [tag] },
        'Only inner walls can be permeable; make this one partly absorbing or reflecting.',
      )
    : new SolverError(
        'WALL_COEFFICIENT_NOT_POSITIVE',
        `The permeability of an inner wall is ${permeability}`,
        { at: [at], tags: [tag] },
        'Give a positive, finite permeability (length per time), or make the wall reflecting.',
      );
}
