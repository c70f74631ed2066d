import type { Point } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import type { Coefficient, NoiseConvention } from './problem.ts';

/** α of METHODS 1 for each way of reading the noise. */
export const noiseAlpha: Readonly<Record<NoiseConvention, number>> = {
  ito: 0,
  stratonovich: 0.5,
  isothermal: 1,
};

/** x^α for the three α in use, without `Math.pow` where a root will do. */
export function powerAlpha(d: number, alpha: number): number {
  return alpha === 1 ? d : alpha === 0 ? 1 : Math.sqrt(d);
}

/** D^(α−1). */
export function powerAlphaLessOne(d: number, alpha: number): number {
  return alpha === 1 ? 1 : alpha === 0 ? 1 / d : 1 / Math.sqrt(d);
}

/** Value of a coefficient at a place. */
export function valueAt(coefficient: Coefficient, x: number, y: number): number {
  return coefficient.kind === 'constant' ? coefficient.value : coefficient.at(x, y);
}

/**
 * D at a place, checked.
 *
 * @throws {SolverError} DIFFUSION_NOT_POSITIVE with the place
 */
export function diffusionAt(diffusion: Coefficient, x: number, y: number): number {
  const d = valueAt(diffusion, x, y);
  if (d > 0 && d < Number.POSITIVE_INFINITY) return d;
  throw notPositive(d, [x, y]);
}

function notPositive(d: number, at: Point): SolverError {
  return new SolverError(
    'DIFFUSION_NOT_POSITIVE',
    `The diffusion coefficient is ${d} at (${at[0]}, ${at[1]})`,
    { at: [at] },
    'Give a coefficient that is positive and finite everywhere in the compartment.',
  );
}
