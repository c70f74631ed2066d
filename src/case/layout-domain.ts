import type { Domain, Point } from '../../mesher/index.ts';
import type { Problem, Wall } from '../../solver/index.ts';

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
