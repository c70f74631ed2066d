import type { CaseView } from '../../src/service/contract.ts';
import { choice } from '../page/choice.ts';
import { button, el } from '../page/dom.ts';
import type { Answers, Asked, Reading } from '../words/answers.ts';
import type { DisplayUnit } from '../words/display-unit.ts';
import { decimalsFor, fixedText, numberText, withUnit } from '../words/number-text.ts';
import {
  bracketWords,
  differenceWords,
  figureWords,
  neverText,
  valueText,
  verdictWords,
} from '../words/verdict.ts';
import { answerAxis } from './answer-axis.ts';
import { shareBar } from './share-bar.ts';

export interface ReadingsData {
  readonly case: CaseView;
  readonly layout: string;
  /** One per start. */
  readonly all: readonly Answers[];
  readonly shown: Answers;
  readonly time: DisplayUnit;
  readonly letter: (wall: string) => string;
  readonly choose: (start: string) => void;
  readonly width: number;
}

/** The readings of one layout and start: the figure asked for, the verdict, where it is caught, how far to trust it. */
export function readings(data: ReadingsData): HTMLElement {
  const { shown } = data;
  return el(
    'aside',
    { class: 'readings', 'aria-label': 'Readings' },
    answerSection(data),
    otherStarts(data),
    shown.shares.length > 0 ? caughtWhere(data) : undefined,
    shown.pins.length > 0 ? pinTable(data) : undefined,
    trust(data),
    remarks(data),
  );
}

/** The answer that carries the verdict: the first asked one for this start that was answered, else the mean. */
export function keyFigure(answers: Answers): Asked {
  const first = answers.asked.find((asked) => asked.value !== undefined || asked.never !== undefined);
  return first ?? { figure: 'mean', value: answers.mean.value, bracket: answers.mean };
}

/** A figure's value with its unit, or that it is never reached. */
export function askedText({ figure, value, never }: Asked, time: DisplayUnit): string {
  if (never !== undefined) return neverText(never);
  return value === undefined ? '—' : valueText(figure, value, time);
}

/** 'released evenly in the inlet bay' as a heading: 'Released …'. */
export function startWords(theCase: CaseView, start: string): string {
  const words = theCase.starts.find((one) => one.name === start)?.words ?? `released from ${start}`;
  return words.charAt(0).toUpperCase() + words.slice(1);
}

function answerSection(data: ReadingsData): HTMLElement {
  const { shown, time } = data;
  const key = keyFigure(shown);
  const { bracket, value } = key;
  const verdict = verdictWords(key, bracket, time);
  const parts: HTMLElement[] = [releasedHeading(data)];
  const [number = '', unit = ''] = askedText(key, time).split('\u00a0');
  parts.push(
    el(
      'p',
      { class: 'key-figure' },
      el('strong', {}, unit === '' ? number : `${number}\u00a0${unit}`),
      el('span', {}, figureWords(key.figure)),
    ),
  );
  if (verdict === undefined) {
    parts.push(
      el(
        'p',
        { class: 'beneath' },
        bracket?.proven === true ? '' : 'Estimated, not proven: there is no bracket yet.',
      ),
    );
  } else {
    parts.push(
      ...(value === undefined ? [] : [answerAxis({ ...key, value }, bracket, time, data.width)]),
      el('p', { class: 'limit-words' }, `It ${verdict.limit}.`),
      el('p', { class: 'verdict' }, verdict.verdict),
      el('p', { class: 'beneath' }, verdict.beneath ?? ''),
    );
  }
  const rows = figureRows(shown, key, time);
  if (rows.length > 0) parts.push(pairs(rows));
  if (shown.difference !== undefined && shown.difference.to !== data.layout) {
    parts.push(el('p', { class: 'difference' }, `${capital(differenceWords(shown.difference, time))}.`));
  }
  return el('section', { class: 'answer' }, ...parts);
}

/** Mean, spread, half and what comes later, then what else was asked. */
export function figureRows(shown: Answers, key: Asked, time: DisplayUnit): [string, string][] {
  const rows: [string, string][] = [];
  const add = (figure: string, name: string, value: number | undefined) => {
    if (value !== undefined && figure !== key.figure) rows.push([name, valueText(figure, value, time)]);
  };
  add('mean', 'Mean time until caught', shown.mean.value);
  add('standard deviation', 'Standard deviation', shown.deviation?.value);
  add('median', 'Half caught within', shown.half?.value);
  const decay = shown.decayTime?.value;
  add('halves', 'Later on, halves every', decay === undefined ? undefined : Math.LN2 * decay);
  for (const asked of shown.asked) {
    if (asked === key || (asked.value === undefined && asked.never === undefined)) continue;
    const words = verdictWords(asked, asked.bracket, time);
    const given = ['mean', 'standard deviation', 'median'].includes(asked.figure);
    if (!given) rows.push([capital(figureWords(asked.figure)), askedText(asked, time)]);
    if (words !== undefined) rows.push([`\u2003${words.limit}`, words.verdict.replace(/\.$/, '')]);
  }
  return rows;
}

function releasedHeading(data: ReadingsData): HTMLElement {
  const { shown, all } = data;
  const words = startWords(data.case, shown.start);
  if (all.length < 2) return el('h2', {}, words);
  return el(
    'h2',
    {},
    choice({
      label: 'Release',
      items: all.map((one) => ({ value: one.start, words: startWords(data.case, one.start) })),
      chosen: shown.start,
      choose: data.choose,
    }),
  );
}

function capital(words: string): string {
  return words.charAt(0).toUpperCase() + words.slice(1);
}

function pairs(rows: readonly (readonly [string, string])[]): HTMLElement {
  return el(
    'dl',
    { class: 'pairs' },
    ...rows.flatMap(([name, value]) => [el('dt', {}, name), el('dd', {}, value)]),
  );
}

function section(title: string, aside: string, ...children: (Node | undefined)[]): HTMLElement {
  const head = el(
    'div',
    { class: 'section-head' },
    el('h2', {}, title),
    el('span', { class: 'aside' }, aside),
  );
  return el('section', {}, head, ...children);
}

function otherStarts(data: ReadingsData): HTMLElement | undefined {
  const others = data.all.filter((one) => one.start !== data.shown.start);
  if (others.length === 0) return undefined;
  const { time } = data;
  const decimals = decimalsFor(Math.max(...others.map((one) => one.mean.value * time.factor)));
  const rows = others.map((one) => {
    const name = el(
      'td',
      {},
      button(startWords(data.case, one.start).replace(/^Released /, ''), () => data.choose(one.start), {
        class: 'plain link',
      }),
    );
    return el(
      'tr',
      {},
      name,
      el('td', { class: 'figure' }, fixedText(one.mean.value * time.factor, decimals)),
    );
  });
  return section(
    'Released elsewhere',
    withUnit('mean,', time.name),
    el('table', {}, el('tbody', {}, ...rows)),
  );
}

function caughtWhere(data: ReadingsData): HTMLElement {
  const shares = data.shown.shares.map(({ name, share }) => ({
    name,
    letter: data.letter(name),
    value: share.value,
  }));
  return section('Caught where', '%', shareBar(shares, data.width));
}

function pinTable(data: ReadingsData): HTMLElement {
  const { shown, time } = data;
  const columns = [
    { name: 'mean', of: (pin: Reading) => pin.mean },
    { name: 'standard deviation', of: (pin: Reading) => pin.deviation },
    { name: '95\u00a0%', of: (pin: Reading) => pin.most },
  ].filter(({ of }) => shown.pins.every((pin) => of(pin) !== undefined));
  const values = shown.pins.map((pin) => columns.map(({ of }) => (of(pin)?.value ?? 0) * time.factor));
  const decimals = columns.map((_, c) => decimalsFor(Math.max(...values.map((row) => row[c] ?? 0))));
  const rows = shown.pins.map((pin, i) =>
    el(
      'tr',
      {},
      el('td', { class: 'pin-cell' }, el('span', { class: 'pin-ring' }, String(i + 1))),
      el('th', { scope: 'row' }, pin.name),
      ...(values[i] ?? []).map((value, c) =>
        el('td', { class: 'figure' }, fixedText(value, decimals[c] ?? 0)),
      ),
    ),
  );
  const names = columns.map(({ name }) => name).join(', ');
  return section(
    'Pins',
    time.name === '' ? names : `${names}; ${time.name}`,
    el('table', { class: 'pin-table' }, el('tbody', {}, ...rows)),
  );
}

function trust(data: ReadingsData): HTMLElement {
  const { shown, time } = data;
  const rows: [string, string][] = [['Bracket', bracketWords(shown.mean, time)]];
  if (shown.mesh !== undefined) {
    const { triangles, minAngle } = shown.mesh;
    rows.push(['Mesh', `${fixedText(triangles, 0)} triangles, smallest angle ${fixedText(minAngle, 1)}°`]);
  }
  if (shown.roundingFloor !== undefined) {
    rows.push(['Rounding', `below ${numberText(100 * shown.roundingFloor, 1)}\u00a0% of the figures`]);
  }
  if (data.case.diffusion !== '') rows.push(['D', data.case.diffusion]);
  const mean = `the mean, ${valueText('mean', shown.mean.value, time)}`;
  const cautions = shown.cautions.map((words) => el('li', {}, words));
  return section(
    'How far to trust this',
    mean,
    pairs(rows),
    cautions.length > 0 ? el('ul', { class: 'cautions' }, ...cautions) : undefined,
  );
}

function remarks(data: ReadingsData): HTMLElement | undefined {
  const theCase = data.case;
  const groups: [string, readonly string[]][] = [
    ['Warnings', [...new Set([...theCase.warnings, ...data.shown.warnings])]],
    ['Not available yet', theCase.notAvailable],
    ['Put right in the drawing', theCase.healed],
    ['Taken from the drawing', theCase.taken],
    ['Left out', theCase.leftOut],
  ];
  const filled = groups.filter(([, lines]) => lines.length > 0);
  if (filled.length === 0) return undefined;
  const parts = filled.map(([title, lines]) => {
    const few = title === 'Warnings' || (title === 'Not available yet' && lines.length <= 3);
    return el(
      'details',
      { open: few },
      el('summary', {}, `${title}${few ? '' : ` (${lines.length})`}`),
      el('ul', {}, ...lines.map((line) => el('li', {}, line))),
    );
  });
  return el('section', { class: 'remarks' }, ...parts);
}
