import type { Point } from '../../mesher/index.ts';

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
