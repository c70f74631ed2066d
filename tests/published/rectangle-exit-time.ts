/** Odd terms of the series; the n-th is below 1/n³, the last below 1e-8. */
const lastTerm = 399;

/**
 * Mean exit time from the rectangle (0, a) × (0, b), D = 1, all walls absorbing:
 * y(b−y)/2 − Σ over odd n of 4b²/(nπ)³ sin(nπy/b) cosh(nπ(x−a/2)/b)/cosh(nπa/2b).
 *
 * Source: Timoshenko & Goodier, Theory of Elasticity, § 109 (torsion: half the stress function).
 */
export function rectangleExitTime(a: number, b: number, x: number, y: number): number {
  let u = (y * (b - y)) / 2;
  for (let n = 1; n <= lastTerm; n += 2) {
    const k = (n * Math.PI) / b;
    u -= (4 / (b * k ** 3)) * Math.sin(k * y) * coshRatio(k * (x - a / 2), (k * a) / 2);
  }
  return u;
}

/** Its average over the rectangle: b²/12 − Σ over odd n of 16 b³/(a (nπ)⁵) tanh(nπa/2b). */
export function rectangleAverage(a: number, b: number): number {
  let average = (b * b) / 12;
  for (let n = 1; n <= lastTerm; n += 2) {
    average -= ((16 * b ** 3) / (a * (n * Math.PI) ** 5)) * Math.tanh((n * Math.PI * a) / (2 * b));
  }
  return average;
}

/**
 * −∂u/∂n averaged over the middle `width` of the side y = 0:
 * b/2 − Σ over odd n of 4b/(nπ)² · sinh(κ)/κ ÷ cosh(nπa/2b), κ = nπ·width/2b.
 */
export function rectangleFlux(a: number, b: number, width: number): number {
  let flux = b / 2;
  for (let n = 1; n <= lastTerm; n += 2) {
    const kappa = (n * Math.PI * width) / (2 * b);
    const top = Math.PI * n * (a / (2 * b));
    const ratio = (Math.exp(kappa - top) - Math.exp(-kappa - top)) / (1 + Math.exp(-2 * top));
    flux -= ((4 * b) / (n * Math.PI) ** 2) * (ratio / kappa);
  }
  return flux;
}

/** cosh(s)/cosh(t) for |s| ≤ t, without overflow. */
function coshRatio(s: number, t: number): number {
  return (Math.exp(s - t) + Math.exp(-s - t)) / (1 + Math.exp(-2 * t));
}
