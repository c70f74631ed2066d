import type { Hooks } from '../../mesher/index.ts';
import {
  arrivals,
  evenStart,
  SolverError,
  type SurvivalOptions,
  type System,
  survival,
  survivalDefaults,
  valueFromStart,
} from '../../solver/index.ts';

/** Starts to be followed closely, and what of them: shares still to come, and times in the case's time unit. */
export interface Watch {
  readonly starts: readonly Float64Array[];
  readonly remaining: readonly number[];
  readonly times: readonly number[];
}

/** How a compartment empties, from any start. */
export interface Emptying {
  /** Share still inside at a time. */
  readonly insideAt: (weights: Float64Array, t: number) => number;
  /** Time by which a fraction has gone. */
  readonly timeTo: (weights: Float64Array, fraction: number) => number;
  readonly decayTime: number;
  /** True where some of what is watched would take too many steps; the rest is good. */
  readonly isRough: boolean;
}

/** How an exit, or several, fill. */
export interface Filling {
  /** Share of all that has left through it by a time. */
  readonly by: (weights: Float64Array, t: number) => number;
  /** Time by which a fraction of all has left through it; undefined where it never does. */
  readonly timeTo: (weights: Float64Array, fraction: number) => number | undefined;
  readonly isRough: boolean;
}

/**
 * How closely a decay is followed, tried in this order: times that are short against the mean need many steps. The
 * error of the mesh is above all of these.
 */
const closeness: readonly SurvivalOptions[] = [
  { tolerance: 1e-6, maxSteps: 90 },
  { tolerance: 1e-4, maxSteps: 120 },
];

/**
 * Follows the survival by one Krylov basis for all starts.
 *
 * @param attempts how closely, tried in this order before only an even start is watched
 * @returns undefined where not even an even start can be followed
 * @throws {SolverError} MEMORY_LIMIT, SOLVING_STOPPED
 */
export function emptying(
  system: System,
  watch: Watch,
  hooks: Hooks = {},
  attempts: readonly SurvivalOptions[] = closeness,
): Emptying | undefined {
  const followed = follow(system, watch, hooks, attempts, (starts, options) =>
    survival(system, starts, options),
  );
  if (!followed) return undefined;
  const { found, isRough } = followed;
  if (!(found.decayTime > 0) || !Number.isFinite(found.decayTime)) return undefined;
  return {
    insideAt: (weights, t) => Math.min(1, Math.max(0, found.at(weights, t))),
    timeTo: (weights, fraction) => found.timeTo(weights, 1 - fraction),
    decayTime: found.decayTime,
    isRough,
  };
}

/**
 * Follows the arrivals at an exit by a Krylov basis of its own.
 *
 * @param field chance to end there, one entry per mesh node
 * @returns and throws what {@link emptying} does
 */
export function filling(
  system: System,
  field: Float64Array,
  watch: Watch,
  hooks: Hooks,
): Filling | undefined {
  const followed = follow(system, watch, hooks, closeness, (starts, options) =>
    arrivals(system, field, starts, options),
  );
  if (!followed) return undefined;
  const { found, isRough } = followed;
  return {
    by: (weights, t) => Math.min(valueFromStart(weights, field), Math.max(0, found.by(weights, t))),
    timeTo: found.timeTo,
    isRough,
  };
}

function follow<T>(
  system: System,
  { starts, remaining, times }: Watch,
  hooks: Hooks,
  attempts: readonly SurvivalOptions[],
  solve: (starts: readonly Float64Array[], options: SurvivalOptions) => T,
): { readonly found: T; readonly isRough: boolean } | undefined {
  for (const close of attempts) {
    const found = unlessNotConverged(() => solve(starts, { ...hooks, ...close, remaining, times }));
    if (found) return { found, isRough: false };
  }
  const even = [evenStart(system.mesh)];
  const found = unlessNotConverged(() =>
    solve(even, { ...hooks, tolerance: 1e-6, remaining: survivalDefaults.remaining }),
  );
  return found && { found, isRough: true };
}

function unlessNotConverged<T>(solve: () => T): T | undefined {
  try {
    return solve();
  } catch (error) {
    if (error instanceof SolverError && error.code === 'NOT_CONVERGED') return undefined;
    throw error;
  }
}
