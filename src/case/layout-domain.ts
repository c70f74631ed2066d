import {
  type Chain,
  type Curve,
  type Domain,
  type Piece,
  type Point,
  parameterAtLength,
  partOf,
} from '../../mesher/index.ts';
import type { Problem, Wall } from '../../solver/index.ts';
import { type Ruler, rulerOf } from './arc-length.ts';
import type { Case, Layout } from './case.ts';
import { junctionsOf } from './junctions.ts';
import { mediaOf } from './layout-media.ts';
import { type Claim, claimAt, claimsOf } from './wall-claims.ts';

/** What a tag of the layout's domain stands for. */
export interface WallPiece {
  readonly tag: number;
  /** Loop or inner wall the piece lies on. */
  readonly loop: string;
  /** Arc length on the loop at the piece's two ends, in the length unit. */
  readonly from: number;
  readonly to: number;
  /** Name of the wall it belongs to in this layout; absent where the wall is unnamed or does nothing. */
  readonly wall?: string;
  readonly physics: Wall;
}

/** One layout of a case, cut so that every piece of wall has one kind: the input of mesher and solver. */
export interface LayoutDomain {
  readonly domain: Domain;
  /** By tag. */
  readonly pieces: ReadonlyMap<number, WallPiece>;
  /** Names of the exits, in the order of their numbers. */
  readonly exits: readonly string[];
  /** Places where the kind of wall changes and inner walls end: the mesh is graded towards them. */
  readonly junctions: readonly Point[];
  /** The physics for a mesh of this domain. */
  readonly problem: (regionSets: readonly (readonly number[])[]) => Problem;
}

/**
 * Cuts a case's drawing for one layout: every piece of wall has one kind and a tag of its own.
 *
 * Exits are the walls that catch, then the regions that catch from below, in the order of the layout. Of several
 * regions with a D of their own over one place, the last listed counts: an inner region is listed after the one
 * around it.
 *
 * @throws {CaseError} WALL_KINDS_OVERLAP where two walls of the layout lie on one stretch, WALL_KIND_NOT_POSSIBLE for
 *   a wall on nothing but holes left out
 */
export function layoutDomain(theCase: Case, layout: Layout): LayoutDomain {
  const { drawing, particle } = theCase;
  const kept = withoutHoles(drawing.holes, layout, theCase);
  const exits: string[] = [];
  const claims = claimsOf(layout, [drawing.outline, ...kept, ...drawing.innerWalls], exits);
  const pieces = new Map<number, WallPiece>();
  const cut = (chain: Chain): Chain => {
    const own = claims.filter((claim) => claim.loop === chain.name);
    return { name: chain.name, pieces: cutPieces(rulerOf(chain), own, pieces, layout, theCase) };
  };
  const outline = cut(drawing.outline);
  const holes = kept.map(cut);
  const innerWalls = drawing.innerWalls.map(cut);
  const domain: Domain = {
    outline,
    holes,
    innerWalls,
    regions: numbered(drawing.regions, pieces.size),
    tolerance: drawing.tolerance,
  };
  const media = mediaOf(theCase, layout, exits);
  return {
    domain,
    pieces,
    exits,
    junctions: junctionsOf(domain, pieces, (region) => particle.diffusionIn.has(region)),
    problem: (regionSets) => ({
      noise: particle.noise,
      media: regionSets.map(media),
      walls: new Map([...pieces].map(([tag, piece]) => [tag, piece.physics])),
      exitCount: exits.length,
      ...(theCase.depth && { depth: theCase.depth }),
    }),
  };
}

function withoutHoles(holes: readonly Chain[], layout: Layout, { drawing }: Case): readonly Chain[] {
  const left = new Set(layout.without.map((name) => drawing.sameAs?.get(name) ?? name));
  return holes.filter(({ name }) => !left.has(name));
}

/** Pieces of one chain cut at joints and at the ends of this layout's stretches; adds what each is to `known`. */
function cutPieces(
  ruler: Ruler,
  claims: readonly Claim[],
  known: Map<number, WallPiece>,
  layout: Layout,
  theCase: Case,
): Piece[] {
  const { chain, joints, length } = ruler;
  const nearer = Math.max(theCase.drawing.tolerance, 1e-13 * length);
  const ends = claims.flatMap(({ intervals }) => intervals.flat()).sort((a, b) => a - b);
  const result: Piece[] = [];
  let next = 0;
  chain.pieces.forEach(({ curve }, index) => {
    const start = joints[index] ?? 0;
    const end = joints[index + 1] ?? length;
    const cuts = [start];
    for (; next < ends.length && (ends[next] ?? 0) < end - nearer; next++) {
      const s = ends[next] ?? 0;
      if (s > (cuts.at(-1) ?? start) + nearer) cuts.push(s);
    }
    cuts.push(end);
    for (let i = 0; i + 1 < cuts.length; i++) {
      const from = cuts[i] ?? start;
      const to = cuts[i + 1] ?? end;
      const part = partBetween(curve, from - start, to - start, end - start);
      const claim = claimAt(claims, (from + to) / 2, ruler, layout, theCase);
      const tag = known.size;
      const physics: Wall = claim?.physics ?? { kind: 'reflecting' };
      const wall = claim && physics.kind !== 'reflecting' ? { wall: claim.wall } : {};
      known.set(tag, { tag, loop: chain.name, from, to, ...wall, physics });
      result.push({ curve: part, tag });
    }
  });
  return result;
}

function partBetween(curve: Curve, from: number, to: number, length: number): Curve {
  const t0 = from === 0 ? 0 : parameterAtLength(curve, from);
  const t1 = to === length ? 1 : parameterAtLength(curve, to);
  return partOf(curve, t0, t1);
}

/** Region borders with tags after those of the walls, so that every tag of the domain is unique. */
function numbered(regions: readonly Chain[], first: number): Chain[] {
  let tag = first;
  return regions.map(({ name, pieces }) => ({
    name,
    pieces: pieces.map(({ curve }) => ({ curve, tag: tag++ })),
  }));
}
