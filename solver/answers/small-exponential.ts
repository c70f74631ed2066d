import { EigenvalueDecomposition, LuDecomposition, Matrix } from 'ml-matrix';

/**
 * t ↦ e^(tG)e₁ for a small real matrix G: by its eigenvectors where they reproduce G to nine digits, else by scaling,
 * Taylor sum and squaring.
 *
 * Source: Moler & Van Loan 2003, methods 14 and 3.
 */
export function smallExponential(g: Matrix): (t: number) => Float64Array {
  const { eigenvectorMatrix: v, diagonalMatrix: d } = new EigenvalueDecomposition(g);
  const lu = new LuDecomposition(v);
  if (lu.isSingular()) return (t) => bySquaring(g, t);
  const off = Matrix.sub(v.mmul(d).mmul(lu.solve(Matrix.eye(g.rows, g.rows))), g).norm();
  if (!(off <= 1e-9 * g.norm())) return (t) => bySquaring(g, t);
  const e1 = Matrix.zeros(g.rows, 1);
  e1.set(0, 0, 1);
  const c = lu.solve(e1).getColumn(0);
  return (t) => {
    const moved = blockExponential(d, c, t);
    return Float64Array.from({ length: g.rows }, (_, i) => {
      let sum = 0;
      for (let j = 0; j < moved.length; j++) sum += v.get(i, j) * moved[j];
      return sum;
    });
  };
}

/** e^(tD)c, D with 1 × 1 blocks and 2 × 2 blocks ((a, b), (−b, a)). */
function blockExponential(d: Matrix, c: readonly number[], t: number): Float64Array {
  const out = new Float64Array(c.length);
  for (let j = 0; j < c.length; j++) {
    const decay = Math.exp(d.get(j, j) * t);
    const b = j + 1 < c.length ? d.get(j, j + 1) : 0;
    if (b === 0) {
      out[j] = decay * c[j];
      continue;
    }
    const cos = decay * Math.cos(b * t);
    const sin = decay * Math.sin(b * t);
    out[j] = cos * c[j] + sin * c[j + 1];
    out[j + 1] = -sin * c[j] + cos * c[j + 1];
    j++;
  }
  return out;
}

/** Halves t until ‖tG‖ ≤ ½, sums to rounding, squares back. */
function bySquaring(g: Matrix, t: number): Float64Array {
  const size = g.rows;
  const norm = g.norm('frobenius') * Math.abs(t);
  const halvings = Math.max(0, Math.ceil(Math.log2(norm / 0.5)));
  const step = Matrix.mul(g, t / 2 ** halvings);
  let sum = Matrix.eye(size, size);
  let term = Matrix.eye(size, size);
  for (let k = 1; k <= 16; k++) {
    term = term.mmul(step).div(k);
    sum = Matrix.add(sum, term);
  }
  for (let k = 0; k < halvings; k++) sum = sum.mmul(sum);
  return Float64Array.from(sum.getColumn(0));
}
