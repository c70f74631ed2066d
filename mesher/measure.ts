import { curveLength } from './curves.ts';
import type { Chain, Curve } from './domain.ts';

/** Exact area and length of closed chains, from the curves themselves and not from chords. */

/**
 * Area enclosed by a closed chain, positive when it runs counter-clockwise, in the length unit squared.
 *
 * Source: ½∮(x dy − y dx) (Green), in closed form for lines, elliptic arcs and cubic Béziers. Taken about the chain's
 * first point, so that a drawing far from the origin loses no digits.
 */
export function enclosedArea(chain: Chain): number {
  const origin = chain.pieces[0]?.curve.from ?? [0, 0];
  let sum = 0;
  for (const { curve } of chain.pieces) sum += areaUnder(curve, origin[0], origin[1]);
  return sum;
}

/** Length of a chain, in the length unit. */
export function chainLength(chain: Chain): number {
  let sum = 0;
  for (const { curve } of chain.pieces) sum += curveLength(curve);
  return sum;
}

/** ½∫(x dy − y dx) along one curve, coordinates taken from (ox, oy). */
function areaUnder(curve: Curve, ox: number, oy: number): number {
  const ax = curve.from[0] - ox;
  const ay = curve.from[1] - oy;
  const bx = curve.to[0] - ox;
  const by = curve.to[1] - oy;
  const chord = (ax * by - ay * bx) / 2;
  switch (curve.kind) {
    case 'line':
      return chord;
    case 'arc': {
      // Segment between arc and chord of an ellipse: ½ r₁ r₂ (sweep − sin sweep).
      return chord + 0.5 * curve.radii[0] * curve.radii[1] * (curve.sweep - Math.sin(curve.sweep));
    }
    case 'cubic': {
      const [c1, c2] = curve.controls;
      const cross = (px: number, py: number, qx: number, qy: number): number => px * qy - py * qx;
      const p1x = c1[0] - ox;
      const p1y = c1[1] - oy;
      const p2x = c2[0] - ox;
      const p2y = c2[1] - oy;
      // Products of Bernstein polynomials integrate to 3/10, 3/20, 1/20 of the control points' cross products.
      return (
        0.3 * cross(ax, ay, p1x, p1y) +
        0.15 * cross(ax, ay, p2x, p2y) +
        0.05 * cross(ax, ay, bx, by) +
        0.15 * cross(p1x, p1y, p2x, p2y) +
        0.15 * cross(p1x, p1y, bx, by) +
        0.3 * cross(p2x, p2y, bx, by)
      );
    }
  }
}
