/**
 * Eliminates the first `pivots` columns of a symmetric front without subtraction: the front holds off-diagonal rates
 * and, as its last row, the rates to the exit; a pivot is the sum of its column's remaining rates, so no digit is
 * ever lost. On return column i < pivots holds F_ki / d_i and the rest the rates of the smaller process.
 *
 * @param front order × order, by columns, strictly lower part used
 * @param inverse inverse[at + i] ← 1 / d_i
 * @param between called now and then; throws to end the work
 * Source: Grassmann, Taksar & Heyman 1985, in symmetric form; blocked as in dense Cholesky (Golub & Van Loan, recalled).
 */
export function eliminate(
  front: Float64Array,
  order: number,
  pivots: number,
  inverse: Float64Array,
  at: number,
  between: (work: number) => void,
): void {
  for (let from = 0; from < pivots; from += 32) {
    const to = Math.min(from + 32, pivots);
    for (let j = from; j < to; j++) {
      update(front, order, from, j, j, j + 1, inverse, at);
      const column = j * order;
      let sum = 0;
      for (let k = column + j + 1; k < column + order; k++) sum += front[k];
      inverse[at + j] = 1 / sum;
    }
    const columns = Math.max(1, Math.ceil(2e6 / ((to - from) * order)));
    for (let j = to; j < order - 1; j += columns) {
      const end = Math.min(j + columns, order - 1);
      update(front, order, from, to, j, end, inverse, at);
      between((end - j) * (to - from) * (order - j));
    }
  }
  for (let j = 0; j < pivots; j++) {
    const column = j * order;
    const d = inverse[at + j];
    for (let k = column + j + 1; k < column + order; k++) front[k] *= d;
  }
}

/** Columns `first` … `last` − 1 ← themselves + Σ over pivots `from` … `to` − 1 of F_ki F_ji / d_i, below the diagonal. */
function update(
  front: Float64Array,
  order: number,
  from: number,
  to: number,
  first: number,
  last: number,
  inverse: Float64Array,
  at: number,
): void {
  for (let j = first; j < last; j++) {
    const column = j * order;
    const end = column + order;
    let i = from;
    for (; i + 4 <= to; i += 4) {
      const a = i * order;
      const b = a + order;
      const c = b + order;
      const d = c + order;
      const fa = front[a + j] * inverse[at + i];
      const fb = front[b + j] * inverse[at + i + 1];
      const fc = front[c + j] * inverse[at + i + 2];
      const fd = front[d + j] * inverse[at + i + 3];
      for (let k = column + j + 1, s = j + 1; k < end; k++, s++) {
        front[k] += fa * front[a + s] + fb * front[b + s] + fc * front[c + s] + fd * front[d + s];
      }
    }
    for (; i < to; i++) {
      const a = i * order;
      const fa = front[a + j] * inverse[at + i];
      for (let k = column + j + 1, s = j + 1; k < end; k++, s++) front[k] += fa * front[a + s];
    }
  }
}
