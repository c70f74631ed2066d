import { placeText } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import { driftNotFinite, noiseAlpha, valueAt } from '../problem/medium-terms.ts';
import type { Coefficient, Drift, Medium, NoiseConvention, Tensor } from '../problem/problem.ts';

/** What a walker meets in one medium; places in walking coordinates (see {@link Stretch}). */
export interface WalkMedium {
  /** D where it is the same everywhere, else NaN. */
  readonly constantDiffusion: number;
  readonly diffusion: (x: number, y: number) => number;
  /** D without a check, for places beyond a wall: it may be no number there. */
  readonly continuedDiffusion: (x: number, y: number) => number;
  /** b and what a varying depth adds, into `out`; absent where nothing pushes. */
  readonly drift?: (x: number, y: number, out: Float64Array) => void;
  /** Total rate of being lost or caught by the floor; absent where it is zero throughout. */
  readonly rate?: (x: number, y: number) => number;
  readonly constantRate: number;
  /** Exit of the floor (−1: none), and the part of the total rate that is its own. */
  readonly floorExit: number;
  readonly floorPart: (x: number, y: number) => number;
  /** Nothing but one D: steps to the rim of what a walker sees are exact. */
  readonly plain: boolean;
}

/**
 * Walking coordinates x′ = S⁻¹x with S = √D for a tensor that is the same everywhere: there D is 1, a wall's normal
 * derivative is the conormal one over |Sn|. Without a tensor S = 1.
 */
export type Stretch = readonly [xx: number, xy: number, yy: number];

export const noStretch: Stretch = [1, 0, 1];

/** What all media share. */
export interface MediaSetting {
  readonly noise: NoiseConvention;
  readonly depth?: Coefficient;
  readonly stretch: Stretch;
  /** √area, for steps of numerical derivatives. */
  readonly size: number;
}

/** One medium for walkers. */
export function walkMedium(medium: Medium, setting: MediaSetting): WalkMedium {
  const { stretch } = setting;
  const place = (f: (x: number, y: number) => number) =>
    stretch === noStretch
      ? f
      : (x: number, y: number): number => f(stretch[0] * x + stretch[1] * y, stretch[1] * x + stretch[2] * y);
  const d: Coefficient = medium.tensor ? { kind: 'constant', value: 1 } : medium.diffusion;
  const diffusion = place(positiveDiffusion(d));
  const depth = setting.depth;
  const h = depth && place((x, y) => valueAt(depth, x, y));
  const loss = medium.loss && place(lossRate(medium.loss));
  const { floor } = medium;
  const floorRate = floor && h && ((x: number, y: number): number => floor.kappa / h(x, y));
  const rate = sum(loss, floorRate);
  const constantRate =
    (medium.loss === undefined || medium.loss.kind === 'constant') &&
    (floor === undefined || depth?.kind === 'constant')
      ? (rate?.(0, 0) ?? 0)
      : Number.NaN;
  const drift = pushOf(medium.drift, diffusion, depth?.kind === 'varying' ? h : undefined, setting, place);
  const constantDiffusion = d.kind === 'constant' ? diffusion(0, 0) : Number.NaN;
  return {
    constantDiffusion,
    diffusion,
    continuedDiffusion: place((x, y) => valueAt(d, x, y)),
    ...(drift && { drift }),
    ...(rate && { rate }),
    constantRate,
    floorExit: floor?.exit ?? -1,
    floorPart: floorRate && rate ? (x, y) => floorRate(x, y) / rate(x, y) : () => 0,
    plain: !Number.isNaN(constantDiffusion) && drift === undefined && constantRate === 0,
  };
}

type Field = (x: number, y: number) => number;

function sum(a: Field | undefined, b: Field | undefined): Field | undefined {
  return a && b ? (x, y) => a(x, y) + b(x, y) : (a ?? b);
}

function positiveDiffusion(d: Coefficient): Field {
  return (x, y) => {
    const v = valueAt(d, x, y);
    if (v > 0 && v < Number.POSITIVE_INFINITY) return v;
    throw new SolverError(
      'DIFFUSION_NOT_POSITIVE',
      `The diffusion coefficient is ${v} at ${placeText([x, y])}`,
      { at: [[x, y]] },
      'Give a diffusion coefficient that is positive and finite everywhere in the compartment.',
    );
  };
}

function lossRate(c: Coefficient): Field {
  return (x, y) => {
    const v = valueAt(c, x, y);
    if (v >= 0 && v < Number.POSITIVE_INFINITY) return v;
    throw new SolverError(
      'LOSS_NEGATIVE',
      `The loss rate is ${v} at ${placeText([x, y])}`,
      { at: [[x, y]] },
      'Give a loss rate that is zero or positive, and finite, everywhere.',
    );
  };
}

/**
 * b + D∇ln h. Components b turn into S⁻¹b; a potential's b = −D∇V is taken in walking coordinates, where the same
 * formula holds with D = 1.
 */
function pushOf(
  drift: Drift | undefined,
  diffusion: Field,
  depth: Field | undefined,
  { stretch, size }: MediaSetting,
  place: (f: Field) => Field,
): ((x: number, y: number, out: Float64Array) => void) | undefined {
  if (!drift && !depth) return undefined;
  const step = 2 ** -14 * size;
  const slope = (f: Field, x: number, y: number, out: Float64Array): void => {
    out[0] = oneSlope(f(x - step, y), f(x + step, y), f, x, y, step);
    out[1] = oneSlope(f(x, y - step), f(x, y + step), f, x, y, step);
  };
  const potential = drift?.kind === 'potential' ? place((x, y) => valueAt(drift.value, x, y)) : undefined;
  const bx = drift?.kind === 'components' ? place((x, y) => valueAt(drift.x, x, y)) : undefined;
  const by = drift?.kind === 'components' ? place((x, y) => valueAt(drift.y, x, y)) : undefined;
  const det = stretch[0] * stretch[2] - stretch[1] * stretch[1];
  const depths = new Float64Array(2);
  return (x, y, out) => {
    out[0] = 0;
    out[1] = 0;
    if (potential) {
      slope(potential, x, y, out);
      const d = diffusion(x, y);
      out[0] *= -d;
      out[1] *= -d;
    } else if (bx && by) {
      const p = bx(x, y);
      const q = by(x, y);
      out[0] = (stretch[2] * p - stretch[1] * q) / det;
      out[1] = (stretch[0] * q - stretch[1] * p) / det;
    }
    if (depth) {
      slope(depth, x, y, depths);
      const scale = diffusion(x, y) / depth(x, y);
      out[0] += scale * depths[0];
      out[1] += scale * depths[1];
    }
    if (!Number.isFinite(out[0] + out[1])) throw driftNotFinite(x, y, out[0], out[1]);
  };
}

/** Central difference; one-sided where the function ends. */
function oneSlope(before: number, after: number, f: Field, x: number, y: number, step: number): number {
  if (Number.isFinite(before) && Number.isFinite(after)) return (after - before) / (2 * step);
  return Number.isFinite(after) ? (after - f(x, y)) / step : (f(x, y) - before) / step;
}

/** True where crossing from one medium to the other changes nothing. */
export function sameMedium(a: Medium, b: Medium): boolean {
  return (
    a === b ||
    (sameCoefficient(a.diffusion, b.diffusion) &&
      sameTensor(a.tensor, b.tensor) &&
      sameDrift(a.drift, b.drift) &&
      sameCoefficient(a.loss, b.loss) &&
      a.floor?.kappa === b.floor?.kappa &&
      a.floor?.exit === b.floor?.exit)
  );
}

function sameCoefficient(a: Coefficient | undefined, b: Coefficient | undefined): boolean {
  if (a === b) return true;
  if (a?.kind === 'constant') return b?.kind === 'constant' && Object.is(a.value, b.value);
  return a?.kind === 'varying' && b?.kind === 'varying' && a.at === b.at;
}

function sameTensor(a: Tensor | undefined, b: Tensor | undefined): boolean {
  if (a === b) return true;
  if (a?.kind !== 'constant' || b?.kind !== 'constant') return false;
  return a.value.every((entry, i) => entry === b.value[i]);
}

function sameDrift(a: Drift | undefined, b: Drift | undefined): boolean {
  if (a === b) return true;
  if (a?.kind === 'potential') return b?.kind === 'potential' && sameCoefficient(a.value, b.value);
  return b?.kind === 'components' && sameCoefficient(a?.x, b.x) && sameCoefficient(a?.y, b.y);
}

/**
 * The stretch of walking coordinates for these media: the root of their one tensor.
 *
 * @returns undefined where tensors vary or differ, or stand beside plain D: walkers have no step for that
 */
export function stretchOf(media: readonly Medium[]): Stretch | undefined {
  if (media.every(({ tensor }) => tensor === undefined)) return noStretch;
  const [first] = media;
  if (first.tensor?.kind !== 'constant') return undefined;
  if (!media.every(({ tensor }) => sameTensor(tensor, first.tensor))) return undefined;
  const [xx, xy, yy] = first.tensor.value;
  const det = Math.sqrt(xx * yy - xy * xy);
  if (!(xx > 0 && det > 0)) return undefined;
  // Root of a 2 × 2 matrix: (D + √det·1)/√(trace + 2√det) (Levinger 1980, recalled).
  const scale = Math.sqrt(xx + yy + 2 * det);
  return [(xx + det) / scale, xy / scale, (yy + det) / scale];
}

/** α of the noise; a constant tensor has none to speak of, which 0 stands for. */
export function alphaOf(noise: NoiseConvention, stretch: Stretch): number {
  return stretch === noStretch ? noiseAlpha[noise] : 0;
}
