import { type Arrangement, arrange } from './arrange.ts';
import type { Chain, Domain, Healing } from './domain.ts';
import { type LineGraph, makeLineGraph } from './line-graph.ts';
import { noArea, tidyLoops } from './loops.ts';
import { judge } from './verdict.ts';

/** A sound domain together with the lines a triangulation of it has to contain. */
export interface SoundDomain {
  readonly domain: Domain;
  readonly healed: readonly Healing[];
  readonly graph: LineGraph;
}

/**
 * Puts a drawing right where that changes nothing that matters, and refuses it where it would.
 *
 * Put right and reported: repeated points, gaps within the tolerance, winding, a hole given twice, contacts within
 * the tolerance, inner walls cut where they cross. The first point of each loop stays the first. Holes may touch
 * walls or each other in points. Crossings and insides are decided by exact predicates; near-linear time.
 *
 * @throws {MesherError} NOT_FINITE, LOOP_OPEN, NO_AREA, WALLS_CROSS, WALLS_OVERLAP, ZERO_WIDTH_SPIKE, HOLE_OUTSIDE,
 *   HOLE_IN_HOLE, INNER_WALL_OUTSIDE; `where` names all places of the kind of fault reported.
 */
export function healDomain(domain: Domain): { domain: Domain; healed: Healing[] } {
  const sound = makeSound(domain);
  return { domain: sound.domain, healed: [...sound.healed] };
}

/** {@link healDomain} that also gives the lines to triangulate. */
export function makeSound(domain: Domain): SoundDomain {
  const tidy = tidyLoops(domain);
  for (const chain of [tidy.domain.outline, ...tidy.domain.holes]) {
    if (isFlat(chain, domain.tolerance)) throw noArea(chain);
  }
  const arrangement: Arrangement = arrange(tidy.domain);
  const graph = makeLineGraph(arrangement);
  judge(arrangement, graph);
  return { domain: tidy.domain, healed: [...tidy.healed, ...arrangement.healed], graph };
}

/** True when all points of a polygon lie within the tolerance of one line. */
function isFlat(chain: Chain, tolerance: number): boolean {
  if (chain.pieces.some(({ curve }) => curve.kind !== 'line')) return false;
  const points = chain.pieces.map(({ curve }) => curve.from);
  const [a] = points;
  let far = a;
  let reach = 0;
  for (const p of points) {
    const d = Math.hypot(p[0] - a[0], p[1] - a[1]);
    if (d > reach) [far, reach] = [p, d];
  }
  const height = (p: readonly [number, number]): number =>
    Math.abs((far[0] - a[0]) * (p[1] - a[1]) - (far[1] - a[1]) * (p[0] - a[0])) / reach;
  return reach === 0 || points.every((p) => height(p) <= tolerance);
}
