export { conductance } from './answers/conductance.ts';
export { type ExitDensity, exitDensity } from './answers/exit-density.ts';
export { exitShares, lostShare } from './answers/exit-shares.ts';
export { valueFromStart } from './answers/fields.ts';
export { meanExitTime } from './answers/mean-exit-time.ts';
export { exitTimeMoments, standardDeviation, timeByExit, timeInRegion } from './answers/moments.ts';
export { roundingFloor } from './answers/rounding-floor.ts';
export { densityStart, evenStart, pointStart, spotStart } from './answers/starts.ts';
export {
  type Arrivals,
  arrivals,
  type Survival,
  type SurvivalOptions,
  survival,
  survivalDefaults,
} from './answers/survival.ts';
export { type SolverCode, SolverError, type SolverWhere } from './errors.ts';
export type { Csr } from './linear/csr.ts';
export { type IterationOptions, iterationDefaults, type Solution } from './linear/iteration.ts';
export { type FactorOptions, factorDefaults } from './linear/multifrontal.ts';
export {
  type Prepared,
  prepare,
  solveAdjointOrThrow,
  solveManyOrThrow,
  solveOrThrow,
} from './linear/prepare.ts';
export { assemble } from './operator/assemble.ts';
export type { Cycle } from './operator/reversibility.ts';
export type { Sinks, System } from './operator/system.ts';
export type {
  Coefficient,
  Drift,
  Medium,
  NoiseConvention,
  Problem,
  Tensor,
  Wall,
} from './problem/problem.ts';
export {
  type Adapted,
  type AdaptOptions,
  type AdaptRound,
  type AdaptSteps,
  adaptDefaults,
  adaptUntil,
  type Measured,
} from './trust/adapt.ts';
export type { Bracketed } from './trust/bracketed.ts';
export { type BracketStart, type Brackets, prepareBrackets } from './trust/brackets.ts';
export type { RateBounds } from './trust/eigenvalue-bounds.ts';
export { prepareSurvivalBrackets, type SurvivalBrackets } from './trust/survival-brackets.ts';
export { type WalkLevel, type WalkOptions, type Walks, walk } from './trust/walk.ts';
export { type WalkGeometry, type WalkProblem, walkGeometry } from './trust/walk-geometry.ts';
export type { WalkStart } from './trust/walk-starts.ts';
export { summarise, type WalkMean, type WalkSummary } from './trust/walk-summary.ts';
