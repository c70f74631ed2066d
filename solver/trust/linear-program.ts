/** max Σc_j x_j with low_k ≤ Σ_j rows_k,j x_j ≤ high_k, x ≥ 0. */
export interface MeasureProgram {
  readonly objective: Float64Array;
  readonly rows: readonly Float64Array[];
  readonly low: readonly number[];
  readonly high: readonly number[];
}

/** Multipliers: objective_j ≤ Σ_k (ofHigh_k + ofLow_k) rows_k,j up to rounding, ofHigh ≥ 0 ≥ ofLow. */
export interface Multipliers {
  readonly ofLow: readonly number[];
  readonly ofHigh: readonly number[];
}

const tiny = 1e-11;
const mostPivots = 2000;

/**
 * Dual solution by the simplex method on a dense tableau; a dozen rows, some hundred columns.
 *
 * @returns undefined when no measure meets the conditions or the pivots run out
 * Source: Dantzig 1963 (two phases), Bland 1977 (rule without cycles).
 */
export function solveMeasureProgram(program: MeasureProgram): Multipliers | undefined {
  const { objective, rows, low, high } = program;
  const n = objective.length;
  const m = 2 * rows.length;
  // Columns: x, slacks of the upper rows, surpluses of the lower ones, artificials of all rows, right-hand side.
  const slack = n;
  const surplus = n + rows.length;
  const artificial = surplus + rows.length;
  const width = artificial + m + 1;
  const tableau = Array.from({ length: m }, () => new Float64Array(width));
  const basis = new Int32Array(m);
  const signs = new Float64Array(m);
  let size = 0;
  for (let k = 0; k < rows.length; k++) {
    for (const [r, right] of [
      [2 * k, high[k]],
      [2 * k + 1, low[k]],
    ]) {
      const sign = right < 0 ? -1 : 1;
      for (let j = 0; j < n; j++) tableau[r][j] = sign * rows[k][j];
      if (r % 2 === 0) tableau[r][slack + k] = sign;
      else tableau[r][surplus + k] = -sign;
      tableau[r][artificial + r] = 1;
      tableau[r][width - 1] = sign * right;
      signs[r] = sign;
      basis[r] = artificial + r;
      size += Math.abs(right);
    }
  }
  const first = new Float64Array(width);
  for (let r = 0; r < m; r++) for (let j = 0; j < width; j++) first[j] -= tableau[r][j];
  for (let r = 0; r < m; r++) first[artificial + r] = 0;
  if (!pivotOut(tableau, basis, first, artificial)) return undefined;
  if (first[width - 1] < -1e-9 * size) return undefined;
  const second = new Float64Array(width);
  for (let j = 0; j < n; j++) second[j] = -objective[j];
  for (let r = 0; r < m; r++) {
    const cost = second[basis[r]];
    if (cost === 0) continue;
    for (let j = 0; j < width; j++) second[j] -= cost * tableau[r][j];
  }
  if (!pivotOut(tableau, basis, second, artificial)) return undefined;
  const of = (r: number): number => signs[r] * second[artificial + r];
  return {
    ofHigh: rows.map((_, k) => Math.max(0, of(2 * k))),
    ofLow: rows.map((_, k) => Math.min(0, of(2 * k + 1))),
  };
}

/** Pivots until no column below `columns` has a negative reduced cost; false when that does not end. */
function pivotOut(tableau: Float64Array[], basis: Int32Array, cost: Float64Array, columns: number): boolean {
  const last = cost.length - 1;
  for (let count = 0; count < mostPivots; count++) {
    let enter = -1;
    for (let j = 0; j < columns; j++) {
      if (cost[j] >= (enter < 0 || count > mostPivots / 2 ? -tiny : cost[enter])) continue;
      enter = j;
      if (count > mostPivots / 2) break;
    }
    if (enter < 0) return true;
    let leave = -1;
    for (let r = 0; r < tableau.length; r++) {
      if (tableau[r][enter] <= tiny) continue;
      if (leave < 0) leave = r;
      const here = tableau[r][last] / tableau[r][enter];
      const best = tableau[leave][last] / tableau[leave][enter];
      if (here < best || (here === best && basis[r] < basis[leave])) leave = r;
    }
    if (leave < 0) return false;
    pivot(tableau, cost, leave, enter);
    basis[leave] = enter;
  }
  return false;
}

function pivot(tableau: Float64Array[], cost: Float64Array, leave: number, enter: number): void {
  const row = tableau[leave];
  const scale = 1 / row[enter];
  for (let j = 0; j < row.length; j++) row[j] *= scale;
  for (const other of [...tableau, cost]) {
    if (other === row) continue;
    const factor = other[enter];
    if (factor === 0) continue;
    for (let j = 0; j < row.length; j++) other[j] -= factor * row[j];
  }
}
