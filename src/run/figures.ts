import type { Hooks } from '../../mesher/index.ts';
import {
  type Problem,
  type System,
  standardDeviation,
  timeInRegion,
  valueFromStart,
} from '../../solver/index.ts';
import type { Asked, Case } from '../case/case.ts';
import { formatNumber, formatQuantity } from '../case/format-quantity.ts';
import type { Answer, Answers, Reading, ShareAnswer, TimeAnswer, Times } from './answers.ts';
import type { SolvedFields } from './solved-fields.ts';
import { type Emptying, emptying, type Filling, filling } from './times.ts';
import { type AskedStart, chanceToEnd, exitOf, fractionOf, watchedExits, watchedInside } from './watched.ts';

/** A layout with its fields, and what is asked of it. */
export interface SolvedLayout {
  readonly theCase: Case;
  /** What the system was assembled from. */
  readonly problem: Problem;
  readonly system: System;
  readonly fields: SolvedFields;
  readonly starts: readonly AskedStart[];
  /** That the mesh resolves, in the time unit; earlier ones bring a warning. */
  readonly lowestTime: number;
}

/** Everything solved once for a layout, of which the figures of any start or pin are read. */
export interface LayoutFigures {
  readonly reading: (weights: Float64Array) => Reading;
  readonly moments: (weights: Float64Array) => Answer[];
  /** What `report` of the case asks for, and the decay time; absent where there is none. */
  readonly reported: (weights: Float64Array) => Pick<Answers, 'decayTime' | 'survival' | 'occupation'>;
  /** The answer to one figure; undefined where `warnings` says why there is none. */
  readonly value: (asked: Asked, weights: Float64Array) => TimeAnswer | undefined;
  readonly warnings: readonly string[];
}

/** What has left by these times is always given (CASE.md). */
const givenFractions = [0.5, 0.9, 0.95, 0.99] as const;

/**
 * Solves for what depends on time, and reads the figures of any start off the solved fields.
 *
 * One Krylov basis serves every start and pin; each exit of which something is asked by a time needs one more. Pins
 * are not watched while it grows: theirs are as good as the starts' bases make them.
 *
 * @throws {SolverError} MEMORY_LIMIT, NOT_CONVERGED, SOLVING_STOPPED
 */
export function solveFigures(
  layout: SolvedLayout,
  hooks: (doing: string, from: number, to: number) => Hooks,
): LayoutFigures {
  const { theCase, problem, system, fields, starts, lowestTime } = layout;
  // Beyond the reach of the second moment the basis overflows too.
  const canFollow = fields.moments.length > 1;
  const solved: Solved = {
    theCase,
    fields,
    wellDepth: wellDepth(system),
    emptying: canFollow
      ? emptying(system, watchedInside(theCase, starts), hooks('following the survival', 0, 0.6))
      : undefined,
    fillings: new Map(),
    timeIn: timesInRegions(theCase, problem, system, starts, hooks('solving for times in regions', 0.9, 1)),
  };
  for (const [name, watch] of canFollow ? watchedExits(fields, starts) : []) {
    const field = chanceToEnd(fields, name);
    const found = field && filling(system, field, watch, hooks('following the arrivals', 0.6, 0.9));
    if (found) solved.fillings.set(name, found);
  }
  return {
    reading: (weights) => readingOf(solved, weights),
    moments: (weights) => momentsOf(solved, weights),
    reported: (weights) => reportedOf(solved, weights),
    value: (asked, weights) => figureOf(solved, asked, weights),
    warnings: [...warningsOf(solved, starts), ...tooEarly(solved, starts, lowestTime)],
  };
}

interface Solved {
  readonly theCase: Case;
  readonly fields: SolvedFields;
  /** Range of the drift's potential in kT; 0 where there is none. */
  readonly wellDepth: number;
  readonly emptying: Emptying | undefined;
  readonly fillings: Map<string, Filling>;
  /** Per region's name: mean time spent there, per mesh node. */
  readonly timeIn: ReadonlyMap<string, Float64Array>;
}

function timesInRegions(
  { drawing, report }: Case,
  problem: Problem,
  system: System,
  starts: readonly AskedStart[],
  hooks: Hooks,
): Map<string, Float64Array> {
  const names = new Set(report?.occupationOf);
  for (const { figure } of starts.flatMap(({ asked }) => asked)) {
    if (figure.kind === 'time in') names.add(figure.region);
  }
  const { regionSets } = system.mesh;
  return new Map(
    [...names].map((name) => {
      const region = drawing.regions.findIndex((one) => one.name === name);
      const inside = (set: number): boolean => regionSets[set]?.includes(region) ?? false;
      return [name, timeInRegion(system, problem, inside, hooks)];
    }),
  );
}

function readingOf({ fields, emptying: found }: Solved, weights: Float64Array): Reading {
  const sd = deviationOf(fields, weights);
  const times = found && timesOf(found, weights);
  return {
    mean: estimate(valueFromStart(weights, fields.meanExitTime)),
    ...(sd && { sd }),
    ...(times && { times }),
    shares: Object.fromEntries(
      [...fields.shares].map(([name, field]) => [
        name,
        shareOf(valueFromStart(weights, field), weights, fields.timeByExit.get(name)),
      ]),
    ),
  };
}

function deviationOf({ moments }: SolvedFields, weights: Float64Array): Answer | undefined {
  const sd = moments.length < 2 ? Number.NaN : standardDeviation(weights, moments);
  return Number.isFinite(sd) ? estimate(sd) : undefined;
}

function timesOf(found: Emptying, weights: Float64Array): Times {
  return Object.fromEntries(
    givenFractions.map((fraction) => [
      `${Math.round(100 * fraction)} %`,
      estimate(found.timeTo(weights, fraction)),
    ]),
  );
}

function shareOf(share: number, weights: Float64Array, time: Float64Array | undefined): ShareAnswer {
  const answer = estimate(share);
  return share > 0 && time ? { ...answer, meanTime: valueFromStart(weights, time) / share } : answer;
}

function momentsOf({ fields }: Solved, weights: Float64Array): Answer[] {
  const values = fields.moments.map((field) => valueFromStart(weights, field));
  return values.filter(Number.isFinite).map(estimate);
}

function reportedOf(
  { theCase, emptying: found, fields, timeIn }: Solved,
  weights: Float64Array,
): ReturnType<LayoutFigures['reported']> {
  const { survivalAt = [], occupationOf = [] } = theCase.report ?? {};
  const mean = valueFromStart(weights, fields.meanExitTime);
  const occupation = occupationOf.map((name) => {
    const value = valueFromStart(weights, timeIn.get(name) ?? new Float64Array(weights.length));
    return [name, { ...estimate(value), fraction: mean > 0 ? value / mean : 0 }] as const;
  });
  return {
    ...(found && { decayTime: estimate(found.decayTime) }),
    ...(found &&
      survivalAt.length > 0 && {
        survival: survivalAt.map((t) => ({ t, ...estimate(found.insideAt(weights, t)) })),
      }),
    ...(occupation.length > 0 && { occupation: Object.fromEntries(occupation) }),
  };
}

function figureOf(solved: Solved, asked: Asked, weights: Float64Array): TimeAnswer | undefined {
  const { figure } = asked;
  const { fields, emptying: found, timeIn } = solved;
  switch (figure.kind) {
    case 'mean':
      return estimate(valueFromStart(weights, fields.meanExitTime));
    case 'standard deviation':
      return deviationOf(fields, weights);
    case 'median':
    case 'time to':
    case 'time to leave by': {
      const exit = exitOf(fields, asked);
      const fraction = fractionOf(asked) ?? 0.5;
      if (exit !== undefined) return arrivalTime(solved, exit, fraction, weights);
      return found && estimate(found.timeTo(weights, fraction));
    }
    case 'share': {
      const field = fields.shares.get(figure.wall);
      // A wall that catches nothing in this layout has a share of 0 (CASE.md, details).
      const share = field ? valueFromStart(weights, field) : 0;
      if (figure.by === undefined || !(share > 0)) return estimate(share);
      const arrived = solved.fillings.get(figure.wall);
      return arrived && estimate(arrived.by(weights, figure.by));
    }
    case 'still inside':
      return found && estimate(found.insideAt(weights, figure.at));
    case 'time in': {
      const field = timeIn.get(figure.region);
      return field && estimate(valueFromStart(weights, field));
    }
    case 'decay time':
      return found && estimate(found.decayTime);
  }
}

function arrivalTime(
  { fields, fillings }: Solved,
  exit: string,
  fraction: number,
  weights: Float64Array,
): TimeAnswer | undefined {
  const field = chanceToEnd(fields, exit);
  const atMost = field ? valueFromStart(weights, field) : 0;
  if (fraction >= atMost) return { value: null, never: { atMost }, kind: 'estimate' };
  const time = fillings.get(exit)?.timeTo(weights, fraction);
  return time === undefined ? undefined : estimate(time);
}

function warningsOf(solved: Solved, starts: readonly AskedStart[]): string[] {
  const { theCase, fields, emptying: found, fillings } = solved;
  const warnings: string[] = [];
  if (fields.moments.length < 2) {
    warnings.push('the standard deviation is left out: its square is beyond the largest number');
  }
  if (!found) {
    warnings.push('times to N % are left out: the decay cannot be followed in double precision');
    return warnings;
  }
  if (solved.wellDepth > deepest) {
    warnings.push(
      `the potential ranges over ${formatNumber(solved.wellDepth, 3)} kT: times to N %, survival and arrivals do not see what leaves before the well is felt, and err by that share; mean, standard deviation and shares do not`,
    );
  }
  if (!found.isRough && ![...fillings.values()].some(({ isRough }) => isRough)) return warnings;
  const mean = Math.max(...starts.map(({ weights }) => valueFromStart(weights, fields.meanExitTime)));
  const early = formatQuantity(mean / 1000, 'time', theCase.units);
  warnings.push(
    `times and shares earlier than about ${early} are rough: so early, against the mean, they would take too many steps`,
  );
  return warnings;
}

/** Above this the inner product of the basis, weighted by e^−V, no longer sees what is near the top of a well. */
const deepest = 25;

/** Range of the drift's potential, in kT. */
function wellDepth({ psi }: System): number {
  if (!psi) return 0;
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < psi.length; i++) {
    low = Math.min(low, psi[i] ?? 0);
    high = Math.max(high, psi[i] ?? 0);
  }
  return high - low;
}

/** Warns where a time asked for, or the answer to one, is earlier than what the mesh resolves. */
function tooEarly(solved: Solved, starts: readonly AskedStart[], lowestTime: number): string[] {
  const { theCase, emptying: found } = solved;
  const times = [...(theCase.report?.survivalAt ?? [])];
  for (const { weights, asked } of starts) {
    if (found) times.push(found.timeTo(weights, givenFractions[0]));
    for (const { figure } of asked) {
      if (figure.kind === 'still inside') times.push(figure.at);
      if (figure.kind === 'share' && figure.by !== undefined) times.push(figure.by);
    }
    for (const one of asked) {
      const value = fractionOf(one) === undefined ? undefined : figureOf(solved, one, weights)?.value;
      if (typeof value === 'number') times.push(value);
    }
  }
  if (!(Math.min(...times) < lowestTime)) return [];
  const lowest = formatQuantity(lowestTime, 'time', theCase.units);
  return [`the mesh resolves no times before ${lowest}: earlier ones, and what is said of them, are rough`];
}

/** The mesh's own value; nothing stands behind it yet but the mesh. */
function estimate(value: number): Answer {
  return { value, kind: 'estimate' };
}
