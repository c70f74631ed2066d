import type { CounterRandom } from './counter-random.ts';
import type { WalkGeometry } from './walk-geometry.ts';
import type { WalkMedium } from './walk-media.ts';

/** Where a walker ended: an exit's number, or one of these. */
export const LOST = -1;
export const WALKING = -2;

/** One walker under way; places in walking coordinates. */
export interface Walker {
  x: number;
  y: number;
  /** Time so far; for a step of unknown length its mean, which leaves the mean exit time unbiased. */
  time: number;
  /** Exit, {@link LOST} or {@link WALKING}. */
  end: number;
  /** The reflecting chord it stands on, −1 for none, and the side: 1 left, −1 right. */
  on: number;
  side: number;
  medium: WalkMedium;
}

/** Everything a step needs beside the walker; made once per range of walkers. */
export interface WalkStage {
  readonly geometry: WalkGeometry;
  readonly random: CounterRandom;
  /** Nearer than this to an absorbing wall is caught; also the least radius of a step. */
  readonly shell: number;
  /** How far off a wall a walker is put so that its side is beyond doubt. */
  readonly aside: number;
  /** Lengths of steps in time, as standard deviation per axis. */
  readonly lengths: StepLengths;
}

/** All in walking length. */
export interface StepLengths {
  /** At most; also how near to a wall that is not absorbing steps in time begin. */
  readonly far: number;
  /** Least beside a border between media. */
  readonly border: number;
  /** Least at corners and ends of walls. */
  readonly least: number;
  /** The part that a step may take of D/|b|, of 1/rate and of the way to the second wall. */
  readonly scale: number;
}

/**
 * Step lengths of the coarser or, at half the scale, the finer walk. What errs with the square of the length is halved,
 * what errs with the length itself (at borders, corners, ends of walls) is quartered, so that one extrapolation,
 * (4·fine − coarse)/3, takes away both.
 */
export function stepLengths(geometry: WalkGeometry, level: 'fine' | 'coarse'): StepLengths {
  const { size } = geometry;
  const scale = level === 'fine' ? 0.5 : 1;
  return {
    far: (scale * size) / 16,
    border: (scale * scale * size) / 50,
    least: scale * scale * Math.min(size / 500, geometry.shortestWall / 16),
    scale,
  };
}
