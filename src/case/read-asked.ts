import type { Accuracy, Asked, Figure, Report } from './case.ts';
import type { CaseContext } from './case-context.ts';
import { type FigureNames, figureDimension, parseFigure } from './figures.ts';
import { joinKey } from './key-path.ts';
import { suggestName } from './nearest-name.ts';
import type { RawAsked, RawCase } from './schema.ts';

/** Defaults of `accuracy`; times to N % have a bracket of their own. */
export const accuracyDefaults = {
  bracket: 0.001,
  bracketOfTimes: 0.01,
  nodes: 500_000,
  seconds: 120,
  paths: 4_000,
  seed: 1,
} as const;

/**
 * Reads what is asked; without `asked`, the mean from the first start.
 *
 * @param starts names of the case's starts, at least one
 * @throws {CaseError} a figure, start or limit that is refused
 */
export function readAsked(
  raw: RawCase['asked'],
  starts: readonly string[],
  names: FigureNames,
  ctx: CaseContext,
): Asked[] {
  const first = starts[0] ?? '';
  if (raw === undefined || raw.length === 0)
    return [{ text: 'mean', figure: { kind: 'mean' }, start: first }];
  return raw.map((asked, i) => {
    const key = joinKey('asked', i);
    const figure = parseFigure(asked.figure, names, ctx.units, ctx.refuseAt(joinKey(key, 'figure')));
    const start = asked.start ?? first;
    if (!starts.includes(start)) {
      ctx.fail(
        'NAME_UNKNOWN',
        `no start is called ${JSON.stringify(start)}`,
        joinKey(key, 'start'),
        suggestName(start, starts, 'start'),
      );
    }
    const limit = readLimit(asked, figure, key, ctx);
    const counts = readCounts(asked, figure, key, ctx);
    return {
      text: asked.figure,
      figure,
      start,
      ...(counts === undefined ? {} : { counts }),
      ...(limit === undefined ? {} : { limit }),
    };
  });
}

function readCounts(raw: RawAsked, figure: Figure, key: string, ctx: CaseContext): 'caught' | undefined {
  if (raw.counts !== 'caught') return undefined;
  if (figure.kind === 'median' || figure.kind === 'time to') return 'caught';
  return ctx.fail(
    'CASE_VALUE_WRONG',
    `"counts": "caught" says nothing of the figure ${JSON.stringify(raw.figure)}`,
    joinKey(key, 'counts'),
    'Leave it out; it is for "median" and "time to N %"',
  );
}

function readLimit(raw: RawAsked, figure: Figure, key: string, ctx: CaseContext): Asked['limit'] {
  const { under, atLeast } = raw;
  if (under !== undefined && atLeast !== undefined) {
    ctx.fail(
      'CASE_VALUE_WRONG',
      'both "under" and "atLeast" are given',
      key,
      'Keep one; ask the figure twice for both',
    );
  }
  const kind = under === undefined ? 'atLeast' : 'under';
  const written = under ?? atLeast;
  if (written === undefined) return undefined;
  const at = joinKey(key, kind);
  const dimension = figureDimension(figure);
  const value = ctx.quantity(written, dimension, at);
  if (value < 0 || (dimension === 'fraction' && value > 1)) {
    const remedy =
      dimension === 'fraction'
        ? 'Give one from 0 to 1, or in per cent, such as "40 %"'
        : 'Give a time above 0';
    ctx.fail('VALUE_OUT_OF_RANGE', `a limit of ${written} can never be met or missed`, at, remedy);
  }
  return { kind, value, text: typeof written === 'string' ? written : String(written) };
}

/** Reads `accuracy`, with the defaults for what is left out; the bracket depends on the first figure asked. */
export function readAccuracy(raw: RawCase['accuracy'], asked: readonly Asked[], ctx: CaseContext): Accuracy {
  const { bracket, bracketOfTimes, nodes, seconds, paths, seed } = accuracyDefaults;
  const first = asked[0]?.figure.kind;
  const isTime = first === 'time to' || first === 'time to leave by' || first === 'median';
  const own =
    raw?.bracket === undefined ? undefined : ctx.quantity(raw.bracket, 'fraction', 'accuracy.bracket');
  if (own !== undefined && !(own > 0 && own < 1)) {
    ctx.fail(
      'VALUE_OUT_OF_RANGE',
      `${raw?.bracket} is no width of a bracket`,
      'accuracy.bracket',
      'Give one such as "0.1 %"',
    );
  }
  if (own !== undefined) ctx.notYet('bracket', 'accuracy.bracket');
  if (raw?.paths !== undefined && raw.paths > 0) ctx.notYet('paths', 'accuracy.paths');
  return {
    bracket: own ?? (isTime ? bracketOfTimes : bracket),
    nodes: raw?.nodes ?? nodes,
    seconds: raw?.seconds ?? seconds,
    paths: raw?.paths ?? paths,
    seed: raw?.seed ?? seed,
  };
}

/** Moments that are given unasked: the mean, and the second for the standard deviation. */
export const leastMoments = 2;

/** Reads `report`; undefined when there is none. */
export function readReport(raw: RawCase['report'], names: FigureNames, ctx: CaseContext): Report | undefined {
  if (raw === undefined) return undefined;
  const { survivalAt = [], occupationOf = [], moments = leastMoments, field = [] } = raw;
  const times = survivalAt.map(
    (time, i) => ctx.positive(time, 'time', joinKey('report.survivalAt', i)).value,
  );
  for (const [i, name] of occupationOf.entries()) {
    if (names.regions.includes(name)) continue;
    ctx.fail(
      'NAME_UNKNOWN',
      `no region is called ${JSON.stringify(name)}`,
      joinKey('report.occupationOf', i),
      suggestName(name, names.regions, 'region'),
    );
  }
  const figures = field.map((text, i) =>
    parseFigure(text, names, ctx.units, ctx.refuseAt(joinKey('report.field', i))),
  );
  for (const [i, figure] of figures.entries()) {
    const isGiven = figure.kind === 'mean' || (figure.kind === 'share' && figure.by === undefined);
    if (!isGiven) ctx.notYet('field', `report.field ${JSON.stringify(field[i])}`);
  }
  return { survivalAt: times, occupationOf, moments, field: figures };
}
