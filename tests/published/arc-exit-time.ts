/**
 * Mean exit time from the unit disc, D = 1, rim reflecting but for N equally spaced absorbing arcs of half-angle ε,
 * the first centred at angle 0: (1−|z|²)/4 + (1/N) ln|(1−w+√((1−we^{−iη})(1−we^{iη})))/(2 sin(η/2))|, w = z^N, η = Nε.
 *
 * Source: Caginalp & Chen 2012 (N = 1; printed for half the Laplacian, here for the Laplacian); N by z → z^N.
 */
export function arcExitTime(x: number, y: number, halfAngle: number, arcs = 1): number {
  let w: Complex = [1, 0];
  for (let n = 0; n < arcs; n++) w = times(w, [x, y]);
  const eta = arcs * halfAngle;
  const under = times(
    minus([1, 0], times(w, [Math.cos(eta), -Math.sin(eta)])),
    minus([1, 0], times(w, [Math.cos(eta), Math.sin(eta)])),
  );
  const [re, im] = root(under);
  const length = Math.hypot(1 - w[0] + re, im - w[1]);
  return (1 - x * x - y * y) / 4 + Math.log(length / (2 * Math.sin(eta / 2))) / arcs;
}

/** The average of {@link arcExitTime} over the disc: 1/8 − (1/N) ln sin(Nε/2). */
export function arcAverage(halfAngle: number, arcs = 1): number {
  return 1 / 8 - Math.log(Math.sin((arcs * halfAngle) / 2)) / arcs;
}

type Complex = readonly [re: number, im: number];

const times = ([a, b]: Complex, [c, d]: Complex): Complex => [a * c - b * d, a * d + b * c];
const minus = ([a, b]: Complex, [c, d]: Complex): Complex => [a - c, b - d];

/** The square root with real part ≥ 0. */
function root([re, im]: Complex): Complex {
  const size = Math.hypot(re, im);
  const half = Math.sqrt((size + Math.abs(re)) / 2);
  if (half === 0) return [0, 0];
  if (re >= 0) return [half, im / (2 * half)];
  return [Math.abs(im) / (2 * half), im < 0 ? -half : half];
}
