import { CholeskyDecomposition, Matrix } from 'ml-matrix';
import type { Hooks } from '../../../mesher/index.ts';
import type { LinearOperator } from '../residual.ts';
import { stopIfAsked } from '../stopping.ts';
import { aggregate, smoothedProlongation } from './aggregation.ts';
import { diagonalOf, multiply, type Sparse, transpose } from './sparse.ts';

const coarsest = 200;
const mostLevels = 20;

/** One level of the hierarchy. */
interface Level {
  readonly a: Sparse;
  readonly diagonal: Float64Array;
  readonly down: Sparse;
  readonly up: Sparse;
  readonly x: Float64Array;
  readonly b: Float64Array;
  readonly r: Float64Array;
}

/** A hierarchy of ever smaller systems as a preconditioner: y ↦ one V-cycle on A x = y, symmetric positive definite. */
export interface Multigrid {
  readonly precondition: (y: Float64Array) => void;
  readonly bytes: number;
  readonly levels: number;
}

/**
 * Smoothed-aggregation multigrid, V(1,1) with symmetric Gauss–Seidel: less memory than a factor, 20–30 steps of
 * conjugate gradients from 10⁴ to 10⁶ nodes. For symmetric rates without drift only: it fails from cell Péclet 1 on.
 *
 * @throws {SolverError} SOLVING_STOPPED
 * Source: Vaněk, Mandel & Brezina 1996.
 */
export function buildMultigrid(operator: LinearOperator, hooks: Hooks = {}): Multigrid {
  const levels: Level[] = [];
  let a = withDiagonal(operator);
  let bytes = 0;
  while (a.rows > coarsest && levels.length < mostLevels) {
    stopIfAsked(hooks);
    const diagonal = diagonalOf(a);
    const groups = aggregate(a, diagonal);
    if (groups.count === 0 || groups.count > 0.8 * a.rows) break;
    const up = smoothedProlongation(a, diagonal, groups);
    const down = transpose(up);
    stopIfAsked(hooks);
    const work = { x: new Float64Array(a.rows), b: new Float64Array(a.rows), r: new Float64Array(a.rows) };
    levels.push({ a, diagonal, up, down, ...work });
    bytes += 12 * (a.value.length + 2 * up.value.length) + 32 * a.rows;
    a = multiply(down, multiply(a, up));
  }
  const solveCoarsest = coarseSolver(a);
  const precondition = (y: Float64Array): void => {
    cycle(levels, 0, y, solveCoarsest);
  };
  return { precondition, bytes, levels: levels.length + 1 };
}

function withDiagonal({ rates, diagonal }: LinearOperator): Sparse {
  const size = rates.size;
  const start = new Int32Array(size + 1);
  const column = new Int32Array(rates.value.length + size);
  const value = new Float64Array(rates.value.length + size);
  let at = 0;
  for (let i = 0; i < size; i++) {
    column[at] = i;
    value[at++] = diagonal[i];
    for (let p = rates.start[i]; p < rates.start[i + 1]; p++) {
      column[at] = rates.column[p];
      value[at++] = -rates.value[p];
    }
    start[i + 1] = at;
  }
  return { rows: size, columns: size, start, column, value };
}

/** Dense Cholesky where the last level is small; some sweeps where aggregation came to an end before. */
function coarseSolver(a: Sparse): (y: Float64Array) => void {
  if (a.rows <= 2 * coarsest) {
    const dense = Matrix.zeros(a.rows, a.rows);
    for (let i = 0; i < a.rows; i++) {
      for (let p = a.start[i]; p < a.start[i + 1]; p++) dense.set(i, a.column[p], a.value[p]);
    }
    // Products of sparse matrices are symmetric to rounding only.
    const cholesky = new CholeskyDecomposition(Matrix.add(dense, dense.transpose()).mul(0.5));
    return (y) => y.set(cholesky.solve(Matrix.columnVector(y)).to1DArray());
  }
  const diagonal = diagonalOf(a);
  return (y) => {
    const b = y.slice();
    y.fill(0);
    for (let sweep = 0; sweep < 10; sweep++) {
      relax(a, diagonal, b, y, true);
      relax(a, diagonal, b, y, false);
    }
  };
}

/** y ← an approximation of A⁻¹ y on the given level. */
function cycle(
  levels: readonly Level[],
  at: number,
  y: Float64Array,
  solveCoarsest: (y: Float64Array) => void,
): void {
  const level = levels[at];
  if (!level) {
    solveCoarsest(y);
    return;
  }
  const { a, diagonal, down, up, x, b, r } = level;
  b.set(y);
  x.fill(0);
  relax(a, diagonal, b, x, true);
  apply(a, x, r);
  for (let i = 0; i < a.rows; i++) r[i] = b[i] - r[i];
  const coarse = levels[at + 1]?.r ?? new Float64Array(up.columns);
  apply(down, r, coarse);
  cycle(levels, at + 1, coarse, solveCoarsest);
  addProlonged(up, coarse, x);
  relax(a, diagonal, b, x, false);
  y.set(x);
}

/** One Gauss–Seidel sweep, forwards or backwards. */
function relax(a: Sparse, diagonal: Float64Array, b: Float64Array, x: Float64Array, forwards: boolean): void {
  const { rows, start, column, value } = a;
  const step = forwards ? 1 : -1;
  for (let q = 0, i = forwards ? 0 : rows - 1; q < rows; q++, i += step) {
    let sum = b[i];
    for (let p = start[i]; p < start[i + 1]; p++) sum -= value[p] * x[column[p]];
    x[i] += sum / diagonal[i];
  }
}

function apply(a: Sparse, x: Float64Array, y: Float64Array): void {
  const { rows, start, column, value } = a;
  for (let i = 0; i < rows; i++) {
    let sum = 0;
    for (let p = start[i]; p < start[i + 1]; p++) sum += value[p] * x[column[p]];
    y[i] = sum;
  }
}

function addProlonged(up: Sparse, coarse: Float64Array, x: Float64Array): void {
  const { rows, start, column, value } = up;
  for (let i = 0; i < rows; i++) {
    let sum = 0;
    for (let p = start[i]; p < start[i + 1]; p++) sum += value[p] * coarse[column[p]];
    x[i] += sum;
  }
}
