/**
 * Eliminates the first `pivots` rows of a front without subtraction. The front holds off-diagonal rates only, as two
 * strictly lower triangles by columns: lower[k + i·order] is the rate from k to i, upper[k + i·order] the rate from i
 * to k, for k > i; its last row is the exit. A pivot is the sum of its row's remaining rates, so no digit is ever lost.
 * On return columns i < pivots are divided by their pivot d_i, the rest are the rates of the smaller process.
 *
 * @param lower, upper order × order each; the same array for symmetric rates
 * @param inverse inverse[at + i] ← 1 / d_i
 * @param between told the work done now and then; throws to end it
 * Source: Grassmann, Taksar & Heyman 1985; blocked as dense factors are (Golub & Van Loan 2013, section 3.2, recalled).
 */
export function eliminate(
  lower: Float64Array,
  upper: Float64Array,
  order: number,
  pivots: number,
  inverse: Float64Array,
  at: number,
  between: (work: number) => void,
): void {
  const symmetric = lower === upper;
  for (let from = 0; from < pivots; from += blockSize) {
    const to = Math.min(from + blockSize, pivots);
    for (let j = from; j < to; j++) {
      addColumn(upper, lower, order, from, j, j, inverse, at);
      if (!symmetric) addColumn(lower, upper, order, from, j, j, inverse, at);
      const end = j * order + order;
      let sum = 0;
      for (let k = j * order + j + 1; k < end; k++) sum += upper[k];
      inverse[at + j] = 1 / sum;
    }
    const columns = Math.max(2, 2 * Math.ceil(1e6 / ((to - from) * order)));
    for (let j = to; j < order - 1; j += columns) {
      const end = Math.min(j + columns, order - 1);
      addColumns(upper, lower, order, from, to, j, end, inverse, at);
      if (!symmetric) addColumns(lower, upper, order, from, to, j, end, inverse, at);
      between((end - j) * (to - from) * (order - j));
    }
  }
  for (let j = 0; j < pivots; j++) {
    const end = j * order + order;
    const d = inverse[at + j];
    for (let k = j * order + j + 1; k < end; k++) upper[k] *= d;
    if (!symmetric) for (let k = j * order + j + 1; k < end; k++) lower[k] *= d;
  }
}

const blockSize = 40;

/** Columns `first` … `last` − 1 of s ← themselves + Σ over pivots i of s_ki t_ji / d_i, two columns and four pivots at a time. */
function addColumns(
  s: Float64Array,
  t: Float64Array,
  order: number,
  from: number,
  to: number,
  first: number,
  last: number,
  inverse: Float64Array,
  at: number,
): void {
  let j = first;
  for (; j + 1 < last; j += 2) {
    const here = j * order;
    const next = here + order;
    let i = from;
    for (; i + 3 < to; i += 4) {
      const a = i * order;
      const b = a + order;
      const c = b + order;
      const d = c + order;
      const a0 = t[a + j] * inverse[at + i];
      const b0 = t[b + j] * inverse[at + i + 1];
      const c0 = t[c + j] * inverse[at + i + 2];
      const d0 = t[d + j] * inverse[at + i + 3];
      const a1 = t[a + j + 1] * inverse[at + i];
      const b1 = t[b + j + 1] * inverse[at + i + 1];
      const c1 = t[c + j + 1] * inverse[at + i + 2];
      const d1 = t[d + j + 1] * inverse[at + i + 3];
      s[here + j + 1] += a0 * s[a + j + 1] + b0 * s[b + j + 1] + c0 * s[c + j + 1] + d0 * s[d + j + 1];
      for (let k = j + 2; k < order; k++) {
        const sa = s[a + k];
        const sb = s[b + k];
        const sc = s[c + k];
        const sd = s[d + k];
        s[here + k] += a0 * sa + b0 * sb + c0 * sc + d0 * sd;
        s[next + k] += a1 * sa + b1 * sb + c1 * sc + d1 * sd;
      }
    }
    for (; i < to; i++) {
      const a = i * order;
      const a0 = t[a + j] * inverse[at + i];
      const a1 = t[a + j + 1] * inverse[at + i];
      s[here + j + 1] += a0 * s[a + j + 1];
      for (let k = j + 2; k < order; k++) {
        const sa = s[a + k];
        s[here + k] += a0 * sa;
        s[next + k] += a1 * sa;
      }
    }
  }
  if (j < last) addColumn(s, t, order, from, to, j, inverse, at);
}

/** Column j of s ← itself + Σ over pivots `from` … `to` − 1 of s_ki t_ji / d_i. */
function addColumn(
  s: Float64Array,
  t: Float64Array,
  order: number,
  from: number,
  to: number,
  j: number,
  inverse: Float64Array,
  at: number,
): void {
  const here = j * order;
  let i = from;
  for (; i + 3 < to; i += 4) {
    const a = i * order;
    const b = a + order;
    const c = b + order;
    const d = c + order;
    const fa = t[a + j] * inverse[at + i];
    const fb = t[b + j] * inverse[at + i + 1];
    const fc = t[c + j] * inverse[at + i + 2];
    const fd = t[d + j] * inverse[at + i + 3];
    for (let k = j + 1; k < order; k++) {
      s[here + k] += fa * s[a + k] + fb * s[b + k] + fc * s[c + k] + fd * s[d + k];
    }
  }
  for (; i < to; i++) {
    const a = i * order;
    const fa = t[a + j] * inverse[at + i];
    for (let k = j + 1; k < order; k++) s[here + k] += fa * s[a + k];
  }
}
