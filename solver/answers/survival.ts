import type { Hooks } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import { solveOrThrow } from '../linear/prepare.ts';
import type { System } from '../operator/system.ts';
import { KrylovBasis } from './krylov-basis.ts';

/** How far the survival is carried. */
export interface SurvivalOptions extends Hooks {
  /** Relative error wanted of the times to `remaining`; default 1e-6. */
  readonly tolerance?: number;
  /** Shares remaining whose times are watched; default ½, 0.1, 0.05, 0.01. */
  readonly remaining?: readonly number[];
  /** Times at which the share remaining is watched, > 0. */
  readonly times?: readonly number[];
  readonly maxSteps?: number;
}

export const survivalDefaults = {
  tolerance: 1e-6,
  remaining: [0.5, 0.1, 0.05, 0.01],
  times: [],
  maxSteps: 120,
} as const;

/** S(t) = P(τ > t), from every start and at every node, out of one basis. */
export interface Survival {
  /** Share still inside at time t ≥ 0 from a start (weights per mesh node). */
  readonly at: (weights: Float64Array, t: number) => number;
  /** Share still inside at time t from every mesh node, 0 on absorbing walls. */
  readonly field: (t: number) => Float64Array;
  /** Time after which only the share `remaining` is still inside (0.05: time to 95 %); 0 when less starts inside. */
  readonly timeTo: (weights: Float64Array, remaining: number) => number;
  /** 1/λ₁: how fast the last of them leave. */
  readonly decayTime: number;
  /** Solves taken. */
  readonly steps: number;
}

/**
 * Survival by one Krylov basis from the constant 1, shift 20 ÷ mean exit time, grown until what is watched moved less
 * than a tenth of the tolerance over three steps, for each of the starts. Times below h²/D at the walls are not resolved by
 * the mesh.
 *
 * @param starts weights per mesh node; what is watched is watched for each
 * @throws {SolverError} NOT_CONVERGED, SOLVING_STOPPED
 * Source: METHODS 5.
 */
export function survival(
  system: System,
  starts: readonly Float64Array[],
  options: SurvivalOptions = {},
): Survival {
  const { tolerance, remaining, times, maxSteps } = { ...survivalDefaults, ...options };
  const u = solveOrThrow(system, system.load, options);
  const mean = weightedMean(system.load, u);
  const basis = new KrylovBasis(system, 20 / mean);
  const projections = starts.map(() => [] as number[]);
  let before: number[] | undefined;
  let still = 0;
  while (still < 3) {
    if (basis.vectors.length >= maxSteps) throw notSettled(maxSteps);
    basis.grow(options);
    const newest = basis.vectors[basis.vectors.length - 1];
    starts.forEach((weights, s) => {
      projections[s].push(project(system, weights, newest));
    });
    options.progress?.(Math.min(0.99, basis.vectors.length / 40));
    if (basis.complete) break;
    const exponential = basis.exponential();
    const now = projections.flatMap((onto) => {
      const share = (t: number): number => combine(onto, exponential(t));
      return [...remaining.map((left) => timeUntil(share, left, mean)), ...times.map(share)];
    });
    still = before && settled(before, now, tolerance / 10) ? still + 1 : 0;
    before = now;
  }
  return answersFrom(system, basis, mean);
}

function answersFrom(system: System, basis: KrylovBasis, mean: number): Survival {
  const exponential = basis.exponential();
  const shareFrom = (weights: Float64Array): ((t: number) => number) => {
    const onto = basis.vectors.map((v) => project(system, weights, v));
    return (t) => (t <= 0 ? inside(system, weights) : combine(onto, exponential(t)));
  };
  return {
    at: (weights, t) => shareFrom(weights)(t),
    field: (t) => {
      const c = t <= 0 ? undefined : exponential(t);
      const out = new Float64Array(system.freeOf.length);
      for (let i = 0; i < system.size; i++) {
        let sum = c ? 0 : 1;
        if (c) for (let j = 0; j < c.length; j++) sum += c[j] * basis.vectors[j][i];
        out[system.nodeOf[i]] = Math.min(1, Math.max(0, sum));
      }
      return out;
    },
    timeTo: (weights, remaining) => timeUntil(shareFrom(weights), remaining, mean),
    decayTime: 1 / basis.slowestRate(),
    steps: basis.vectors.length,
  };
}

function weightedMean(load: Float64Array, u: Float64Array): number {
  let sum = 0;
  let mass = 0;
  for (let i = 0; i < load.length; i++) {
    sum += load[i] * u[i];
    mass += load[i];
  }
  return sum / mass;
}

/** Part of a start that does not lie on absorbing nodes. */
function inside(system: System, weights: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < system.size; i++) sum += weights[system.nodeOf[i]];
  return sum;
}

function project(system: System, weights: Float64Array, v: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < system.size; i++) sum += weights[system.nodeOf[i]] * v[i];
  return sum;
}

function combine(onto: readonly number[], c: Float64Array): number {
  let sum = 0;
  for (let j = 0; j < c.length; j++) sum += onto[j] * c[j];
  return sum;
}

/** Root of share(t) = left: bracketed by doubling, then bisected to rounding (60 halvings). */
function timeUntil(share: (t: number) => number, left: number, scale: number): number {
  let low = 0;
  let high = scale / 16;
  while (share(high) > left && high < 1e6 * scale) {
    low = high;
    high *= 2;
  }
  for (let k = 0; k < 60 && high - low > 1e-14 * high; k++) {
    const middle = (low + high) / 2;
    if (share(middle) > left) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

function settled(before: readonly number[], now: readonly number[], tolerance: number): boolean {
  return now.every((value, i) => Math.abs(value - before[i]) <= tolerance * Math.abs(value));
}

function notSettled(steps: number): SolverError {
  return new SolverError(
    'NOT_CONVERGED',
    `The survival had not settled after ${steps} steps`,
    {},
    'Ask for times that are not so short against the mean exit time, or allow a larger error.',
  );
}
