import type { MesherCode, Point } from '../../mesher/index.ts';
import type { CaseUnits } from './case.ts';
import type { Dimension } from './dimensions.ts';
import type { CaseCode } from './errors.ts';
import { joinKey } from './key-path.ts';

/** What reading a drawing and its walls needs from the reading of the case. */
export interface DrawingContext {
  readonly units: CaseUnits;
  /** A length or angle as written, in the case's length unit or in degrees. */
  readonly quantity: (raw: unknown, dimension: Dimension, key: string) => number;
  /** Text of a drawing file named in the case; throws or fails when there is none. */
  readonly readFile?: (name: string, key: string) => string;
  /** Ends the reading with a message; places as the case writes them. */
  readonly fail: (
    code: CaseCode | MesherCode,
    what: string,
    key: string,
    remedy: string,
    at?: readonly Point[],
  ) => never;
}

/** A point as the case writes it. */
export function readPoint(raw: unknown, key: string, ctx: DrawingContext): Point {
  if (!Array.isArray(raw) || raw.length !== 2) {
    ctx.fail('CASE_VALUE_WRONG', 'a point is two lengths', key, 'Give [x, y], such as [0.4, 0.6]');
  }
  const [x, y] = raw as unknown[];
  return [readLength(x, key, ctx, 0), readLength(y, key, ctx, 1)];
}

/**
 * A coordinate or length as the case writes it: numbers, the usual form, do not pay for a key each.
 *
 * @param index of the length within the list at `key`, where it is one
 */
export function readLength(raw: unknown, key: string, ctx: DrawingContext, index?: number): number {
  if (typeof raw === 'number' && Number.isFinite(raw)) return raw;
  return ctx.quantity(raw, 'length', index === undefined ? key : joinKey(key, index));
}
