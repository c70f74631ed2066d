import type { MesherCode, Point } from '../../mesher/index.ts';
import { sha256 } from './canonical.ts';
import type { CaseUnits, Stated } from './case.ts';
import { type Dimension, exampleOf } from './dimensions.ts';
import type { DrawingContext } from './drawing-context.ts';
import { type CaseCode, CaseError } from './errors.ts';
import { numberOf, ratioOfDecimal, times } from './exact-ratio.ts';
import { joinKey } from './key-path.ts';
import { notYet } from './not-available.ts';
import { parseQuantity, type Refuse } from './units.ts';

/** Where a case is from: names for messages and a way to read the files beside it. */
export interface CaseSource {
  /** Name of the case file, for messages. */
  readonly file?: string;
  /** Folder of the case file; drawing files are named relative to it. */
  readonly folder?: string;
  /** Reads a file beside the case; may throw. */
  readonly readFile?: (name: string) => string | Uint8Array;
}

/** Said wherever a diffusion coefficient is refused (METHODS 1). */
export const factorTwo = 'Mind the factor two: dX = b dt + σ dW has D = σ²/2';

/** What is known and gathered while one case is read. */
export interface CaseContext extends DrawingContext {
  /** A value with its range and source, in the case's units. */
  readonly stated: (raw: unknown, dimension: Dimension, key: string) => Stated;
  /** A value that must be above 0. */
  readonly positive: (raw: unknown, dimension: Dimension, key: string) => Stated;
  readonly readFile: (name: string, key: string) => string;
  /** Refusals of a value at a key, for readers that know no keys. */
  readonly refuseAt: (key: string) => Refuse;
  /** Tells what is not available yet and gives the words back; undefined when it is available. */
  readonly notYet: (what: string, place: string) => string | undefined;
  readonly notAvailable: Set<string>;
  readonly warnings: string[];
  /** Values converted to the case's units, by key. */
  readonly resolved: Map<string, unknown>;
  /** SHA-256 of each file used, by name. */
  readonly files: Map<string, string>;
}

type Fail = (
  code: CaseCode | MesherCode,
  what: string,
  key: string,
  remedy: string,
  at?: readonly Point[],
) => never;

/** Refusals that name the file, the line and the key. */
export const failIn =
  (file: string | undefined, lineOf: (key: string) => number): Fail =>
  (code, what, key, remedy, at) => {
    const named = file === undefined ? {} : { file };
    const keyed = key === '' ? {} : { key };
    throw new CaseError(
      code,
      what,
      { ...named, line: lineOf(key), ...keyed, ...(at === undefined ? {} : { at }) },
      remedy,
    );
  };

/** Makes the context of one reading. */
export function caseContext(units: CaseUnits, fail: Fail, source: CaseSource): CaseContext {
  const resolved = new Map<string, unknown>();
  const files = new Map<string, string>();
  const notAvailable = new Set<string>();
  const refuseAt =
    (key: string): Refuse =>
    (code, what, remedy) =>
      fail(code, what, key, remedy);
  const convert = (raw: unknown, dimension: Dimension, key: string): number => {
    const refuse: Refuse = (code, what, remedy) =>
      fail(code, what, key, dimension === 'diffusion' ? `${remedy}. ${factorTwo}` : remedy);
    if (typeof raw === 'string') return parseQuantity(raw, dimension, units, refuse);
    if (typeof raw === 'number' && Number.isFinite(raw)) return raw;
    return fail(
      'CASE_VALUE_WRONG',
      'this is not a finite number or a text with a unit',
      key,
      `Give ${exampleOf(dimension, units)}`,
    );
  };
  const stated = (raw: unknown, dimension: Dimension, key: string): Stated => {
    if (!isStatedForm(raw)) {
      const value = convert(raw, dimension, key);
      if (typeof raw === 'string') resolved.set(key, value);
      return { value };
    }
    const value = convert(raw.value, dimension, joinKey(key, 'value'));
    const within =
      raw.within === undefined
        ? undefined
        : readWithin(raw.within, value, dimension, joinKey(key, 'within'), convert, fail);
    resolved.set(joinKey(key, 'value'), value);
    if (within !== undefined) resolved.set(joinKey(key, 'within'), within);
    return {
      value,
      ...(within === undefined ? {} : { within }),
      ...(typeof raw.source === 'string' ? { source: raw.source } : {}),
    };
  };
  return {
    units,
    fail,
    refuseAt,
    stated,
    quantity: (raw, dimension, key) => stated(raw, dimension, key).value,
    positive: (raw, dimension, key) => {
      const found = stated(raw, dimension, key);
      if (!(found.value > 0)) {
        fail(
          'VALUE_OUT_OF_RANGE',
          `${found.value} is not above 0`,
          key,
          `Give a value above 0, such as ${exampleOf(dimension, units)}${dimension === 'diffusion' ? `. ${factorTwo}` : ''}`,
        );
      }
      if (found.within !== undefined && !(found.within[0] > 0)) {
        fail(
          'VALUE_OUT_OF_RANGE',
          'the range reaches 0 or below',
          joinKey(key, 'within'),
          'Give a range above 0, such as "half to double"',
        );
      }
      return found;
    },
    readFile: (name, key) => readBeside(name, key, source, files, fail),
    notYet: (what, place) => {
      const told = notYet(what, place);
      if (told !== undefined) notAvailable.add(told);
      return told;
    },
    notAvailable,
    warnings: [],
    resolved,
    files,
  };
}

const isStatedForm = (raw: unknown): raw is { value: unknown; within?: unknown; source?: unknown } =>
  typeof raw === 'object' && raw !== null && 'value' in raw;

/**
 * A range: `10 %`, `half to double`, or [low, high].
 *
 * @returns [low, high] in the unit of the value
 */
export function readWithin(
  raw: unknown,
  value: number,
  dimension: Dimension,
  key: string,
  convert: (raw: unknown, dimension: Dimension, key: string) => number,
  fail: Fail,
): [number, number] {
  let ends: [number, number];
  if (Array.isArray(raw)) {
    ends = [convert(raw[0], dimension, joinKey(key, 0)), convert(raw[1], dimension, joinKey(key, 1))];
  } else if (typeof raw === 'string' && /^\s*half to double\s*$/.test(raw)) {
    ends = [value / 2, value * 2];
  } else {
    const text = typeof raw === 'string' ? raw.replace(/^\s*±\s*/, '') : '';
    if (!/%\s*$/.test(text)) {
      fail(
        'CASE_VALUE_WRONG',
        `${JSON.stringify(raw)} is not understood as a range`,
        key,
        'Give "10 %", "half to double" or [low, high]',
      );
    }
    const part = convert(text, 'fraction', key);
    ends = [scaled(value, -part), scaled(value, part)];
  }
  if (ends[0] > ends[1]) ends.reverse();
  if (!(ends[0] <= value && value <= ends[1])) {
    fail(
      'VALUE_OUT_OF_RANGE',
      'the value lies outside its own range',
      key,
      'Give [low, high] with the value between them',
    );
  }
  return ends;
}

/** value·(1 + part), rounded once: 50 % more than 1e-4 is 1.5e-4 as it would be typed. */
function scaled(value: number, part: number): number {
  const [a, b] = [ratioOfDecimal(String(value)), ratioOfDecimal(String(part))];
  if (a === undefined || b === undefined) return value * (1 + part);
  return numberOf(times(a, { over: b.under + b.over, under: b.under }));
}

const maxFileBytes = 5_000_000;

/** Reads a file beside the case and keeps its hash. */
function readBeside(
  name: string,
  key: string,
  source: CaseSource,
  files: Map<string, string>,
  fail: Fail,
): string {
  const parts = name.split(/[\\/]/);
  if (parts.includes('..') || /^([\\/]|[A-Za-z]:)/.test(name) || name.includes('\0')) {
    fail(
      'FILE_NOT_READ',
      `${JSON.stringify(name)} is not beside the case file`,
      key,
      'Put the file in the folder of the case and give its name',
    );
  }
  if (source.readFile === undefined) {
    return fail(
      'FILE_NOT_READ',
      `the file ${JSON.stringify(name)} was not given with the case`,
      key,
      'Hand in the file together with the case',
    );
  }
  let content: string | Uint8Array;
  try {
    content = source.readFile(name);
  } catch (cause) {
    if (cause instanceof CaseError) return fail(cause.code as CaseCode, cause.what, key, cause.remedy);
    return fail(
      'FILE_NOT_READ',
      `the file ${JSON.stringify(name)} cannot be read`,
      key,
      'Check the name; it is relative to the case file',
    );
  }
  const bytes = typeof content === 'string' ? new TextEncoder().encode(content) : content;
  if (bytes.byteLength > maxFileBytes) {
    fail(
      'DRAWING_TOO_LARGE',
      `${JSON.stringify(name)} has ${(bytes.byteLength / 1e6).toFixed(1)} MB`,
      key,
      'Give a file of at most 5 MB',
    );
  }
  files.set(name, sha256(bytes));
  return typeof content === 'string' ? content : new TextDecoder().decode(content);
}
