import type { CaseCode } from './errors.ts';
import { joinKey } from './key-path.ts';
import { nearestName } from './nearest-name.ts';

/** Why a value does not fit a schema, in words for the one who wrote it. */
export interface Mismatch {
  readonly code: CaseCode;
  readonly what: string;
  readonly key: string;
  readonly remedy: string;
}

/** The part of JSON Schema that the case's schema uses. */
interface Schema {
  readonly type?: string;
  readonly description?: string;
  readonly const?: unknown;
  readonly enum?: readonly unknown[];
  readonly anyOf?: readonly Schema[];
  readonly properties?: Readonly<Record<string, Schema>>;
  readonly required?: readonly string[];
  readonly additionalProperties?: Schema | boolean;
  readonly prefixItems?: readonly Schema[];
  readonly items?: Schema | boolean;
  readonly minItems?: number;
  readonly maxLength?: number;
  readonly minimum?: number;
  readonly exclusiveMinimum?: number;
  readonly maximum?: number;
}

const lastPart = /("(?:[^"\\]|\\.)*"|[^.]*)$/;

const isRecord = (value: unknown): value is Record<string, unknown> =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

function wordsFor(value: unknown): string {
  if (value === null) return 'nothing (null)';
  if (Array.isArray(value)) return `a list of ${value.length}`;
  if (isRecord(value)) return Object.keys(value).length === 0 ? 'an empty object' : 'an object';
  const text = JSON.stringify(value);
  return text.length > 60 ? `${text.slice(0, 57)}…` : text;
}

const give = (schema: Schema): string =>
  `Give ${schema.description ?? (schema.type === 'string' ? 'a text' : `a ${schema.type ?? 'value'}`)}`;

/**
 * The first thing that is wrong with a value, depth first, in the order of the schema's own keys; undefined when
 * it fits. Of several forms that are allowed the one meant is taken to be that with the most keys in common.
 *
 * @param schema JSON Schema, of which the keywords used by the case's schema are understood
 * @param key path of the value
 */
export function explainMismatch(schema: object, value: unknown, key = ''): Mismatch | undefined {
  return explain(schema as Schema, value, key);
}

function explain(schema: Schema, value: unknown, key: string): Mismatch | undefined {
  if (schema.anyOf !== undefined) return explainChoice(schema, schema.anyOf, value, key);
  if (schema.type !== undefined && !hasType(schema.type, value)) return wrongValue(schema, value, key);
  if (schema.const !== undefined && value !== schema.const) return wrongValue(schema, value, key);
  if (schema.enum !== undefined && !schema.enum.includes(value))
    return wrongChoice(schema, schema.enum, value, key);
  if (isRecord(value)) return explainObject(schema, value, key);
  if (Array.isArray(value)) return explainList(schema, value, key);
  const {
    minimum = -Infinity,
    maximum = Infinity,
    exclusiveMinimum = -Infinity,
    maxLength = Infinity,
  } = schema;
  const outside =
    typeof value === 'number' && (value < minimum || value > maximum || value <= exclusiveMinimum);
  const long = typeof value === 'string' && value.length > maxLength;
  if (outside) return { ...wrongValue(schema, value, key), code: 'VALUE_OUT_OF_RANGE' };
  return long ? wrongValue(schema, value, key) : undefined;
}

function hasType(type: string, value: unknown): boolean {
  if (type === 'object') return isRecord(value);
  if (type === 'array') return Array.isArray(value);
  if (type === 'integer') return Number.isInteger(value);
  return typeof value === type;
}

/** A value that is not there is told at its owner: 'partlyAbsorbing has no value'. */
function wrongValue(schema: Schema, value: unknown, key: string): Mismatch {
  const name = lastPart.exec(key)?.[1] ?? '';
  const isNothing = value === null || value === '' || (isRecord(value) && Object.keys(value).length === 0);
  if (isNothing && name !== '') {
    const owner = key.slice(0, Math.max(0, key.length - name.length - 1));
    return {
      code: 'CASE_VALUE_WRONG',
      what: `${name} has no value`,
      key: owner === '' ? key : owner,
      remedy: give(schema),
    };
  }
  return {
    code: 'CASE_VALUE_WRONG',
    what: `${wordsFor(value)} does not fit here`,
    key,
    remedy: give(schema),
  };
}

function wrongChoice(schema: Schema, allowed: readonly unknown[], value: unknown, key: string): Mismatch {
  const nearest = typeof value === 'string' ? nearestName(value, allowed.map(String)) : undefined;
  const hint = nearest === undefined || value === '' ? '' : `Did you mean ${JSON.stringify(nearest)}? `;
  const mismatch = wrongValue(schema, value, key);
  return { ...mismatch, remedy: hint + mismatch.remedy };
}

function explainObject(schema: Schema, value: Record<string, unknown>, key: string): Mismatch | undefined {
  const { properties = {}, required = [], additionalProperties = true } = schema;
  for (const name of Object.keys(value)) {
    if (Object.hasOwn(properties, name) || additionalProperties !== false) continue;
    const known = Object.keys(properties).filter((each) => each !== 'note' && each !== 'source');
    return {
      code: 'CASE_KEY_UNKNOWN',
      what: `the key ${JSON.stringify(name)} is not known here`,
      key: joinKey(key, name),
      remedy: `Did you mean ${JSON.stringify(nearestName(name, known))}? Known are ${known.join(', ')}; note and source may stand anywhere`,
    };
  }
  for (const name of required) {
    if (Object.hasOwn(value, name)) continue;
    return {
      code: 'CASE_KEY_MISSING',
      what: `${JSON.stringify(name)} is missing`,
      key,
      remedy: give(properties[name] ?? {}),
    };
  }
  for (const [name, entry] of Object.entries(value)) {
    const known = Object.hasOwn(properties, name) ? properties[name] : additionalProperties;
    const mismatch = typeof known === 'object' ? explain(known, entry, joinKey(key, name)) : undefined;
    if (mismatch !== undefined) return mismatch;
  }
  return undefined;
}

function explainList(schema: Schema, value: readonly unknown[], key: string): Mismatch | undefined {
  const { prefixItems, items, minItems = 0 } = schema;
  const most = prefixItems !== undefined && items === false ? prefixItems.length : Number.POSITIVE_INFINITY;
  if (value.length < minItems || value.length > most) return wrongValue(schema, value, key);
  for (const [i, entry] of value.entries()) {
    const known = prefixItems?.[i] ?? items;
    const mismatch = typeof known === 'object' ? explain(known, entry, joinKey(key, i)) : undefined;
    if (mismatch !== undefined) return mismatch;
  }
  return undefined;
}

/** Branches of a choice, and of choices within it. */
const branchesOf = (branches: readonly Schema[]): Schema[] =>
  branches.flatMap((branch) => (branch.anyOf === undefined ? [branch] : branchesOf(branch.anyOf)));

function explainChoice(
  schema: Schema,
  anyOf: readonly Schema[],
  value: unknown,
  key: string,
): Mismatch | undefined {
  const branches = branchesOf(anyOf);
  const mismatches = branches.map((branch) => explain(branch, value, key));
  if (mismatches.some((mismatch) => mismatch === undefined)) return undefined;
  const texts = branches.flatMap((branch) => branch.enum ?? []);
  if (typeof value === 'string' && texts.length > 0) return wrongChoice(schema, texts, value, key);
  let best = -1;
  let chosen: Mismatch | undefined;
  for (const [i, branch] of branches.entries()) {
    if (branch.type === undefined || !hasType(branch.type, value)) continue;
    const own = Object.keys(branch.properties ?? {});
    const common = isRecord(value)
      ? own.filter((name) => Object.hasOwn(value, name) && name !== 'note' && name !== 'source').length
      : 1;
    if (common > best) [best, chosen] = [common, mismatches[i]];
  }
  if (best > 0 && chosen !== undefined) return chosen;
  return unknownForm(schema, branches, value, key);
}

/** No form of several is meant for sure: a misspelled key still is told by its name. */
function unknownForm(schema: Schema, branches: readonly Schema[], value: unknown, key: string): Mismatch {
  const first = isRecord(value)
    ? Object.keys(value).find((name) => name !== 'note' && name !== 'source')
    : undefined;
  const known = [...new Set(branches.flatMap((branch) => Object.keys(branch.properties ?? {})))];
  const nearest =
    first === undefined
      ? undefined
      : nearestName(
          first,
          known.filter((name) => name !== 'note' && name !== 'source'),
        );
  if (first === undefined || nearest === undefined) return wrongValue(schema, value, key);
  return {
    code: 'CASE_KEY_UNKNOWN',
    what: `the key ${JSON.stringify(first)} is not known here`,
    key: joinKey(key, first),
    remedy: `Did you mean ${JSON.stringify(nearest)}? ${give(schema)}`,
  };
}
