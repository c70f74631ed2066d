import type { Hooks } from '../../mesher/index.ts';
import { solveManyOrThrow, solveOrThrow } from '../linear/prepare.ts';
import { lumpedIntegral } from '../operator/lumped-integral.ts';
import type { System } from '../operator/system.ts';
import { mediumTerms } from '../problem/medium-terms.ts';
import type { Problem } from '../problem/problem.ts';
import { overAllNodes, valueFromStart } from './fields.ts';

/**
 * Moments E[τⁿ] of the exit time, n = 1 … order: L uₙ = −n uₙ₋₁.
 *
 * @returns one field per moment, each with one entry per mesh node, in timeⁿ
 * @throws {SolverError} NOT_CONVERGED, SOLVING_STOPPED
 * Source: Darling & Siegert 1953; METHODS 3.
 */
export function exitTimeMoments(system: System, order: number, hooks: Hooks = {}): Float64Array[] {
  const fields: Float64Array[] = [];
  let before = new Float64Array(system.size).fill(1);
  for (let n = 1; n <= order; n++) {
    const rhs = system.load.map((mass, i) => n * mass * before[i]);
    before = Float64Array.from(solveOrThrow(system, rhs, hooks));
    fields.push(overAllNodes(system, before));
  }
  return fields;
}

/**
 * Standard deviation of the exit time from a start: √(∫ρu₂ − (∫ρu₁)²), not the mean of the field's.
 *
 * @param moments the first two fields of {@link exitTimeMoments}
 */
export function standardDeviation(weights: Float64Array, moments: readonly Float64Array[]): number {
  const mean = valueFromStart(weights, moments[0]);
  return Math.sqrt(Math.max(0, valueFromStart(weights, moments[1]) - mean * mean));
}

/**
 * E[τ; exit i] per exit: L wᵢ = −pᵢ. The mean time of those that leave by exit i from a start is ∫ρwᵢ / ∫ρpᵢ; it has no
 * value where pᵢ = 0. Without loss the fields sum to the mean exit time.
 *
 * @param shares fields from `exitShares`
 * @returns one field per exit, each with one entry per mesh node, in the time unit
 * @throws {SolverError} NOT_CONVERGED, SOLVING_STOPPED
 * Source: METHODS 3.
 */
export function timeByExit(
  system: System,
  shares: readonly Float64Array[],
  hooks: Hooks = {},
): Float64Array[] {
  const rhs = shares.map((share) => system.load.map((mass, i) => mass * share[system.nodeOf[i]]));
  return solveManyOrThrow(system, rhs, hooks).map((free) => overAllNodes(system, free));
}

/**
 * Mean time spent in part of the compartment before leaving: L v = −1 there, 0 elsewhere.
 *
 * @param problem what the system was assembled from
 * @param inside told a triangle's `regionSet` number
 * @returns one entry per mesh node, in the time unit; over regions that cover the compartment it sums to the mean exit time
 * @throws {SolverError} NOT_CONVERGED, SOLVING_STOPPED
 * Source: METHODS 3 (accrued ∫g(X)dt with g = 1 in the region).
 */
export function timeInRegion(
  system: System,
  problem: Problem,
  inside: (regionSet: number) => boolean,
  hooks: Hooks = {},
): Float64Array {
  const terms = mediumTerms(problem, 1);
  const mass = lumpedIntegral(
    system.mesh,
    (region) => (inside(region) ? terms[region].mass : undefined),
    hooks,
  );
  const { psi, symmetric, nodeOf } = system;
  const rhs = Float64Array.from(nodeOf, (node) => mass[node] * (psi && symmetric ? Math.exp(psi[node]) : 1));
  return overAllNodes(system, solveOrThrow(system, rhs, hooks));
}
