/** Gauss–Legendre on [0, 1] with five points, exact to degree 9 (Abramowitz & Stegun 1964, table 25.4). */
const inner = Math.sqrt(5 - 2 * Math.sqrt(10 / 7)) / 3;
const outer = Math.sqrt(5 + 2 * Math.sqrt(10 / 7)) / 3;
const innerWeight = (322 + 13 * Math.sqrt(70)) / 1800;
const outerWeight = (322 - 13 * Math.sqrt(70)) / 1800;

export const edgePoints = Float64Array.of(
  (1 - outer) / 2,
  (1 - inner) / 2,
  0.5,
  (1 + inner) / 2,
  (1 + outer) / 2,
);
/** Sum 1. */
export const edgeWeights = Float64Array.of(outerWeight, innerWeight, 64 / 225, innerWeight, outerWeight);

/** Seven points on a triangle, exact to degree 5, all weights positive (Radon 1948). */
const root = Math.sqrt(15);
const near = (6 - root) / 21;
const far = (6 + root) / 21;
const nearWeight = (155 - root) / 1200;
const farWeight = (155 + root) / 1200;

/** 3 barycentric coordinates per point. */
export const trianglePoints = Float64Array.of(
  ...[1 / 3, 1 / 3, 1 / 3],
  ...[near, near, 1 - 2 * near, near, 1 - 2 * near, near, 1 - 2 * near, near, near],
  ...[far, far, 1 - 2 * far, far, 1 - 2 * far, far, 1 - 2 * far, far, far],
);
/** Sum 1: times the area. */
export const triangleWeights = Float64Array.of(
  9 / 40,
  ...[nearWeight, nearWeight, nearWeight],
  ...[farWeight, farWeight, farWeight],
);
