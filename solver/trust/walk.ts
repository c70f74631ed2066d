import type { Hooks } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import { borderStep } from './border-step.ts';
import { CounterRandom } from './counter-random.ts';
import { discStep, starStep } from './star-step.ts';
import { timeStep } from './time-step.ts';
import { chordBits, wallBits } from './walk-chords.ts';
import type { WalkGeometry } from './walk-geometry.ts';
import { startDraw, type WalkStart } from './walk-starts.ts';
import { type StepLengths, stepLengths, WALKING, type Walker, type WalkStage } from './walker.ts';
import { stepReach } from './wall-ahead.ts';

/**
 * The two step sizes of a walk, see {@link stepLengths}. Where all steps are exact 'fine' is enough.
 */
export type WalkLevel = 'fine' | 'coarse';

export interface WalkOptions extends Hooks {
  /** Walkers first … first + count − 1, each with numbers of its own. */
  readonly first?: number;
  readonly count: number;
  readonly seed?: number;
  readonly level?: WalkLevel;
  /** Steps of one walker after which the walk is given up. Default {@link mostWalkSteps}. */
  readonly mostSteps?: number;
}

/** What became of a range of walkers, in the order of their numbers; fewer than asked when it was stopped. */
export interface Walks {
  readonly first: number;
  /** Time to the end, in the case's time unit. */
  readonly times: Float64Array;
  /** Exit, or −1 for lost. */
  readonly ends: Int32Array;
  /** Weight each walker carries from its start. */
  readonly weights: Float64Array;
  readonly steps: number;
}

export const mostWalkSteps = 5_000_000;

const stepsBetweenPolls = 1024;
const special = chordBits.absorbing | chordBits.partlyAbsorbing | chordBits.permeable | chordBits.border;

/**
 * Sends walkers from a start to where they end. What a walker does depends on its number, the seed and the level only:
 * any split of a range gives the same digits.
 *
 * @throws {SolverError} WALK_TOO_LONG when a walker finds no way out in `mostSteps`; START_OUTSIDE,
 *   DIFFUSION_NOT_POSITIVE, DRIFT_NOT_FINITE, LOSS_NEGATIVE with the place
 */
export function walk(geometry: WalkGeometry, start: WalkStart, options: WalkOptions): Walks {
  const { first = 0, count, seed = 1, level = 'fine', mostSteps = mostWalkSteps, stop, progress } = options;
  const random = new CounterRandom(seed, level === 'fine' ? 0 : 1);
  const stage: WalkStage = {
    geometry,
    random,
    shell: 1e-5 * geometry.size,
    aside: 1e-9 * geometry.size,
    lengths: stepLengths(geometry, level),
  };
  const draw = startDraw(start, geometry);
  const times = new Float64Array(count);
  const ends = new Int32Array(count);
  const weights = new Float64Array(count);
  const place = new Float64Array(2);
  let steps = 0;
  let done = 0;
  for (; done < count; done++) {
    random.begin(first + done);
    weights[done] = draw(random, place);
    const [x, y] = place;
    const medium = geometry.mediumOf(geometry.maskAt(x, y));
    const walker: Walker = { x, y, time: 0, end: WALKING, on: -1, side: 1, medium };
    let own = 0;
    while (walker.end === WALKING) {
      if (++own % stepsBetweenPolls === 0) {
        if (stop?.()) break;
        if (own >= mostSteps) throw tooLong(mostSteps, walker);
      }
      step(stage, walker);
    }
    if (walker.end === WALKING || stop?.()) break;
    steps += own;
    times[done] = walker.time;
    ends[done] = walker.end;
    if (progress) progress((done + 1) / count);
  }
  return {
    first,
    times: times.subarray(0, done),
    ends: ends.subarray(0, done),
    weights: weights.subarray(0, done),
    steps,
  };
}

/** The longest step that is right where the walker is. */
function step(stage: WalkStage, walker: Walker): void {
  const { geometry, lengths, shell } = stage;
  const { tree, rims, exit, size } = geometry;
  const { medium } = walker;
  if (medium.plain) {
    tree.nearest(walker.x, walker.y, special, 4 * size);
    const { index, distance } = tree;
    const bit = index < 0 ? 0 : tree.bits[index];
    if (bit === chordBits.absorbing && distance < shell) walker.end = exit[index];
    else if (bit === chordBits.border && borderStep(stage, walker, index, distance)) return;
    else if (distance < closest(bit, lengths)) timeStep(stage, walker);
    else starStep(stage, walker, Math.max(shell, rims.nearest(walker.x, walker.y, distance)));
    return;
  }
  if (!medium.drift && !Number.isNaN(medium.constantDiffusion + medium.constantRate)) {
    tree.nearest(walker.x, walker.y, wallBits | chordBits.border, 4 * size);
    const { index, distance } = tree;
    const bit = index < 0 ? 0 : tree.bits[index];
    if (bit === chordBits.absorbing && distance < shell) walker.end = exit[index];
    else if (bit !== chordBits.absorbing && distance < closest(bit, lengths)) timeStep(stage, walker);
    else discStep(stage, walker, distance);
    return;
  }
  timeStep(stage, walker);
}

/** Nearer than this to a feature, steps in time take over. */
function closest(bit: number, { far, border }: StepLengths): number {
  if (bit === chordBits.absorbing || bit === 0) return 0;
  return bit === chordBits.border ? stepReach * border : far;
}

function tooLong(mostSteps: number, walker: Walker): SolverError {
  return new SolverError(
    'WALK_TOO_LONG',
    `A walker was still inside after ${mostSteps} steps`,
    { at: [[walker.x, walker.y]] },
    'Times this long are not checked by trajectories: leave the check out with paths 0.',
  );
}
