import type { Asked, Case, Layout, Start } from '../case/case.ts';
import { figureDimension } from '../case/figures.ts';
import { formatNumber, formatQuantity, readableUnit } from '../case/format-quantity.ts';
import type { Answer, Answers, AskedAnswer } from '../run/answers.ts';
import { askedOf } from '../run/asked.ts';
import { cautionsOf } from '../run/cautions.ts';
import { figureWords } from './figure-words.ts';
import { type Column, tableLines, wrapped } from './table.ts';

const lineWidth = 100;

/**
 * The tables a person sees after `tarry solve`: one per figure asked, then where the particles end, then what rules each
 * layout and what to mind.
 */
export function answerLines(
  theCase: Case,
  layouts: readonly Layout[],
  answers: readonly Answers[],
  chosenStart: string | undefined,
): string[] {
  const lines: string[] = [theCase.title, ''];
  const starts = theCase.starts.filter((one) => chosenStart === undefined || one.name === chosenStart);
  for (const start of starts) {
    const rows = answers.filter((one) => one.start === start.name);
    const asked = askedOf(theCase, start.name, chosenStart !== undefined);
    if (asked.length === 0) lines.push(...figureLines(theCase, start, undefined, layouts, rows), '');
    for (const [index, one] of asked.entries()) {
      lines.push(...figureLines(theCase, start, { ...one, index }, layouts, rows), '');
    }
    lines.push(...shareLines(theCase, start, rows), '');
  }
  lines.push(...numberLines(theCase, layouts, answers), '', 'e: estimated, not proven.', '');
  for (const text of theCase.notAvailable) lines.push(...wrapped(text, lineWidth, ''));
  for (const text of theCase.warnings) lines.push(...wrapped(`Warning: ${text}`, lineWidth, ''));
  for (const text of ownWarnings(theCase, answers)) lines.push(...wrapped(`Warning: ${text}`, lineWidth, ''));
  lines.push(...wrapped(cautionsOf(theCase).join(' '), lineWidth, ''));
  return lines;
}

/** What answers warn of beyond the case's own warnings, each once, with the layout it is about. */
function ownWarnings(theCase: Case, answers: readonly Answers[]): string[] {
  const ofCase = new Set([...theCase.warnings, ...theCase.notAvailable]);
  const found = answers.flatMap(({ layout, warnings }) =>
    warnings.filter((text) => !ofCase.has(text)).map((text) => `layout ${JSON.stringify(layout)}: ${text}`),
  );
  return [...new Set(found)];
}

/** Numbers without a dimension by layout (METHODS 3), those that any layout has. */
function numberLines(theCase: Case, layouts: readonly Layout[], answers: readonly Answers[]): string[] {
  const solved = layouts.flatMap(({ name }) => answers.find((one) => one.layout === name) ?? []);
  if (solved.length === 0) return [];
  const columns = (
    [
      ['vL/D', ({ numbers }: Answers) => numbers.peclet],
      ['κL/D', ({ numbers }: Answers) => numbers.kappaLOverD],
      ['cL²/D', ({ numbers }: Answers) => numbers.cL2OverD],
      ['rounding', ({ numbers }: Answers) => numbers.roundingFloor],
    ] as const
  ).filter(([, of]) => solved.some((one) => of(one) !== undefined));
  const rows = solved.map((one) => [
    one.layout,
    ...columns.map(([, of]) => {
      const value = of(one);
      return value === undefined ? '' : formatNumber(value, 3);
    }),
    formatQuantity(one.numbers.lowestTime ?? 0, 'time', theCase.units, { digits: 2 }),
  ]);
  const extent = formatQuantity(solved[0]?.numbers.longestExtent ?? 0, 'length', theCase.units);
  return [
    `what rules each layout, L = ${extent}`,
    ...tableLines(
      [
        { title: 'layout', align: 'left' },
        ...columns.map(([title]): Column => ({ title, align: 'right' })),
        { title: 'times from', align: 'right' },
      ],
      rows,
    ),
  ];
}

/** The start in words: 'released evenly in inlet bay'. */
export function startWords(start: Start): string {
  if (start.kind === 'evenIn') {
    return start.region === 'everywhere' ? 'released evenly everywhere' : `released evenly in ${start.name}`;
  }
  return `released at ${start.name}`;
}

/** What is asked, with its place among what is asked of its start: the answers are in that order. */
type AskedAt = Asked & { readonly index: number };

function figureLines(
  theCase: Case,
  start: Start,
  asked: AskedAt | undefined,
  layouts: readonly Layout[],
  answers: readonly Answers[],
): string[] {
  const dimension = asked ? figureDimension(asked.figure) : 'time';
  const figureOf = (row: Answers): AskedAnswer | Answer | undefined =>
    asked ? row.asked[asked.index] : row.mean;
  // A column is read against its limit, so it takes the limit's unit; without one the largest value's.
  const largest = Math.max(0, ...answers.map((row) => figureOf(row)?.value ?? 0));
  const unit = readableUnit(asked?.limit?.value ?? largest, dimension, theCase.units);
  const show = (value: number): string => formatQuantity(value, dimension, theCase.units, { unit });
  const columns: Column[] = [
    { title: 'layout', align: 'left' },
    { title: dimension === 'time' ? 'time' : 'share', align: 'right' },
    { title: '', align: 'left' },
    { title: asked?.limit ? 'verdict' : '', align: 'left' },
    { title: 'against ref', align: 'right' },
  ];
  const rows = layouts.map((layout): string[] => {
    const row = answers.find((one) => one.layout === layout.name);
    if (!row) return [layout.name, 'not available yet'];
    const figure = figureOf(row);
    const limits = verdict(asked, figure?.value, show);
    if (figure?.value === null || figure?.value === undefined) {
      const never = figure && 'never' in figure ? figure.never : undefined;
      const most = never && formatQuantity(never.atMost, 'fraction', theCase.units);
      return [layout.name, most === undefined ? '–' : `never: at most ${most}`, '', limits];
    }
    const mark = figure.kind === 'guaranteed' ? 's' : 'e';
    return [layout.name, show(figure.value), mark, limits, against(theCase, row, asked, show)];
  });
  const limit = asked?.limit
    ? `; must be ${asked.limit.kind === 'under' ? 'under' : 'at least'} ${asked.limit.text}`
    : '';
  return [
    `${figureWords(theCase, layouts, asked)}, ${startWords(start)}${limit}`,
    ...tableLines(columns, rows),
  ];
}

function verdict(
  asked: Asked | undefined,
  value: number | null | undefined,
  show: (value: number) => string,
): string {
  if (!asked?.limit || value === undefined) return '';
  const { kind, value: limit } = asked.limit;
  if (value === null) return kind === 'under' ? 'misses' : 'meets';
  const spare = kind === 'under' ? limit - value : value - limit;
  return spare >= 0 ? `meets, ${show(spare)} to spare` : `misses by ${show(-spare)}`;
}

function against(
  theCase: Case,
  row: Answers,
  asked: AskedAt | undefined,
  show: (value: number) => string,
): string {
  if (row.layout === theCase.reference) return 'ref';
  // The difference of an answer is of its first asked figure only.
  if (!row.difference || (asked && asked.index > 0)) return '';
  const { value } = row.difference;
  return value > 0 ? `+${show(value)}` : show(value);
}

function shareLines(theCase: Case, start: Start, answers: readonly Answers[]): string[] {
  const rows = answers.map((row) => [
    row.layout,
    Object.entries(row.shares)
      .map(([name, share]) => `${name} ${formatQuantity(share.value, 'fraction', theCase.units)}`)
      .join(', '),
  ]);
  if (rows.length === 0) return [];
  const columns: Column[] = [
    { title: 'layout', align: 'left' },
    { title: 'share of each exit', align: 'left' },
  ];
  return [`where they end, ${startWords(start)}`, ...tableLines(columns, rows)];
}
