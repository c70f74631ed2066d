import { EigenvalueDecomposition, inverse, Matrix } from 'ml-matrix';
import type { Hooks } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import { prepare } from '../linear/prepare.ts';
import { stopIfAsked } from '../linear/stopping.ts';
import type { System } from '../operator/system.ts';
import { smallExponential } from './small-exponential.ts';

/** The system with s M added: the process killed at rate s. */
export function shifted(system: System, s: number): System {
  return {
    ...system,
    slack: system.slack.map((v, i) => v + s * system.load[i]),
    diagonal: system.diagonal.map((v, i) => v + s * system.load[i]),
  };
}

/**
 * An M-orthonormal basis of the Krylov space of (A + sM)⁻¹M from a vector g, grown step by step, and the operator
 * −L seen in it. Lanczos when the rates are symmetric, Arnoldi when not; both orthogonalised in full.
 *
 * Source: shift-and-invert Lanczos for exponentials: Moret & Novati 2004; van den Eshof & Hochbruck 2006; METHODS 5.
 */
export class KrylovBasis {
  readonly vectors: Float64Array[] = [];
  /** M-norm of g. */
  readonly norm: number;
  /** True when the space can grow no further: the answers are exact to rounding. */
  complete = false;
  private readonly columns: number[][] = [];
  private readonly system: System;
  private readonly shift: number;
  private killed: System | undefined;
  private next: Float64Array;

  constructor(system: System, shift: number, g: Float64Array) {
    this.system = system;
    this.shift = shift;
    this.killed = shifted(system, shift);
    let sum = 0;
    for (let i = 0; i < system.size; i++) sum += system.load[i] * g[i] * g[i];
    this.norm = Math.sqrt(sum);
    this.complete = this.norm === 0;
    this.next = g.map((v) => v / this.norm);
  }

  /** Gives the factor's memory back; the basis grows no more. */
  release(): void {
    this.killed = undefined;
  }

  /**
   * One solve, one more vector.
   *
   * @throws {SolverError} NOT_CONVERGED, SOLVING_STOPPED
   */
  grow(hooks: Hooks): void {
    stopIfAsked(hooks);
    const { load, size } = this.system;
    if (!this.killed) throw new Error('the basis was released');
    this.vectors.push(this.next);
    const rhs = this.next.map((v, i) => v * load[i]);
    const solution = prepare(this.killed, hooks).solve(rhs, hooks);
    if (!solution.converged) throw notConverged(solution.residual);
    const w = solution.x;
    const column: number[] = new Array(this.vectors.length).fill(0);
    for (let pass = 0; pass < 2; pass++) {
      for (let j = 0; j < this.vectors.length; j++) {
        const v = this.vectors[j];
        let c = 0;
        for (let i = 0; i < size; i++) c += load[i] * v[i] * w[i];
        column[j] += c;
        for (let i = 0; i < size; i++) w[i] -= c * v[i];
      }
    }
    let square = 0;
    for (let i = 0; i < size; i++) square += load[i] * w[i] * w[i];
    const beta = Math.sqrt(square);
    column.push(beta);
    this.columns.push(column);
    this.complete = beta < 1e-12 * Math.abs(column[0]) || this.vectors.length >= size;
    this.next = w.map((v) => v / beta);
  }

  /** (A + sM)⁻¹M in the basis. */
  private projected(): Matrix {
    const m = this.vectors.length;
    const h = Matrix.zeros(m, m);
    for (let j = 0; j < m; j++) {
      for (let i = 0; i < Math.min(m, j + 2); i++) h.set(i, j, this.columns[j][i]);
    }
    return this.system.symmetric ? Matrix.add(h, h.transpose()).mul(0.5) : h;
  }

  /** e^(tL)g in the basis, as a function of t: entries of the vectors. */
  exponential(): (t: number) => Float64Array {
    const h = this.projected();
    const m = h.rows;
    if (m === 0) return () => new Float64Array(0);
    if (this.system.symmetric) {
      const { realEigenvalues, eigenvectorMatrix: y } = new EigenvalueDecomposition(h, {
        assumeSymmetric: true,
      });
      const rates = realEigenvalues.map((theta) => 1 / theta - this.shift);
      return (t) => {
        const out = new Float64Array(m);
        for (let j = 0; j < m; j++) {
          const weight = this.norm * y.get(0, j) * (rates[j] > 0 ? Math.exp(-rates[j] * t) : 0);
          for (let i = 0; i < m; i++) out[i] += weight * y.get(i, j);
        }
        return out;
      };
    }
    const generator = Matrix.sub(Matrix.eye(m, m).mul(this.shift), inverse(h));
    const exponential = smallExponential(generator);
    return (t) => exponential(t).map((v) => v * this.norm);
  }

  /** Smallest decay rate seen in the basis, per time. */
  slowestRate(): number {
    const { realEigenvalues } = new EigenvalueDecomposition(this.projected());
    return 1 / Math.max(...realEigenvalues) - this.shift;
  }
}

function notConverged(residual: number): SolverError {
  return new SolverError(
    'NOT_CONVERGED',
    `A solve of the survival's basis stopped at a relative residual of ${residual.toExponential(1)}`,
    {},
    'Refine the mesh where coefficients change fast, or bring the coefficients nearer to each other.',
  );
}
