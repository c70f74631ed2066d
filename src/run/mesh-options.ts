import {
  type Chain,
  type Curve,
  type Domain,
  directionAt,
  enclosedArea,
  type MeshOptions,
  pointAt,
  type SizeSource,
} from '../../mesher/index.ts';
import type { LayoutDomain } from '../case/layout-domain.ts';
import { layerSources } from './layer-sizes.ts';
import { narrowGaps } from './narrow-gaps.ts';

/** How fine the first mesh of a layout is. Lengths are relative to the even size. */
export const firstMesh = {
  /**
   * The even size is the edge of this many nodes' equilateral triangles. It is the longest edge allowed, so that the
   * mesh comes out with about twice as many; grading adds to them.
   */
  evenNodes: 6000,
  /** Longest edge ÷ width of a narrow part of the compartment, and ÷ the even size at the least. */
  perGap: 1 / 20,
  leastInGap: 1 / 2,
  /** Size where the kind of wall changes, ÷ the even size: values there converge like the size itself (METHODS 4). */
  atJunction: 1 / 256,
  /** Size along curved wall ÷ its radius of curvature. */
  perRadius: 0.12,
  /** Growth of the size per distance. */
  growth: 0.15,
  /** Samples of the curvature on one curve. */
  curveSamples: 12,
} as const;

/**
 * Sizes for the first mesh of a layout: even, graded towards places where the kind of wall changes, along bends, in
 * narrow parts and along walls where drift makes thin layers.
 *
 * @param scale multiplies every size; 2 for a quick coarse mesh
 */
export function meshOptions(layout: LayoutDomain, maxNodes: number, scale = 1): MeshOptions {
  const area = compartmentArea(layout.domain);
  // An equilateral triangle of edge h covers √3/4·h², and there are about two per node.
  const even = scale * Math.sqrt(area / (firstMesh.evenNodes * (Math.sqrt(3) / 2)));
  const sources: SizeSource[] = layout.junctions.map((at) => ({ at, size: even * firstMesh.atJunction }));
  for (const chain of wallChains(layout.domain)) {
    for (const { curve } of chain.pieces) sources.push(...bends(curve, even, scale));
  }
  for (const { at, width } of narrowGaps(layout.domain, even / (scale * firstMesh.perGap))) {
    sources.push({ at, size: Math.max(scale * firstMesh.perGap * width, firstMesh.leastInGap * even) });
  }
  sources.push(...layerSources(layout, even, maxNodes, scale));
  return { maxSize: even, sources, growth: firstMesh.growth, maxNodes };
}

/** Area of the compartment by its curves, in the length unit squared. */
export function compartmentArea(domain: Domain): number {
  let area = Math.abs(enclosedArea(domain.outline));
  for (const hole of domain.holes) area -= Math.abs(enclosedArea(hole));
  return area;
}

function wallChains(domain: Domain): readonly Chain[] {
  return [domain.outline, ...domain.holes, ...domain.innerWalls];
}

function bends(curve: Curve, even: number, scale: number): SizeSource[] {
  if (curve.kind === 'line') return [];
  const sources: SizeSource[] = [];
  for (let i = 0; i <= firstMesh.curveSamples; i++) {
    const t = i / firstMesh.curveSamples;
    // A cusp has no radius; the junction size is as fine as the first mesh gets anywhere.
    const size = Math.max(
      scale * firstMesh.perRadius * radiusOfCurvature(curve, t),
      even * firstMesh.atJunction,
    );
    if (size < even) sources.push({ at: pointAt(curve, t), size });
  }
  return sources;
}

/** Radius of curvature |p′|³ ÷ |p′ × p″|, the second derivative by differences of the first. */
function radiusOfCurvature(curve: Curve, t: number): number {
  const h = 1e-4;
  const a = Math.max(0, t - h);
  const b = Math.min(1, t + h);
  const [dx, dy] = directionAt(curve, t);
  const [ax, ay] = directionAt(curve, a);
  const [bx, by] = directionAt(curve, b);
  const turn = Math.abs(dx * (by - ay) - dy * (bx - ax)) / (b - a);
  return turn > 0 ? Math.hypot(dx, dy) ** 3 / turn : Number.POSITIVE_INFINITY;
}
