import type { Hooks } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import type { System } from '../operator/system.ts';
import { conjugateGradients } from './conjugate-gradients.ts';
import { dissect } from './dissection.ts';
import { solveWithFactor } from './factor-solve.ts';
import { bytesNeeded, type Fronts, planFronts } from './fronts.ts';
import { gmres } from './gmres.ts';
import type { IterationOptions, Solution } from './iteration.ts';
import { type Factor, type FactorOptions, factorDefaults, factorize } from './multifrontal.ts';
import { buildMultigrid } from './multigrid/multigrid.ts';
import { largestOf } from './residual.ts';
import { stopIfAsked } from './stopping.ts';

/** Which preconditioner: the factor unless its memory is above the limit and multigrid can stand in. */
export type Preconditioner = 'factor' | 'multigrid';

/** How a system is prepared; defaults in {@link factorDefaults}. */
export interface PrepareOptions extends FactorOptions, Hooks {
  /** Overrides the choice. Multigrid is for symmetric rates without drift. */
  readonly preconditioner?: Preconditioner;
}

/** A system with its preconditioner, ready for any number of right-hand sides. */
export interface Prepared {
  readonly system: System;
  readonly preconditioner: Preconditioner;
  /** A x = rhs, one entry per free node; a statement of failure instead of a half-true field. */
  readonly solve: (rhs: Float64Array, options?: IterationOptions & Hooks) => Solution;
  /** The same for many right-hand sides, taken through the factor in blocks. */
  readonly solveMany: (rhs: readonly Float64Array[], options?: IterationOptions & Hooks) => Solution[];
  /** Aᵀ x = rhs. */
  readonly solveAdjoint: (rhs: Float64Array, options?: IterationOptions & Hooks) => Solution;
  /** Bytes held by the preconditioner. */
  readonly bytes: number;
}

/** The backward error alone accepts noise where pivots range widely (ENGINE.md); the energy norm does not. */
const energyTolerance = 1e-10;

const prepared = new WeakMap<System, Prepared>();

/**
 * Orders and factors a system once (or builds its multigrid); later calls with the same system get the same.
 *
 * @throws {SolverError} MEMORY_LIMIT, SOLVING_STOPPED
 */
export function prepare(system: System, options: PrepareOptions = {}): Prepared {
  const known = prepared.get(system);
  if (known && (!options.preconditioner || known.preconditioner === options.preconditioner)) return known;
  const made = prepareAnew(system, options);
  prepared.set(system, made);
  return made;
}

function prepareAnew(system: System, options: PrepareOptions): Prepared {
  if (options.preconditioner === 'multigrid') return withMultigrid(system, options);
  stopIfAsked(options);
  const { nodes } = system.mesh;
  const xy = new Float64Array(2 * system.size);
  for (let i = 0; i < system.size; i++) {
    xy[2 * i] = nodes[2 * system.nodeOf[i]];
    xy[2 * i + 1] = nodes[2 * system.nodeOf[i] + 1];
  }
  stopIfAsked(options);
  const dissection = dissect(system.rates, xy, options);
  stopIfAsked(options);
  const fronts = planFronts(system.rates, dissection, options);
  stopIfAsked(options);
  const tooLarge = bytesNeeded(fronts) > (options.maxBytes ?? factorDefaults.maxBytes);
  const mayTurn = options.preconditioner !== 'factor' && system.symmetric && !system.psi;
  return tooLarge && mayTurn ? withMultigrid(system, options) : withFactor(system, fronts, options);
}

function withFactor(system: System, fronts: Fronts, options: PrepareOptions): Prepared {
  const factor = factorize(fronts, system, options);
  const iterate = system.symmetric ? conjugateGradients : gmres;
  const solve =
    (transposed: boolean) =>
    (rhs: Float64Array, watched: IterationOptions & Hooks = {}) =>
      iterate(
        { ...system, transposed },
        rhs,
        (y) => solveWithFactor(factor, y, 1, transposed, watched),
        watched,
      );
  return {
    ...{ system, preconditioner: 'factor', solve: solve(false), solveAdjoint: solve(!system.symmetric) },
    solveMany: (rhs, watched = {}) => {
      const starts = throughFactor(factor, rhs, watched);
      return rhs.map((b, r) => solve(false)(b, { ...watched, from: starts[r] }));
    },
    bytes: factor.upper.byteLength * (system.symmetric ? 1 : 2) + factor.inversePivot.byteLength,
  };
}

function withMultigrid(system: System, options: PrepareOptions): Prepared {
  if (!system.symmetric || system.psi) {
    throw new SolverError(
      'MEMORY_LIMIT',
      'Multigrid was asked for, and it does not converge with drift',
      {},
      'Leave the choice of the preconditioner open.',
    );
  }
  const { precondition, bytes } = buildMultigrid(system, options);
  const solve = (rhs: Float64Array, watched: IterationOptions & Hooks = {}) =>
    conjugateGradients(system, rhs, precondition, { ...watched, energyTolerance });
  return {
    ...{ system, preconditioner: 'multigrid', solve, solveAdjoint: solve, bytes },
    solveMany: (rhs, watched = {}) => rhs.map((b) => solve(b, watched)),
  };
}

const blockWidth = 8;

/** A⁻¹ b for every b, by the factor alone. */
function throughFactor(factor: Factor, rhs: readonly Float64Array[], hooks: Hooks): Float64Array[] {
  const size = factor.fronts.size;
  const solved: Float64Array[] = [];
  for (let first = 0; first < rhs.length; first += blockWidth) {
    stopIfAsked(hooks);
    const width = Math.min(blockWidth, rhs.length - first);
    const block = new Float64Array(size * width);
    for (let r = 0; r < width; r++) {
      const b = rhs[first + r];
      for (let i = 0; i < size; i++) block[i * width + r] = b[i];
    }
    solveWithFactor(factor, block, width, false, hooks);
    for (let r = 0; r < width; r++) {
      const x = new Float64Array(size);
      for (let i = 0; i < size; i++) x[i] = block[i * width + r];
      solved.push(x);
    }
  }
  return solved;
}

/**
 * The solution of A x = rhs.
 *
 * @throws {SolverError} NOT_CONVERGED with the residual reached, EXIT_TOO_RARE, MEMORY_LIMIT, SOLVING_STOPPED
 */
export function solveOrThrow(system: System, rhs: Float64Array, hooks: Hooks = {}): Float64Array {
  return fieldOf(system, prepare(system, hooks).solve(rhs, hooks));
}

/** The solutions of A x = rhs for many right-hand sides; throws what {@link solveOrThrow} throws. */
export function solveManyOrThrow(
  system: System,
  rhs: readonly Float64Array[],
  hooks: Hooks = {},
): Float64Array[] {
  return prepare(system, hooks)
    .solveMany(rhs, hooks)
    .map((solution) => fieldOf(system, solution));
}

/** The solution of Aᵀ x = rhs; throws what {@link solveOrThrow} throws. */
export function solveAdjointOrThrow(system: System, rhs: Float64Array, hooks: Hooks = {}): Float64Array {
  return fieldOf(system, prepare(system, hooks).solveAdjoint(rhs, hooks));
}

/** Beyond this, rates were below the smallest normal number somewhere and digits are lost. */
const largestTime = 1e306;

function fieldOf(system: System, solution: Solution): Float64Array {
  const rare = solution.converged ? largestOf(solution.x) > largestTime : Number.isNaN(solution.residual);
  if (rare && system.negativeRates.count === 0) throw tooRare();
  if (solution.converged) return solution.x;
  throw new SolverError(
    'NOT_CONVERGED',
    `The linear solve stopped at a relative residual of ${solution.residual.toExponential(1)} after ${solution.iterations} steps`,
    {},
    'Refine the mesh where coefficients change fast, or bring the coefficients nearer to each other.',
  );
}

function tooRare(): SolverError {
  return new SolverError(
    'EXIT_TOO_RARE',
    'Leaving is so rare that its time is beyond the largest number (a barrier of some 700 kT)',
    {},
    'Weaken the drift or its potential, or look at a smaller part of the compartment.',
  );
}
