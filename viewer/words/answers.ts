/**
 * What the page needs of answers.json (CASE.md), parsed once where it comes in: the contract hands answers on as
 * unknown. Everything the service may leave out is optional here.
 */

export interface Figure {
  readonly value: number;
  readonly low?: number;
  readonly high?: number;
  readonly proven: boolean;
}

export interface Asked {
  readonly figure: string;
  /** Absent for a time that is never reached, and for what could not be answered. */
  readonly value?: number;
  /** For a time that is never reached: the part that ever gets there. */
  readonly never?: number;
  /** The value with its bracket. */
  readonly bracket?: Figure;
  /** Counts what is caught, not what is lost. */
  readonly caughtOnly?: true;
  readonly under?: number;
  readonly atLeast?: number;
  readonly verdict?: 'meets' | 'misses' | 'open';
}

/** What is answered at a place as for a start; times in the case's time unit. */
export interface Reading {
  readonly mean: Figure;
  readonly deviation?: Figure;
  /** Time by which half have gone. */
  readonly half?: Figure;
  /** Time by which 95 % have gone. */
  readonly most?: Figure;
}

export interface Answers extends Reading {
  readonly start: string;
  /** Inverse of the slowest rate. */
  readonly decayTime?: Figure;
  readonly shares: readonly { readonly name: string; readonly share: Figure }[];
  readonly pins: readonly ({ readonly name: string } & Reading)[];
  readonly asked: readonly Asked[];
  readonly difference?: { readonly to: string; readonly value: number; readonly proven: boolean };
  readonly mesh?: { readonly nodes: number; readonly triangles: number; readonly minAngle: number };
  readonly roundingFloor?: number;
  readonly warnings: readonly string[];
  readonly cautions: readonly string[];
  readonly version?: string;
}

type Raw = Readonly<Record<string, unknown>>;

const object = (value: unknown): Raw =>
  typeof value === 'object' && value !== null && !Array.isArray(value) ? (value as Raw) : {};
const numberOf = (value: unknown): number | undefined => (typeof value === 'number' ? value : undefined);
const textOf = (value: unknown): string | undefined => (typeof value === 'string' ? value : undefined);
const list = (value: unknown): readonly unknown[] => (Array.isArray(value) ? value : []);
const texts = (value: unknown): string[] => list(value).flatMap((one) => textOf(one) ?? wordsOf(object(one)));

/** A warning given as an object is read by its own words. */
function wordsOf(raw: Raw): string | [] {
  const words = textOf(raw['what']) ?? textOf(raw['text']) ?? textOf(raw['message']);
  return words ?? [];
}

function figure(value: unknown): Figure | undefined {
  const raw = object(value);
  const amount = numberOf(raw['value']);
  if (amount === undefined) return undefined;
  const [low, high] = [numberOf(raw['low']), numberOf(raw['high'])];
  return {
    value: amount,
    proven: raw['kind'] === 'guaranteed' && low !== undefined && high !== undefined,
    ...(low === undefined ? {} : { low }),
    ...(high === undefined ? {} : { high }),
  };
}

function asked(value: unknown): Asked[] {
  const raw = object(value);
  const name = textOf(raw['figure']);
  if (name === undefined) return [];
  const [under, atLeast] = [numberOf(raw['under']), numberOf(raw['atLeast'])];
  const verdict = (['meets', 'misses', 'open'] as const).find((word) => word === raw['verdict']);
  const bracket = figure(raw);
  const never = numberOf(object(raw['never'])['atMost']);
  return [
    {
      figure: name,
      ...(bracket === undefined ? {} : { value: bracket.value, bracket }),
      ...(never === undefined ? {} : { never }),
      ...(raw['counts'] === 'caught' ? { caughtOnly: true as const } : {}),
      ...(under === undefined ? {} : { under }),
      ...(atLeast === undefined ? {} : { atLeast }),
      ...(verdict === undefined ? {} : { verdict }),
    },
  ];
}

function reading(raw: Raw): Reading | undefined {
  const mean = figure(raw['mean']);
  if (mean === undefined) return undefined;
  const times = object(raw['times']);
  const [deviation, half, most] = [raw['sd'], times['50 %'], times['95 %']].map(figure);
  return {
    mean,
    ...(deviation === undefined ? {} : { deviation }),
    ...(half === undefined ? {} : { half }),
    ...(most === undefined ? {} : { most }),
  };
}

function named(value: unknown): { name: string; share: Figure }[] {
  return Object.entries(object(value)).flatMap(([name, one]) => {
    const share = figure(one);
    return share === undefined ? [] : [{ name, share }];
  });
}

/**
 * Reads one object of answers.json.
 *
 * @throws {TypeError} when it carries no start or no mean
 */
export function readAnswers(value: unknown): Answers {
  const raw = object(value);
  const start = textOf(raw['start']);
  const here = reading(raw);
  if (start === undefined || here === undefined) throw new TypeError('an answer without a start or a mean');
  const difference = object(raw['difference']);
  const [to, amount] = [textOf(difference['to']), numberOf(difference['value'])];
  const mesh = object(raw['mesh']);
  const [nodes, triangles, minAngle] = ['nodes', 'triangles', 'minAngle'].map((key) => numberOf(mesh[key]));
  const roundingFloor = numberOf(object(raw['numbers'])['roundingFloor']);
  const version = textOf(object(raw['made'])['version']);
  const decayTime = figure(raw['decayTime']);
  return {
    start,
    ...here,
    ...(decayTime === undefined ? {} : { decayTime }),
    shares: named(raw['shares']),
    pins: Object.entries(object(raw['pins'])).flatMap(([name, one]) => {
      const there = reading(object(one));
      return there === undefined ? [] : [{ name, ...there }];
    }),
    asked: list(raw['asked']).flatMap(asked),
    ...(to === undefined || amount === undefined
      ? {}
      : { difference: { to, value: amount, proven: difference['kind'] === 'guaranteed' } }),
    ...(nodes === undefined || triangles === undefined || minAngle === undefined
      ? {}
      : { mesh: { nodes, triangles, minAngle } }),
    ...(roundingFloor === undefined ? {} : { roundingFloor }),
    warnings: texts(raw['warnings']),
    cautions: texts(raw['cautions']),
    ...(version === undefined ? {} : { version }),
  };
}
