import {
  type Chain,
  type Curve,
  directionAt,
  type Piece,
  type Point,
  pointAt,
  type SizeSource,
} from '../../mesher/index.ts';
import type { Medium } from '../../solver/index.ts';
import type { LayoutDomain } from '../case/layout-domain.ts';
import { driftOverD } from './physics-numbers.ts';

/** How layers that drift makes at walls are meshed. */
export const layerMesh = {
  /** Edge length in the layer ÷ its thickness D/|b·n|: errors of values go like its square. */
  perThickness: 0.12,
  /** Rows of sources from the wall inwards, one thickness apart: at the last, e⁻⁴ of the layer is left. */
  rows: 5,
  /** Layers count as no thinner than this part of the even size. */
  least: 1 / 8,
  /** Nodes spent on all layers together, as a part of the most allowed and in number. */
  partOfNodes: 0.5,
  nodes: 30_000,
} as const;

/**
 * Sizes along the walls where drift makes a layer of thickness D/|b·n| that the times hang on (boundary layers; Roos,
 * Stynes & Tobiska 2008, recalled): walls that catch and that it pushes away from, where a barrier ends, and walls that
 * do not catch at once and that it pushes against, where a well ends. The other two have no layer, or a weak one.
 *
 * @param even edge length of the mesh elsewhere; layers thick against it ask for nothing
 */
export function layerSources(layout: LayoutDomain, even: number, maxNodes: number, scale = 1): SizeSource[] {
  const { outline, holes, innerWalls, regions } = layout.domain;
  const sets = [[], ...regions.map((_, region) => [region])];
  if (layout.problem(sets).media.every(({ drift }) => !drift)) return [];
  const mediumAt = mediaByPlace(layout);
  const step = 1e-3 * even;
  const thicknessAt = (tag: number, at: Point, into: Point): number => {
    const inside: Point = [at[0] - step * into[0], at[1] - step * into[1]];
    const [gx, gy] = driftOverD(mediumAt(inside), inside, step);
    const against = gx * into[0] + gy * into[1];
    const kind = layout.pieces.get(tag)?.physics.kind ?? 'reflecting';
    const counts = against < 0 ? kind === 'absorbing' || kind === 'partlyAbsorbing' : kind !== 'absorbing';
    if (!counts || !Number.isFinite(against)) return Number.POSITIVE_INFINITY;
    return Math.max(1 / Math.abs(against), even * layerMesh.least);
  };
  const piecesOf = (chains: readonly Chain[]): Piece[] => chains.flatMap(({ pieces }) => pieces);
  const rims = piecesOf([outline, ...holes]);
  const inner = piecesOf(innerWalls);
  const sourcesOf = (coarser: number): SizeSource[] => {
    const sources = ({ curve, tag }: Piece, side: -1 | 1): SizeSource[] =>
      along(curve, side, even, coarser * scale * layerMesh.perThickness, (at, into) =>
        thicknessAt(tag, at, into),
      );
    return [...rims, ...inner]
      .flatMap((piece) => sources(piece, 1))
      .concat(inner.flatMap((piece) => sources(piece, -1)));
  };
  const sources = sourcesOf(1);
  // Each source stands for the nodes of a strip of its size's width and one thickness long.
  const nodes = ((2 / Math.sqrt(3)) * sources.length) / (scale * layerMesh.perThickness);
  const most = Math.min(layerMesh.nodes, layerMesh.partOfNodes * maxNodes);
  return nodes <= most ? sources : sourcesOf(Math.sqrt(nodes / most));
}

/**
 * Rows of sources one size apart along a curve, where they ask for less than `even`.
 *
 * @param side 1: the compartment is on the left of the curve; −1: on its right
 * @param perThickness size ÷ thickness of the layer
 * @param thicknessAt told a place of the curve and the unit normal into the wall; infinite without a layer
 */
function along(
  curve: Curve,
  side: -1 | 1,
  even: number,
  perThickness: number,
  thicknessAt: (at: Point, into: Point) => number,
): SizeSource[] {
  const found: SizeSource[] = [];
  for (let t = 0; t < 1; ) {
    const [dx, dy] = directionAt(curve, t);
    const speed = Math.hypot(dx, dy);
    const [x, y] = pointAt(curve, t);
    const into: Point = speed > 0 ? [(side * dy) / speed, (-side * dx) / speed] : [0, 0];
    const thickness = speed > 0 ? thicknessAt([x, y], into) : Number.POSITIVE_INFINITY;
    const size = perThickness * thickness;
    for (let row = 0; size < even && row < layerMesh.rows; row++) {
      const away = row * thickness;
      found.push({ at: [x - away * into[0], y - away * into[1]], size });
    }
    t += speed > 0 ? Math.min(1 / 8, Math.min(size, even) / speed) : 1 / 64;
  }
  return found;
}

/** The medium at a place, by the regions whose border, drawn with chords, goes round it. */
function mediaByPlace(layout: LayoutDomain): (at: Point) => Medium {
  const borders = layout.domain.regions.map(corners);
  const known = new Map<string, Medium>();
  return (at) => {
    const set = borders.flatMap((border, region) => (goesRound(border, at) ? [region] : []));
    const key = set.join();
    const medium = known.get(key) ?? layout.problem([set]).media[0];
    if (!medium) throw new Error('a problem without a medium');
    known.set(key, medium);
    return medium;
  };
}

function corners({ pieces }: Chain): Point[] {
  return pieces.flatMap(({ curve }) => {
    const steps = curve.kind === 'line' ? 1 : 24;
    return Array.from({ length: steps }, (_, i) => pointAt(curve, i / steps));
  });
}

/** Even-odd rule. */
function goesRound(border: readonly Point[], [x, y]: Point): boolean {
  let inside = false;
  border.forEach(([bx, by], i) => {
    const [ax, ay] = border.at(i - 1) ?? [bx, by];
    if (ay > y !== by > y && x < ax + ((y - ay) / (by - ay)) * (bx - ax)) inside = !inside;
  });
  return inside;
}
