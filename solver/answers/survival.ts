import type { Hooks } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import { solveOrThrow } from '../linear/prepare.ts';
import type { System } from '../operator/system.ts';
import { valueFromStart } from './fields.ts';
import { KrylovBasis } from './krylov-basis.ts';

/** How far the survival is carried. */
export interface SurvivalOptions extends Hooks {
  /** Relative error wanted of what is watched; default 1e-6. */
  readonly tolerance?: number;
  /** Shares of the final value still to come, whose times are watched; default ½, 0.1, 0.05, 0.01. */
  readonly remaining?: readonly number[];
  /** Times at which the value is watched, > 0. */
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
 * than a tenth of the tolerance over three steps, for each of the starts. Times below h²/D at the walls are not
 * resolved by the mesh.
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
  const one = new Float64Array(system.size).fill(1);
  const { share, scale, basis } = decayOf(system, one, starts, options);
  const exponential = basis.exponential();
  return {
    at: (weights, t) => share(weights)(t),
    field: (t) => {
      const c = exponential(Math.max(0, t));
      const out = new Float64Array(system.freeOf.length);
      for (let i = 0; i < system.size; i++) {
        let sum = 0;
        for (let j = 0; j < c.length; j++) sum += c[j] * basis.vectors[j][i];
        out[system.nodeOf[i]] = t <= 0 ? 1 : Math.min(1, Math.max(0, sum));
      }
      return out;
    },
    timeTo: (weights, remaining) => timeUntil(share(weights), remaining, scale),
    decayTime: 1 / basis.slowestRate(),
    steps: basis.vectors.length,
  };
}

/** How an exit fills: the share that has left through it by time t. */
export interface Arrivals {
  readonly by: (weights: Float64Array, t: number) => number;
  /** Time by which the share `arrived` of all has left through this exit; undefined if it never does. */
  readonly timeTo: (weights: Float64Array, arrived: number) => number | undefined;
  readonly steps: number;
}

/**
 * Arrivals at one exit by time t: F = p − e^(tL)p, with a Krylov basis from the exit's share field p.
 *
 * @param field the exit's field from `exitShares`, one entry per mesh node
 * @param starts weights per mesh node, watched as in {@link survival}
 * @throws {SolverError} NOT_CONVERGED, SOLVING_STOPPED
 * Source: METHODS 3 and 5.
 */
export function arrivals(
  system: System,
  field: Float64Array,
  starts: readonly Float64Array[],
  options: SurvivalOptions = {},
): Arrivals {
  const free = Float64Array.from(system.nodeOf, (node) => field[node]);
  const { share, scale, basis } = decayOf(system, free, starts, options);
  return {
    by: (weights, t) => valueFromStart(weights, field) - share(weights)(t),
    timeTo: (weights, arrived) => {
      const total = valueFromStart(weights, field);
      if (arrived >= total) return undefined;
      return timeUntil(share(weights), total - arrived, scale);
    },
    steps: basis.vectors.length,
  };
}

interface Decay {
  /** t ↦ ∫ρ e^(tL)g for a start ρ. */
  readonly share: (weights: Float64Array) => (t: number) => number;
  /** The compartment's mean exit time. */
  readonly scale: number;
  readonly basis: KrylovBasis;
}

/** e^(tL)g, g given on the free nodes. */
function decayOf(
  system: System,
  g: Float64Array,
  starts: readonly Float64Array[],
  options: SurvivalOptions,
): Decay {
  const { tolerance, remaining, times, maxSteps } = { ...survivalDefaults, ...options };
  const scale = weightedMean(system.load, solveOrThrow(system, system.load, options));
  const basis = new KrylovBasis(system, 20 / scale, g);
  const onto = starts.map(() => [] as number[]);
  const totals = starts.map((weights) => project(system, weights, g));
  let before: number[] | undefined;
  let still = 0;
  while (still < 3 && !basis.complete) {
    if (basis.vectors.length >= maxSteps) throw notSettled(maxSteps);
    basis.grow(options);
    const newest = basis.vectors[basis.vectors.length - 1];
    starts.forEach((weights, s) => {
      onto[s].push(project(system, weights, newest));
    });
    options.progress?.(Math.min(0.99, basis.vectors.length / 40));
    const exponential = basis.exponential();
    const now = onto.flatMap((projections, s) => {
      const share = (t: number): number => combine(projections, exponential(t));
      return [
        ...remaining.map((left) => timeUntil(share, left * totals[s], scale)),
        ...times.map((t) => share(t)),
      ];
    });
    still = before && settled(before, now, tolerance / 10) ? still + 1 : 0;
    before = now;
  }
  basis.release();
  const exponential = basis.exponential();
  const share = (weights: Float64Array): ((t: number) => number) => {
    const projections = basis.vectors.map((v) => project(system, weights, v));
    const atOnce = project(system, weights, g);
    return (t) => (t <= 0 ? atOnce : combine(projections, exponential(t)));
  };
  return { share, scale, basis };
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

/** Σ over the free nodes of weights × v. */
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

/** Root of share(t) = left: bracketed by doubling, then bisected to rounding. */
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
