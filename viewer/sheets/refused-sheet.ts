import type { Refusal } from '../api.ts';
import { button, el } from '../page/dom.ts';
import { givenText } from '../words/number-text.ts';
import { casePreview } from './case-preview.ts';
import { fileButton } from './file-place.ts';

export interface RefusedData {
  readonly refusal: Refusal;
  /** What was refused: 'chamber.json'. */
  readonly what: string;
  /** Text of the case file, to draw what is wrong in it. */
  readonly text?: string;
  readonly back: { readonly words: string; readonly act: () => void };
  readonly take: (files: readonly File[]) => void;
}

const MOST_PLACES = 12;

/** Begins with a capital letter and ends with a full stop, unless it has an end of its own. */
export function sentenceOf(words: string): string {
  // Coordinates to all their digits are listed nowhere: six figures find any place on a drawing.
  const trimmed = words
    .trim()
    .replace(/(?<![\w.])\d+\.\d{7,}(?:e[+-]?\d+)?/g, (digits) => givenText(Number(digits)));
  const ended = /[.!?:…]$/.test(trimmed) || trimmed === '' ? trimmed : `${trimmed}.`;
  return ended.charAt(0).toUpperCase() + ended.slice(1);
}

/** Why something cannot be taken, where, and what to do. */
export function refusedSheet(data: RefusedData): HTMLElement[] {
  const { refusal, back } = data;
  const at = refusal.where.at ?? [];
  const preview = data.text === undefined ? undefined : casePreview(data.text, at);
  const panel = el(
    'div',
    { class: 'refusal' },
    el(
      'div',
      { class: 'refusal-words', role: 'alert' },
      el('p', { class: 'refusal-what' }, sentenceOf(refusal.what)),
      el('p', { class: 'refusal-remedy' }, sentenceOf(refusal.remedy)),
    ),
    whereList(refusal),
    el(
      'p',
      { class: 'refusal-acts' },
      fileButton('Choose another file', data.take, true),
      button(back.words, back.act, { class: 'quiet' }),
    ),
    el('p', { class: 'soft' }, 'Or mend it and drop it here again. The file itself is never changed.'),
  );
  const title = el('h1', { class: 'sentence large' }, `${data.what} cannot be solved yet.`);
  if (preview === undefined) return [title, panel];
  return [title, el('div', { class: 'taken-columns' }, preview, panel)];
}

function whereList(refusal: Refusal): HTMLElement | undefined {
  const { at = [], key, file, line } = refusal.where;
  const rows: [string, string][] = [];
  if (file !== undefined) rows.push(['File', file]);
  if (line !== undefined) rows.push(['Line', String(line)]);
  if (key !== undefined && key !== '') rows.push(['Key', key]);
  const places = at
    .slice(0, MOST_PLACES)
    .map(([x, y], i) =>
      el(
        'li',
        {},
        el('span', { class: 'place-number' }, String(i + 1)),
        `x = ${givenText(x)}, y = ${givenText(y)}`,
      ),
    );
  if (at.length > MOST_PLACES) places.push(el('li', {}, `and ${at.length - MOST_PLACES} more`));
  if (rows.length + places.length === 0) return undefined;
  return el(
    'div',
    { class: 'where' },
    el('h2', {}, 'Where'),
    el(
      'dl',
      { class: 'pairs' },
      ...rows.flatMap(([name, value]) => [el('dt', {}, name), el('dd', {}, value)]),
    ),
    el('ul', { class: 'places' }, ...places),
  );
}
