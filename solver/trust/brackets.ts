import type { Hooks } from '../../mesher/index.ts';
import type { System } from '../operator/system.ts';
import type { Problem } from '../problem/problem.ts';
import { type Bracketed, between, linear, within } from './bracketed.ts';
import { type ConsistentSystem, consistentSystem } from './consistent-system.ts';
import { type DiscStart, discStart } from './disc-start.ts';
import { type RateBounds, rateBounds } from './eigenvalue-bounds.ts';
import {
  coefficientSource,
  densitySource,
  discSource,
  type ElementSource,
  evenSource,
} from './element-sources.ts';
import { type GalerkinSolution, galerkinSolution, scaledSolution } from './galerkin-solution.ts';
import { errorNorm, goalBracket } from './goal-bracket.ts';
import { shareProblems } from './share-problems.ts';
import { widthShares } from './width-shares.ts';

/** A start that brackets can be given for; lengths in the case's length unit. */
export type BracketStart =
  | { readonly kind: 'even'; readonly inside?: (regionSet: number) => boolean }
  | {
      readonly kind: 'density';
      readonly density: (x: number, y: number) => number;
      readonly inside?: (regionSet: number) => boolean;
    }
  | { readonly kind: 'spot'; readonly x: number; readonly y: number; readonly radius: number }
  | { readonly kind: 'point'; readonly x: number; readonly y: number };

/**
 * The ramp of a share's wall values where exits touch, in edges, and its length relative to √area: short ones cost
 * energy, long ones let the two solutions part. Measured on graded and even meshes (tests/bench/bracket.bench.ts).
 */
const shareRamp = { edges: 8, ofSize: 0.05 } as const;

/** Guaranteed intervals for one system; solutions are kept, so that asking again costs nothing. */
export interface Brackets {
  readonly base: ConsistentSystem;
  /** Mean exit time. */
  readonly mean: (start: BracketStart) => Bracketed;
  /** Chance to leave by an exit, or with −1 to be lost on the way. */
  readonly share: (start: BracketStart, exit: number) => Bracketed;
  /** Second moment of the exit time. */
  readonly secondMoment: (start: BracketStart) => Bracketed;
  readonly standardDeviation: (start: BracketStart) => Bracketed;
  /** λ₁ from both sides. */
  readonly rate: () => RateBounds;
  /** 1/λ₁. */
  readonly decayTime: () => Bracketed;
  /** What each triangle adds to the width of the mean's bracket: where the mesh should be finer. */
  readonly widthShares: (start: BracketStart) => Float64Array;
  /** The solutions behind the figures. */
  readonly solutions: BracketSolutions;
  /** Whether a start is taken as it is, as the disc that stands for a point exactly, or as a spot in its place. */
  readonly takenAs: (start: BracketStart) => 'itself' | 'disc' | 'spot';
}

/** Galerkin solutions with right-hand side m̂, ρ, m̂u_h and m̂z_h. */
export interface BracketSolutions {
  readonly mean: () => GalerkinSolution;
  readonly dual: (start: BracketStart) => GalerkinSolution;
  readonly byMean: () => GalerkinSolution;
  readonly byDual: (start: BracketStart) => GalerkinSolution;
  /** c where ρ = c m̂; undefined where they are not proportional, or not seen to be. */
  readonly timesMean: (start: BracketStart) => number | undefined;
}

/** Radius of the spot that takes the place of a point no disc stands for, relative to the size of the mesh. */
const spotOfSize = 1 / 200;

/** A start as the dual sees it. */
interface Dual {
  readonly takenAs: 'itself' | 'disc' | 'spot';
  readonly solution: GalerkinSolution;
  readonly disc?: DiscStart;
}

/**
 * Prepares the guaranteed brackets of METHODS 6 for a reversible process.
 *
 * @param problem what the system was assembled from
 * @returns undefined when the process is irreversible, or ψ ranges so widely that e^ψ is not formed
 * @throws {SolverError} what the coefficients throw, SOLVING_STOPPED; the brackets also NOT_CONVERGED, START_OUTSIDE
 * Source: METHODS 6; Prager & Synge 1947; Braess & Schöberl 2008; Ern & Vohralík 2015.
 */
export function prepareBrackets(system: System, problem: Problem, hooks: Hooks = {}): Brackets | undefined {
  if (!system.symmetric || system.cycle) return undefined;
  const base = consistentSystem(system, problem, hooks);
  const massSource = (field?: Float64Array): ElementSource =>
    coefficientSource(system.mesh, base.geometry, base.coefficients, base.coefficients.mass, field);
  const solve = (source: ElementSource) => galerkinSolution(base, { source }, hooks);
  const meanSolution = once(() => solve(massSource()));
  const byMean = once(() => solve(massSource(meanSolution().field)));
  const dual = remembered((start: BracketStart) => dualOf(base, start, meanSolution, hooks));
  const byDual = remembered((start: BracketStart): GalerkinSolution => {
    const { solution } = dual(start);
    const share = timesMean(base, start);
    return share === undefined ? solve(massSource(solution.field)) : scaledSolution(byMean(), share);
  });
  const shares = remembered((exit: number) => {
    const ramp = { edges: shareRamp.edges, length: shareRamp.ofSize * Math.sqrt(areaOf(base)) };
    const { below, above } = shareProblems(base, exit, ramp);
    const low = galerkinSolution(base, below, hooks);
    return { low, high: above.wallValues === below.wallValues ? low : galerkinSolution(base, above, hooks) };
  });
  const rate = once(() => rateBounds(base, hooks));
  const rounding = once(() => relativeRounding(base, meanSolution()));
  const labelled = (start: BracketStart, bracket: Bracketed): Bracketed => {
    // Widths of figures found exactly are rounding themselves.
    const moved = rounding() > harmless && rounding() * bracket.high > 0.1 * (bracket.high - bracket.low);
    return moved || dual(start).takenAs === 'spot' ? { ...bracket, kind: 'estimate' } : bracket;
  };
  const mean = (start: BracketStart): Bracketed => {
    const { solution, disc } = dual(start);
    const bracket = goalBracket(base, meanSolution(), solution);
    return labelled(start, within(linear(bracket, 1, disc?.shift ?? 0), 0, Number.POSITIVE_INFINITY));
  };
  const secondMoment = (start: BracketStart): Bracketed => {
    const { solution, disc } = dual(start);
    const u = meanSolution();
    const w = byDual(start);
    const first = goalBracket(base, u, w);
    const second = goalBracket(base, byMean(), solution);
    let both = 0;
    for (let q = 0; q < w.source.load.length; q++) {
      both += w.source.load[q] * u.field[system.mesh.triangles[q]];
    }
    const unseen = (errorNorm(base, u) * errorNorm(base, solution)) / rate().low;
    const moment = between(
      2 * (first.low + second.low - both - unseen),
      2 * (first.high + second.high - both + unseen),
    );
    if (!disc) return labelled(start, moment);
    // r⁴/(192D²) = shift²/3.
    const at = mean(start);
    const add = (time: number): number => 2 * disc.shift * (time - disc.shift / 3);
    return labelled(start, between(moment.low + add(at.low), moment.high + add(at.high)));
  };
  return {
    ...{ base, mean, secondMoment, rate },
    share: (start, exit) => {
      const { low, high } = shares(exit);
      const z = dual(start).solution;
      const below = goalBracket(base, low, z);
      const above = high === low ? below : goalBracket(base, high, z);
      return labelled(start, within(between(below.low, above.high), 0, 1));
    },
    standardDeviation: (start) => deviation(mean(start), secondMoment(start)),
    decayTime: () => between(1 / rate().high, 1 / rate().low),
    widthShares: (start) => widthShares(base, meanSolution(), dual(start).solution),
    solutions: {
      ...{ mean: meanSolution, byMean, byDual },
      dual: (start) => dual(start).solution,
      timesMean: (start) => timesMean(base, start),
    },
    takenAs: (start) => dual(start).takenAs,
  };
}

/** Relative errors below this are rounding of any sum. */
const harmless = 1e-10;

/** Relative error that one rounding of each stored diagonal would bring: 2⁻⁵³ ΣK_ii u_i ÷ Σf_i (METHODS 1). */
function relativeRounding(
  { operator, system }: ConsistentSystem,
  { field, source }: GalerkinSolution,
): number {
  let diagonal = 0;
  for (let i = 0; i < system.size; i++) diagonal += operator.diagonal[i] * field[system.nodeOf[i]];
  return (2 ** -53 * diagonal) / source.load.reduce((sum, part) => sum + part, 0);
}

/** √(second moment − mean²) from the ends of both intervals. */
function deviation(mean: Bracketed, second: Bracketed): Bracketed {
  const low = Math.sqrt(Math.max(0, second.low - mean.high ** 2));
  const high = Math.sqrt(Math.max(0, second.high - Math.max(0, mean.low) ** 2));
  return between(low, high, mean.kind === 'guaranteed' ? second.kind : mean.kind);
}

function dualOf(
  base: ConsistentSystem,
  start: BracketStart,
  mean: () => GalerkinSolution,
  hooks: Hooks,
): Dual {
  const { system, geometry } = base;
  const { mesh } = system;
  const solve = (source: ElementSource) => galerkinSolution(base, { source }, hooks);
  const everywhere = (): boolean => true;
  switch (start.kind) {
    case 'even': {
      const share = timesMean(base, start);
      const solution =
        share === undefined
          ? solve(evenSource(mesh, geometry, start.inside ?? everywhere))
          : scaledSolution(mean(), share);
      return { takenAs: 'itself', solution };
    }
    case 'density':
      return {
        takenAs: 'itself',
        solution: solve(densitySource(mesh, geometry, start.density, start.inside ?? everywhere)),
      };
    case 'spot':
      return {
        takenAs: 'itself',
        solution: solve(discSource(mesh, geometry, start.x, start.y, start.radius)),
      };
    case 'point': {
      const disc = discStart(base, start.x, start.y);
      if (disc) return { takenAs: 'disc', solution: solve(disc.source), disc };
      const radius = spotOfSize * Math.sqrt(areaOf(base));
      return { takenAs: 'spot', solution: solve(discSource(mesh, geometry, start.x, start.y, radius)) };
    }
  }
}

function areaOf({ geometry }: ConsistentSystem): number {
  return geometry.area.reduce((sum, area) => sum + area, 0);
}

/** The dual of an even start everywhere is this times the mean exit time where m̂ is the same everywhere. */
function timesMean(base: ConsistentSystem, start: BracketStart): number | undefined {
  const { coefficients } = base;
  if (start.kind !== 'even' || start.inside) return undefined;
  const { mass } = coefficients;
  if (mass.some((m) => m !== mass[0])) return undefined;
  return 1 / (mass[0] * areaOf(base));
}

function once<T>(make: () => T): () => T {
  let held: { readonly value: T } | undefined;
  return () => {
    held ??= { value: make() };
    return held.value;
  };
}

function remembered<K, T>(make: (key: K) => T): (key: K) => T {
  const held = new Map<K, T>();
  return (key) => {
    const known = held.get(key);
    if (known !== undefined) return known;
    const made = make(key);
    held.set(key, made);
    return made;
  };
}
