import { placeText } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import type { Coefficient, Drift, Medium, NoiseConvention, Problem, Tensor } from './problem.ts';
import { tensorDivergence, tensorTimesDepth } from './tensor-terms.ts';

/** α of METHODS 1 for each way of reading the noise. */
export const noiseAlpha: Readonly<Record<NoiseConvention, number>> = {
  ito: 0,
  stratonovich: 0.5,
  isothermal: 1,
};

/**
 * A medium as the operator needs it, depth h included; every function checks what it is given and throws with the
 * place.
 */
export interface MediumTerms {
  /** k = h D^α; for a tensor unused. */
  readonly conductivity: Coefficient;
  /** h D, where diffusion depends on direction. */
  readonly tensor?: Tensor;
  /** m = h D^(α−1), h for a tensor. */
  readonly mass: Coefficient;
  /** c m and κ_floor m / h. */
  readonly loss?: Coefficient;
  readonly floor?: { readonly rate: Coefficient; readonly exit: number };
  /** β along a way from P to Q. */
  readonly drift?: DriftAlong;
}

/** ∇ψ = b/D as what is summed along edges: a potential difference, or a field to be integrated. */
export type DriftAlong =
  | { readonly kind: 'potential'; readonly psi: Coefficient }
  | {
      readonly kind: 'field';
      readonly at: (x: number, y: number, out: Float64Array) => void;
      readonly constant: boolean;
    };

/**
 * Terms of every medium of the problem.
 *
 * @param size of the compartment in the length unit, for steps of numerical derivatives
 */
export function mediumTerms(problem: Problem, size: number): MediumTerms[] {
  return problem.media.map((medium) => termsOf(medium, problem, size));
}

function termsOf(medium: Medium, { noise, depth }: Problem, size: number): MediumTerms {
  const alpha = noiseAlpha[noise];
  const h = depth && checked(depth, 'DEPTH_NOT_POSITIVE', 'depth');
  const d = checked(medium.diffusion, 'DIFFUSION_NOT_POSITIVE', 'diffusion coefficient');
  const { tensor } = medium;
  const mass = tensor ? (h ?? one) : times(alpha === 1 ? one : mapped(d, (v) => v ** (alpha - 1)), h);
  const terms = {
    conductivity: tensor ? one : times(alpha === 0 ? one : mapped(d, (v) => v ** alpha), h),
    mass: alpha === 1 && !tensor ? guarded(mass, d) : mass,
    ...(tensor ? { tensor: tensorTimesDepth(tensor, h) } : {}),
    ...(medium.loss ? { loss: times(lossOf(medium.loss), mass) } : {}),
    ...(medium.floor ? { floor: floorOf(medium.floor, mass, h) } : {}),
  };
  const drift = driftAlong(medium, d, noise === 'ito' ? size : undefined);
  return drift ? { ...terms, drift } : terms;
}

const one: Coefficient = { kind: 'constant', value: 1 };

/** Value of a coefficient at a place. */
export function valueAt(coefficient: Coefficient, x: number, y: number): number {
  return coefficient.kind === 'constant' ? coefficient.value : coefficient.at(x, y);
}

function mapped(c: Coefficient, f: (value: number) => number): Coefficient {
  if (c.kind === 'varying') return { kind: 'varying', at: (x, y) => f(c.at(x, y)) };
  return Number.isNaN(c.value) ? c : { kind: 'constant', value: f(c.value) };
}

function times(a: Coefficient, b: Coefficient | undefined): Coefficient {
  if (!b) return a;
  if (a.kind === 'constant' && b.kind === 'constant') return { kind: 'constant', value: a.value * b.value };
  return { kind: 'varying', at: (x, y) => valueAt(a, x, y) * valueAt(b, x, y) };
}

/** `c`, with D looked at wherever it is asked for, so that a bad D is found at every quadrature point under every α. */
function guarded(c: Coefficient, d: Coefficient): Coefficient {
  if (d.kind === 'constant') return c;
  return {
    kind: 'varying',
    at: (x, y) => {
      d.at(x, y);
      return valueAt(c, x, y);
    },
  };
}

/** The coefficient, throwing where it is not positive and finite. A bad constant becomes a function, to get a place. */
function checked(
  c: Coefficient,
  code: 'DIFFUSION_NOT_POSITIVE' | 'DEPTH_NOT_POSITIVE',
  name: string,
): Coefficient {
  const good = (v: number): boolean => v > 0 && v < Number.POSITIVE_INFINITY;
  if (c.kind === 'constant' && good(c.value)) return c;
  return {
    kind: 'varying',
    at: (x, y) => {
      const v = valueAt(c, x, y);
      if (good(v)) return v;
      throw new SolverError(
        code,
        `The ${name} is ${v} at ${placeText([x, y])}`,
        { at: [[x, y]] },
        `Give a ${name} that is positive and finite everywhere in the compartment.`,
      );
    },
  };
}

function lossOf(c: Coefficient): Coefficient {
  return {
    kind: 'varying',
    at: (x, y) => {
      const v = valueAt(c, x, y);
      if (v >= 0 && v < Number.POSITIVE_INFINITY) return v;
      throw new SolverError(
        'LOSS_NEGATIVE',
        `The loss rate is ${v} at ${placeText([x, y])}`,
        { at: [[x, y]] },
        'Give a loss rate that is zero or positive, and finite, everywhere.',
      );
    },
  };
}

/** Loss κ/h times the mass, with its h already in it (METHODS 2, floor capture). */
function floorOf(floor: { kappa: number; exit: number }, mass: Coefficient, h: Coefficient | undefined) {
  if (!h) {
    throw new SolverError(
      'FLOOR_WITHOUT_DEPTH',
      'A floor catches particles but the depth of the compartment is not given',
      {},
      'Give the depth: the rate of capture is the reactivity divided by it.',
    );
  }
  if (!(floor.kappa > 0 && floor.kappa < Number.POSITIVE_INFINITY)) {
    throw new SolverError(
      'WALL_COEFFICIENT_NOT_POSITIVE',
      `The reactivity of a catching floor is ${floor.kappa}`,
      {},
      'Give a positive, finite reactivity (length per time), or leave the floor out.',
    );
  }
  return {
    exit: floor.exit,
    rate: times(
      times({ kind: 'constant', value: floor.kappa }, mass),
      mapped(h, (v) => 1 / v),
    ),
  };
}

/** b/D, or D⁻¹(b − ∇·D) for a tensor under Itô (METHODS 1). */
function driftAlong(medium: Medium, d: Coefficient, itoSize: number | undefined): DriftAlong | undefined {
  const { drift, tensor } = medium;
  const divergence = tensor && itoSize !== undefined ? tensorDivergence(tensor, itoSize) : undefined;
  if (!drift && !divergence) return undefined;
  if (drift?.kind === 'potential' && !divergence)
    return { kind: 'potential', psi: mapped(drift.value, (v) => -v) };
  if (drift?.kind === 'potential') throw potentialUnderItoTensor();
  const constant =
    !divergence &&
    drift?.x.kind === 'constant' &&
    drift.y.kind === 'constant' &&
    (tensor ? tensor.kind : d.kind) === 'constant';
  return { kind: 'field', constant, at: fieldOf(drift, tensor, d, divergence) };
}

function fieldOf(
  drift: Extract<Drift, { kind: 'components' }> | undefined,
  tensor: Tensor | undefined,
  d: Coefficient,
  divergence: ((x: number, y: number) => readonly [number, number]) | undefined,
): (x: number, y: number, out: Float64Array) => void {
  return (x, y, out) => {
    let bx = drift ? valueAt(drift.x, x, y) : 0;
    let by = drift ? valueAt(drift.y, x, y) : 0;
    if (!Number.isFinite(bx + by)) throw driftNotFinite(x, y, bx, by);
    if (divergence) {
      const [dx, dy] = divergence(x, y);
      bx -= dx;
      by -= dy;
    }
    if (tensor) {
      const [xx, xy, yy] = tensor.kind === 'constant' ? tensor.value : tensor.at(x, y);
      const det = xx * yy - xy * xy;
      out[0] = (yy * bx - xy * by) / det;
      out[1] = (xx * by - xy * bx) / det;
    } else {
      const value = valueAt(d, x, y);
      out[0] = bx / value;
      out[1] = by / value;
    }
  };
}

/** Said where a drift is no number. */
export function driftNotFinite(x: number, y: number, ...values: number[]): SolverError {
  return new SolverError(
    'DRIFT_NOT_FINITE',
    `The drift or its potential is ${values.join(', ')} at ${placeText([x, y])}`,
    { at: [[x, y]] },
    'Give a drift that is finite everywhere in the compartment.',
  );
}

function potentialUnderItoTensor(): SolverError {
  return new SolverError(
    'TENSOR_CONVENTION',
    'A potential with a diffusion tensor under Itô has no equilibrium the potential describes',
    {},
    'Give the drift by its components, or take the isothermal convention.',
  );
}
