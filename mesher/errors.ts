import type { Point } from './domain.ts';

/** Every code a {@link MesherError} can carry. README.md lists each with its remedy; a test compares the lists. */
export type MesherCode =
  | 'WALLS_CROSS'
  | 'WALLS_OVERLAP'
  | 'ZERO_WIDTH_SPIKE'
  | 'NO_AREA'
  | 'NOT_FINITE'
  | 'LOOP_OPEN'
  | 'HOLE_IN_HOLE'
  | 'HOLE_OUTSIDE'
  | 'INNER_WALL_OUTSIDE'
  | 'CORNER_TOO_SHARP'
  | 'TOO_MANY_TRIANGLES'
  | 'TOO_MANY_CORNERS'
  | 'TRIANGULATION_FAILED'
  | 'MESH_NOT_FROM_HERE'
  | 'MESHING_STOPPED';

/** Where a geometry is at fault: places in the drawing's own coordinates, and the loops by name. */
export interface MesherWhere {
  readonly at?: readonly Point[];
  readonly loops?: readonly string[];
}

/** A drawing that cannot be meshed: what is wrong, where, and what to do about it. */
export class MesherError extends Error {
  override readonly name = 'MesherError';
  readonly code: MesherCode;
  readonly what: string;
  readonly where: MesherWhere;
  readonly remedy: string;

  constructor(code: MesherCode, what: string, where: MesherWhere, remedy: string, cause?: unknown) {
    super(`${what}. ${remedy}`, { cause });
    this.code = code;
    this.what = what;
    this.where = where;
    this.remedy = remedy;
  }
}
