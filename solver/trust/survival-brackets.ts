import type { Hooks } from '../../mesher/index.ts';
import { assemble } from '../operator/assemble.ts';
import { triangleWeights } from '../operator/quadrature.ts';
import type { Coefficient, Problem } from '../problem/problem.ts';
import { type Bracketed, between } from './bracketed.ts';
import { type BracketStart, type Brackets, prepareBrackets } from './brackets.ts';
import type { ElementSource } from './element-sources.ts';
import { combinedSolution } from './galerkin-solution.ts';
import { errorNorm, goalBracket } from './goal-bracket.ts';
import { type KnownIntegral, type KnownMeasure, survivalBound, timeBounds } from './survival-bounds.ts';

/** Guaranteed intervals of survival and of times to any share; for a point those of its disc or spot, as estimates. */
export interface SurvivalBrackets {
  /** P(τ > t) for a start. */
  readonly survival: (start: BracketStart, t: number) => Bracketed;
  /** The time by which only the share `left` (between 0 and 1) is left. */
  readonly timeTo: (start: BracketStart, left: number) => Bracketed;
}

/** Shifts of the resolvents, in units of λ₁ (METHODS 6). */
const shifts = [0.5, 2, 8, 32] as const;

/**
 * Brackets S(t) = ∫e^(−λt)dμ(λ) from brackets of resolvents and linear programs. For ρ = c m̂ the measure μ is positive;
 * else S is a quarter of the difference of those of s m̂ ± ρ/s, which are.
 *
 * @param brackets of the problem itself
 * @param problem what they were made from
 * @returns undefined when there is no bracket of the rate from below
 * @throws {SolverError} NOT_CONVERGED, MEMORY_LIMIT, SOLVING_STOPPED
 * Source: METHODS 6.
 */
export function prepareSurvivalBrackets(
  brackets: Brackets,
  problem: Problem,
  hooks: Hooks = {},
): SurvivalBrackets | undefined {
  const { low, high } = brackets.rate();
  if (!(low > 0)) return undefined;
  const shifted = shifts.map((part) => {
    const withLoss = lossAdded(problem, part * high);
    const made = prepareBrackets(assemble(brackets.base.system.mesh, withLoss, hooks), withLoss, hooks);
    return { shift: part * high, brackets: made };
  });
  const known = new Map<BracketStart, (t: number) => { readonly low: number; readonly high: number }>();
  const boundsOf = (
    start: BracketStart,
  ): ((t: number) => { readonly low: number; readonly high: number }) => {
    const held = known.get(start);
    if (held) return held;
    const made = measuresOf(brackets, shifted, start, low);
    known.set(start, made);
    return made;
  };
  const kindOf = (start: BracketStart): Bracketed['kind'] =>
    brackets.takenAs(start) === 'itself' ? 'guaranteed' : 'estimate';
  return {
    survival: (start, t) => {
      if (t <= 0) return between(1, 1, kindOf(start));
      const found = boundsOf(start)(t);
      return between(Math.max(0, found.low), Math.min(1, found.high), kindOf(start));
    },
    timeTo: (start, left) => {
      const bounds = boundsOf(start);
      const found = timeBounds(
        (t) => bounds(t).high,
        (t) => bounds(t).low,
        left,
        brackets.mean(start).value,
      );
      return between(found.low, found.high, kindOf(start));
    },
  };
}

interface Shifted {
  readonly shift: number;
  readonly brackets: Brackets | undefined;
}

/** The problem with the rate s of loss added everywhere: its mean exit time is the resolvent at s. */
function lossAdded(problem: Problem, s: number): Problem {
  const added = (loss: Coefficient | undefined): Coefficient => {
    if (!loss) return { kind: 'constant', value: s };
    if (loss.kind === 'constant') return { kind: 'constant', value: loss.value + s };
    return { kind: 'varying', at: (x, y) => loss.at(x, y) + s };
  };
  return { ...problem, media: problem.media.map((medium) => ({ ...medium, loss: added(medium.loss) })) };
}

function measuresOf(
  own: Brackets,
  shifted: readonly Shifted[],
  start: BracketStart,
  least: number,
): (t: number) => { readonly low: number; readonly high: number } {
  const share = own.solutions.timesMean(start);
  if (share !== undefined) {
    const bound = survivalBound(measureOf(own, shifted, start, least, 0, 1 / Math.sqrt(share)));
    return (t) => ({ low: bound(t, -1), high: bound(t, 1) });
  }
  const ofMass = integralOf(own.solutions.mean().source);
  const ofStart = squareOverMass(own, own.solutions.dual(start).source);
  const s = (ofStart.high / ofMass) ** 0.25;
  const [plus, minus] = [1, -1].map((sign) =>
    survivalBound(measureOf(own, shifted, start, least, s, sign / s)),
  );
  return (t) => ({
    low: (plus(t, -1) - minus(t, 1)) / 4,
    high: (plus(t, 1) - minus(t, -1)) / 4,
  });
}

/** What is known of the measure of g = a m̂ + b ρ: ∫g²/m̂, ∫gR_s g and ∫m̂(R_0 g)². */
function measureOf(
  own: Brackets,
  shifted: readonly Shifted[],
  start: BracketStart,
  least: number,
  a: number,
  b: number,
): KnownMeasure {
  const integrals: KnownIntegral[] = [];
  for (const { shift, brackets } of [{ shift: 0, brackets: own }, ...shifted]) {
    if (!brackets) continue;
    const { mean, dual } = brackets.solutions;
    const g = combinedSolution(brackets.base, a, mean(), b, dual(start));
    const { low, high } = goalBracket(brackets.base, g, g);
    integrals.push({ shift, power: 1, low: Math.max(0, low), high });
  }
  const { base, solutions } = own;
  const g = combinedSolution(base, a, solutions.mean(), b, solutions.dual(start));
  const byG = combinedSolution(base, a, solutions.byMean(), b, solutions.byDual(start));
  // ∫m̂v² = 2∫m̂v_h v − ∫m̂v_h² + ∫m̂(v − v_h)², the last at most ‖v − v_h‖²/λ₁.
  const once = goalBracket(base, g, byG);
  const { triangles } = base.system.mesh;
  let square = 0;
  for (let q = 0; q < byG.source.load.length; q++) square += byG.source.load[q] * g.field[triangles[q]];
  const unseen = errorNorm(base, g) ** 2 / least;
  integrals.push({
    ...{ shift: 0, power: 2 },
    low: Math.max(0, 2 * once.low - square),
    high: 2 * once.high - square + unseen,
  });
  return { least, total: totalOf(own, start, a, b), integrals };
}

/** ∫(a m̂ + b ρ)²/m̂ = a²∫m̂ + 2ab + b²∫ρ²/m̂. */
function totalOf(own: Brackets, start: BracketStart, a: number, b: number): KnownMeasure['total'] {
  const { low, high } = squareOverMass(own, own.solutions.dual(start).source);
  const rest = a * a * integralOf(own.solutions.mean().source) + 2 * a * b;
  return { low: rest + b * b * low, high: rest + b * b * high };
}

function integralOf({ load }: ElementSource): number {
  return load.reduce((sum, part) => sum + part, 0);
}

/** ∫f²/m̂ between its values with the largest and the smallest m̂ of each triangle. */
function squareOverMass({ base }: Brackets, { load, oscillation }: ElementSource) {
  const { geometry, coefficients } = base;
  const { mass, per, step } = coefficients;
  let low = 0;
  let high = 0;
  for (let t = 0; t < geometry.count; t++) {
    let least = Number.POSITIVE_INFINITY;
    let most = 0;
    for (let g = 0; g < triangleWeights.length; g++) {
      least = Math.min(least, mass[t * per + g * step]);
      most = Math.max(most, mass[t * per + g * step]);
    }
    const mean = load[3 * t] + load[3 * t + 1] + load[3 * t + 2];
    const square = (mean * mean) / geometry.area[t] + (oscillation ? oscillation[t] ** 2 : 0);
    low += square / most;
    high += square / least;
  }
  return { low, high };
}
