import type { Point } from '../../mesher/index.ts';

/** Every code a {@link CaseError} can carry. README.md lists each with its remedy; a test compares the lists. */
export const caseCodes = [
  'CASE_TOO_LARGE',
  'CASE_NOT_JSON',
  'CASE_KEY_TWICE',
  'CASE_KEY_UNKNOWN',
  'CASE_KEY_MISSING',
  'CASE_VALUE_WRONG',
  'UNIT_WRONG',
  'VALUE_OUT_OF_RANGE',
  'EXPRESSION_REFUSED',
  'NOISE_NOT_STATED',
  'TENSOR_CONVENTION',
  'FLOOR_WITHOUT_DEPTH',
  'NAME_UNKNOWN',
  'NAME_RESERVED',
  'NAME_TWICE',
  'FIGURE_NOT_UNDERSTOOD',
  'WALL_KIND_NOT_POSSIBLE',
  'WALL_KINDS_OVERLAP',
  'WALL_EXTENT_WRONG',
  'FILE_NOT_READ',
  'DRAWING_TOO_LARGE',
  'DRAWING_UNSAFE',
  'DRAWING_NOT_READ',
  'DRAWING_SCALE_MISSING',
  'DRAWING_OUTLINE_UNCLEAR',
] as const;

export type CaseCode = (typeof caseCodes)[number];

/** Where a case, drawing or request is at fault. */
export interface Where {
  readonly at?: readonly Point[];
  /** Path of keys in the case file, e.g. drawing.holes.post 1 */
  readonly key?: string;
  readonly file?: string;
  readonly line?: number;
}

/** A case that cannot be answered as stated: what is wrong, where, and what to do about it. */
export class CaseError extends Error {
  override readonly name = 'CaseError';
  readonly code: string;
  readonly what: string;
  readonly where: Where;
  readonly remedy: string;

  constructor(code: string, what: string, where: Where, remedy: string, cause?: unknown) {
    super(`${what}. ${remedy}`, { cause });
    this.code = code;
    this.what = what;
    this.where = where;
    this.remedy = remedy;
  }
}
