import { type Mesh, placeText } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import type { Coefficient, Problem, Tensor } from './problem.ts';

type Entries = readonly [xx: number, xy: number, yy: number];

/** The tensor at a place. */
export function tensorAt(tensor: Tensor, x: number, y: number): Entries {
  return tensor.kind === 'constant' ? tensor.value : tensor.at(x, y);
}

/**
 * h D, throwing where D is not positive definite and finite.
 */
export function tensorTimesDepth(tensor: Tensor, depth: Coefficient | undefined): Tensor {
  if (tensor.kind === 'constant' && positive(tensor.value) && !depth) return tensor;
  return {
    kind: 'varying',
    at: (x, y) => {
      const entries = tensorAt(tensor, x, y);
      if (!positive(entries)) throw notPositive(entries, x, y);
      const h = depth ? (depth.kind === 'constant' ? depth.value : depth.at(x, y)) : 1;
      return [h * entries[0], h * entries[1], h * entries[2]];
    },
  };
}

function positive([xx, xy, yy]: Entries): boolean {
  return xx > 0 && xx * yy - xy * xy > 0 && Number.isFinite(xx + yy);
}

function notPositive(entries: Entries, x: number, y: number): SolverError {
  return new SolverError(
    'DIFFUSION_NOT_POSITIVE',
    `The diffusion tensor (xx, xy, yy) is (${entries.join(', ')}) at ${placeText([x, y])}: not positive definite`,
    { at: [[x, y]] },
    'Give a symmetric tensor with positive xx, yy and xx·yy > xy² everywhere in the compartment.',
  );
}

/**
 * ∇·D of a varying tensor: as given, else by central differences of fourth order (Abramowitz & Stegun 1964, 25.3.21).
 *
 * @param size of the compartment; a step of 2⁻¹⁴ of it leaves an error near 1e-12
 * @returns undefined for a constant tensor
 */
export function tensorDivergence(
  tensor: Tensor,
  size: number,
): ((x: number, y: number) => readonly [number, number]) | undefined {
  if (tensor.kind === 'constant') return undefined;
  if (tensor.divergence) return tensor.divergence;
  const { at } = tensor;
  const step = 2 ** -14 * size;
  const along = (entry: 0 | 1 | 2, x: number, y: number, dx: number, dy: number): number =>
    (8 * (at(x + dx, y + dy)[entry] - at(x - dx, y - dy)[entry]) -
      (at(x + 2 * dx, y + 2 * dy)[entry] - at(x - 2 * dx, y - 2 * dy)[entry])) /
    (12 * step);
  return (x, y) => [
    along(0, x, y, step, 0) + along(1, x, y, 0, step),
    along(1, x, y, step, 0) + along(2, x, y, 0, step),
  ];
}

/**
 * Refuses what a convention cannot mean for a tensor (METHODS 1): under Itô a tensor may vary but not jump, under
 * Stratonovich a tensor that varies or jumps depends on which of its roots the noise takes.
 *
 * @throws {SolverError} TENSOR_CONVENTION
 */
export function requireTensorConvention(problem: Problem, mesh: Mesh): void {
  if (problem.noise === 'isothermal') return;
  const used = new Set<number>(mesh.regionSet);
  const media = problem.media.filter((_, r) => used.has(r));
  if (media.every((medium) => !medium.tensor)) return;
  const same = media.every((medium) => sameTensor(medium.tensor, media[0].tensor));
  const varies = media.some((medium) => medium.tensor?.kind === 'varying');
  if (same && (problem.noise === 'ito' || !varies)) return;
  throw new SolverError(
    'TENSOR_CONVENTION',
    problem.noise === 'ito'
      ? 'Under Itô a diffusion tensor may not jump from one region to the next'
      : 'Under Stratonovich the process with a diffusion tensor that varies depends on which root of it the noise takes',
    {},
    'Take the isothermal convention, or give one tensor for the whole compartment.',
  );
}

function sameTensor(a: Tensor | undefined, b: Tensor | undefined): boolean {
  if (a === b) return true;
  if (a?.kind !== 'constant' || b?.kind !== 'constant') return false;
  return a.value.every((entry, i) => entry === b.value[i]);
}
