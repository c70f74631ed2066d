/** Odd terms of the series. */
const lastTerm = 199;

/**
 * Mean exit time on the axis of a circular sector of opening a (not 90 degrees or 270), radius R, D = 1, all walls
 * absorbing: (r²/4)(1/cos a − 1) − Σ over odd n of 4R²/a · (−1)^((n−1)/2)/(k(k²−4)) (r/R)^k, k = nπ/a.
 *
 * Source: Timoshenko & Goodier, Theory of Elasticity, § 110 (Saint-Venant); the first term alone is the wedge without
 * an end, Spitzer 1958.
 */
export function sectorExitTime(opening: number, radius: number, r: number): number {
  let u = wedgeExitTime(opening, r);
  for (let n = 1; n <= lastTerm; n += 2) {
    const k = (n * Math.PI) / opening;
    const sign = n % 4 === 1 ? 1 : -1;
    u -= ((4 * radius ** 2) / opening) * (sign / (k * (k * k - 4))) * (r / radius) ** k;
  }
  return u;
}

/** On the axis of the wedge without an end, opening below 90 degrees: (r²/4)(1/cos a − 1) [Spitzer 1958]. */
export function wedgeExitTime(opening: number, r: number): number {
  return (r * r * (1 / Math.cos(opening) - 1)) / 4;
}
