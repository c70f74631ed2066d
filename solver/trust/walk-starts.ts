import { type Point, placeText } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import type { CounterRandom } from './counter-random.ts';
import { wallBits } from './walk-chords.ts';
import { toWalking, type WalkGeometry } from './walk-geometry.ts';
import { noStretch } from './walk-media.ts';

/** Where walkers set out, in the case's length unit. */
export type WalkStart =
  | { readonly kind: 'point'; readonly at: Point }
  | { readonly kind: 'spot'; readonly at: Point; readonly radius: number }
  /** Evenly over the part of the compartment in one region, or all of it. */
  | { readonly kind: 'even'; readonly region?: number }
  /** With a density ρ ≥ 0 of any scale: walkers start evenly and carry the weight ρ. */
  | { readonly kind: 'density'; readonly at: (x: number, y: number) => number }
  /** At listed places, each with its weight ≥ 0. */
  | { readonly kind: 'places'; readonly places: readonly Point[]; readonly weights: readonly number[] };

/** Draws a place to start at, in walking coordinates, into `out` (x, y), and gives the weight it carries. */
export type StartDraw = (random: CounterRandom, out: Float64Array) => number;

/** Tries to meet a region by chance before it is said to be empty. */
const mostTries = 1_000_000;

/**
 * How walkers find their start.
 *
 * @throws {SolverError} START_OUTSIDE, from the draw, when nothing of the start lies in the compartment
 */
export function startDraw(start: WalkStart, geometry: WalkGeometry): StartDraw {
  switch (start.kind) {
    case 'point':
      return atPlace(start.at, geometry);
    case 'places': {
      const draws = start.places.map((at) => atPlace(at, geometry));
      const sums = runningSums(start.weights);
      return (random, out) => {
        const u = random.uniform() * sums[sums.length - 1];
        const i = sums.findIndex((sum) => u < sum);
        return draws[Math.max(0, i)](random, out);
      };
    }
    case 'spot':
      return spotDraw(start, geometry);
    case 'even': {
      const { region } = start;
      return evenDraw(geometry, (x, y) => region === undefined || geometry.inRegion(region, x, y));
    }
    case 'density': {
      const even = evenDraw(geometry, () => true);
      const { stretch } = geometry;
      return (random, out) => {
        even(random, out);
        const [x, y] = out;
        return start.at(stretch[0] * x + stretch[1] * y, stretch[1] * x + stretch[2] * y);
      };
    }
  }
}

function runningSums(weights: readonly number[]): number[] {
  let sum = 0;
  return weights.map((weight) => {
    sum += weight;
    return sum;
  });
}

/** One place; on a wall, or outside by no more than a chord errs, it is put a little inside. */
function atPlace(at: Point, geometry: WalkGeometry): StartDraw {
  const { tree, size, twoSided } = geometry;
  let [x, y] = toWalking(geometry.stretch, at[0], at[1]);
  tree.nearest(x, y, wallBits, 4 * size);
  const inside = geometry.inside(x, y);
  if (!inside && tree.distance > 1e-4 * size) throw outside(at);
  if (!inside || tree.distance < 1e-9 * size) {
    const e = 4 * tree.index;
    const ux = tree.ends[e + 2] - tree.ends[e];
    const uy = tree.ends[e + 3] - tree.ends[e + 1];
    const left = ux * (y - tree.ends[e + 1]) - uy * (x - tree.ends[e]);
    const off = ((twoSided[tree.index] === 1 && left < 0 ? -1 : 1) * 1e-9 * size) / Math.hypot(ux, uy);
    x = tree.footX - off * uy;
    y = tree.footY + off * ux;
  }
  return (_, out) => {
    out[0] = x;
    out[1] = y;
    return 1;
  };
}

function spotDraw(start: Extract<WalkStart, { kind: 'spot' }>, geometry: WalkGeometry): StartDraw {
  const { stretch } = geometry;
  return (random, out) => {
    for (let tries = 0; tries < mostTries; tries++) {
      const r = start.radius * Math.sqrt(random.uniform());
      const angle = 2 * Math.PI * random.uniform();
      const at = toWalking(stretch, start.at[0] + r * Math.cos(angle), start.at[1] + r * Math.sin(angle));
      if (!geometry.inside(at[0], at[1])) continue;
      out[0] = at[0];
      out[1] = at[1];
      return 1;
    }
    throw outside(start.at);
  };
}

function evenDraw(geometry: WalkGeometry, takes: (x: number, y: number) => boolean): StartDraw {
  const [left, bottom, right, top] = geometry.box;
  return (random, out) => {
    for (let tries = 0; tries < mostTries; tries++) {
      const x = left + (right - left) * random.uniform();
      const y = bottom + (top - bottom) * random.uniform();
      if (!takes(x, y) || !geometry.inside(x, y)) continue;
      out[0] = x;
      out[1] = y;
      return 1;
    }
    throw outside(geometry.stretch === noStretch ? [left, bottom] : [0, 0]);
  };
}

function outside(at: Point): SolverError {
  return new SolverError(
    'START_OUTSIDE',
    `No place to start from was found in the compartment, near ${placeText(at)}`,
    { at: [at] },
    'Move the start into the compartment.',
  );
}
