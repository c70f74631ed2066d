import type { Curve, Point } from '../../mesher/index.ts';

/** An arc as SVG path data states it: by its ends, the ellipse's half axes and two flags. */
export interface EndpointArc {
  readonly from: Point;
  readonly to: Point;
  readonly radii: readonly [number, number];
  /** x axis of the ellipse, degrees in the drawing's own frame. */
  readonly turned: number;
  readonly large: boolean;
  /** In the direction of growing angle in the drawing's own frame. */
  readonly positive: boolean;
}

/**
 * An SVG arc by centre and angles; a line where a half axis is zero, nothing where the ends coincide.
 *
 * Source: W3C, SVG 1.1 (second edition, 2011), appendix F.6.5 and F.6.6 (half axes too small are scaled up).
 */
export function arcFromEnds(arc: EndpointArc): Curve | undefined {
  const { from, to } = arc;
  if (from[0] === to[0] && from[1] === to[1]) return undefined;
  let r1 = Math.abs(arc.radii[0]);
  let r2 = Math.abs(arc.radii[1]);
  if (r1 === 0 || r2 === 0) return { kind: 'line', from, to };
  const turned = (arc.turned * Math.PI) / 180;
  const cos = Math.cos(turned);
  const sin = Math.sin(turned);
  // Half the chord in the ellipse's frame (F.6.5.1).
  const hx = (from[0] - to[0]) / 2;
  const hy = (from[1] - to[1]) / 2;
  const x = cos * hx + sin * hy;
  const y = cos * hy - sin * hx;
  const lambda = Math.hypot(x / r1, y / r2);
  // Within rounding of a half turn it is one: the centre is the chord's middle, with no root of a difference.
  const isHalfTurn = lambda >= 1 - 1e-14;
  if (lambda > 1) {
    r1 *= lambda;
    r2 *= lambda;
  }
  const factor = isHalfTurn
    ? 0
    : ((arc.large === arc.positive ? -1 : 1) * Math.sqrt((1 - lambda) * (1 + lambda))) / lambda;
  const cx = (factor * r1 * y) / r2;
  const cy = (-factor * r2 * x) / r1;
  const start = Math.atan2((y - cy) / r2, (x - cx) / r1);
  const end = Math.atan2((-y - cy) / r2, (-x - cx) / r1);
  return {
    kind: 'arc',
    from,
    to,
    centre: [cos * cx - sin * cy + (from[0] + to[0]) / 2, sin * cx + cos * cy + (from[1] + to[1]) / 2],
    radii: [r1, r2],
    turned,
    start,
    sweep: isHalfTurn ? (arc.positive ? Math.PI : -Math.PI) : sweepBetween(start, end, arc.positive),
  };
}

function sweepBetween(start: number, end: number, positive: boolean): number {
  const sweep = end - start;
  if (positive) return sweep < 0 ? sweep + 2 * Math.PI : sweep;
  return sweep > 0 ? sweep - 2 * Math.PI : sweep;
}
