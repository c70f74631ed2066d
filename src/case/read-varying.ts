import type { Coefficient } from '../../solver/index.ts';
import type { Stated } from './case.ts';
import type { CaseContext } from './case-context.ts';
import { type Dimension, powersOf } from './dimensions.ts';
import { numberOf, one } from './exact-ratio.ts';
import { compileExpression } from './expression.ts';
import { joinKey } from './key-path.ts';
import type { RawVarying } from './schema.ts';
import { caseUnit, factorToCase } from './units.ts';

/** A value of the case, the same everywhere or not. */
export interface Varying {
  readonly coefficient: Coefficient;
  /** Where the case states a plain value. */
  readonly stated?: Stated;
}

/** Options of {@link readVarying}. */
export interface VaryingOptions {
  /** Must be above 0 where it is the same everywhere; default false. */
  readonly isPositive?: boolean;
  /** The case writes y downwards: its y is −y of the drawing. */
  readonly writtenDown?: boolean;
}

/**
 * Reads a value or an expression in x and y.
 *
 * @returns a coefficient in the case's units, of places with y upwards
 * @throws {CaseError} a unit, a value or an expression that is refused
 */
export function readVarying(
  raw: RawVarying,
  dimension: Dimension,
  key: string,
  ctx: CaseContext,
  { isPositive = false, writtenDown = false }: VaryingOptions = {},
): Varying {
  if (typeof raw !== 'object' || !('expression' in raw)) {
    if (typeof raw === 'string') refuseBareExpression(raw, dimension, key, ctx);
    const stated = (isPositive ? ctx.positive : ctx.stated)(raw, dimension, key);
    if (stated.within !== undefined) ctx.notYet('within', key);
    return { coefficient: { kind: 'constant', value: stated.value }, stated };
  }
  const { at, varies } = compileExpression(raw.expression, joinKey(key, 'expression'), ctx.fail);
  const factor = unitFactor(raw.unit, dimension, key, ctx);
  if (raw.within !== undefined) ctx.notYet('within', key);
  if (!varies) {
    const value = at(0, 0) * factor;
    if (isPositive) ctx.positive(value, dimension, key);
    return { coefficient: { kind: 'constant', value } };
  }
  const scaled = writtenDown
    ? (x: number, y: number) => factor * at(x, -y)
    : (x: number, y: number) => factor * at(x, y);
  return { coefficient: { kind: 'varying', at: scaled } };
}

function unitFactor(unit: string | undefined, dimension: Dimension, key: string, ctx: CaseContext): number {
  const isPlain = ctx.units.length === '' || powersOf(dimension).every((power) => power === 0);
  if (unit === undefined) {
    if (isPlain) return 1;
    ctx.fail(
      'CASE_KEY_MISSING',
      'the expression has no "unit"',
      key,
      `Add one, such as "unit": ${JSON.stringify(caseUnit(dimension, ctx.units))}`,
    );
  }
  const factor =
    unit === '1' && isPlain
      ? one
      : factorToCase(unit, dimension, ctx.units, ctx.refuseAt(joinKey(key, 'unit')));
  const value = numberOf(factor);
  if (unit !== undefined) ctx.resolved.set(joinKey(key, 'unit'), { factor: value });
  return value;
}

/** A bare text with x or y is an expression in want of its form, not a misspelled value. */
function refuseBareExpression(text: string, dimension: Dimension, key: string, ctx: CaseContext): void {
  const plain = text.replace(/\d\s*x\s*10/g, '');
  if (!/(^|[^A-Za-z])[xy]($|[^A-Za-z])/.test(plain)) return;
  const unit = dimension === 'number' ? '1' : caseUnit(dimension, ctx.units) || '1';
  ctx.fail(
    'CASE_VALUE_WRONG',
    `${JSON.stringify(text)} reads like an expression in x and y`,
    key,
    `Write { "expression": ${JSON.stringify(text)}, "unit": ${JSON.stringify(unit)} }`,
  );
}
