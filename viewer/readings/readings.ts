import type { CaseView } from '../../src/service/contract.ts';
import { choice } from '../page/choice.ts';
import { button, el } from '../page/dom.ts';
import type { Answers, Asked, Figure } from '../words/answers.ts';
import type { DisplayUnit } from '../words/display-unit.ts';
import { decimalsFor, fixedText, numberText, withUnit } from '../words/number-text.ts';
import { bracketWords, differenceWords, figureWords, valueText, verdictWords } from '../words/verdict.ts';
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

/** The answer that carries the verdict: the first asked one for this start that has a value, else the mean. */
export function keyFigure(answers: Answers): Asked & { readonly value: number } {
  const first = answers.asked.find((asked) => asked.value !== undefined);
  if (first?.value !== undefined) return { ...first, value: first.value };
  return { figure: 'mean', value: answers.mean.value, notAvailable: false };
}

function bracketOf(answers: Answers, asked: Asked): Figure | undefined {
  if (asked.figure === 'mean') return answers.mean;
  const wall = /^share of (.+)$/.exec(asked.figure)?.[1];
  return answers.shares.find((share) => share.name === wall)?.share;
}

/** 'released evenly in the inlet bay' as a heading: 'Released …'. */
export function startWords(theCase: CaseView, start: string): string {
  const words = theCase.starts.find((one) => one.name === start)?.words ?? `released from ${start}`;
  return words.charAt(0).toUpperCase() + words.slice(1);
}

function answerSection(data: ReadingsData): HTMLElement {
  const { shown, time } = data;
  const key = keyFigure(shown);
  const bracket = bracketOf(shown, key);
  const verdict = verdictWords(key, bracket, time);
  const parts: HTMLElement[] = [releasedHeading(data)];
  const [number = '', unit = ''] = valueText(key.figure, key.value, time).split('\u00a0');
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
        shown.mean.proven ? '' : 'Estimated, not proven: there is no bracket yet.',
      ),
    );
  } else {
    parts.push(
      answerAxis(key, bracket, time, data.width),
      el('p', { class: 'limit-words' }, `It ${verdict.limit}.`),
      el('p', { class: 'verdict' }, verdict.verdict),
      el('p', { class: 'beneath' }, verdict.beneath ?? ''),
    );
  }
  const rows: [string, string][] = [];
  if (key.figure !== 'mean') {
    rows.push(['Mean time until caught', valueText('mean', shown.mean.value, time)]);
  }
  for (const asked of shown.asked) {
    if (asked.value === undefined || asked.figure === key.figure) continue;
    const words = verdictWords(asked, bracketOf(shown, asked), time);
    rows.push([capital(figureWords(asked.figure)), valueText(asked.figure, asked.value, time)]);
    if (words !== undefined) rows.push([`\u2003${words.limit}`, words.verdict.replace(/\.$/, '')]);
  }
  if (rows.length > 0) parts.push(pairs(rows));
  if (shown.difference !== undefined && shown.difference.to !== data.layout) {
    parts.push(el('p', { class: 'difference' }, `${capital(differenceWords(shown.difference, time))}.`));
  }
  return el('section', { class: 'answer' }, ...parts);
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
  const decimals = decimalsFor(Math.max(...shown.pins.map((pin) => pin.mean.value * time.factor)));
  const rows = shown.pins.map((pin, i) =>
    el(
      'tr',
      {},
      el('td', { class: 'pin-cell' }, el('span', { class: 'pin-ring' }, String(i + 1))),
      el('th', { scope: 'row' }, pin.name),
      el('td', { class: 'figure' }, fixedText(pin.mean.value * time.factor, decimals)),
    ),
  );
  return section(
    'Pins',
    withUnit('mean,', time.name),
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
