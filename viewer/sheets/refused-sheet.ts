import type { Refusal } from '../api.ts';
import { button, el } from '../page/dom.ts';
import { numberText } from '../words/number-text.ts';
import { fileButton } from './file-place.ts';

export interface RefusedData {
  readonly refusal: Refusal;
  /** What was refused: 'chamber.json'. */
  readonly what: string;
  readonly back?: { readonly words: string; readonly act: () => void };
  readonly take: (files: readonly File[]) => void;
}

const MOST_PLACES = 12;

/** Ends a sentence that has no end of its own. */
export function sentenceOf(words: string): string {
  const trimmed = words.trim();
  return /[.!?:]$/.test(trimmed) || trimmed === '' ? trimmed : `${trimmed}.`;
}

/** Why something cannot be taken, where, and what to do. */
export function refusedSheet(data: RefusedData): HTMLElement[] {
  const { refusal } = data;
  const { at = [], key, file, line } = refusal.where;
  const rows: [string, string][] = [];
  if (file !== undefined || line !== undefined) {
    rows.push([
      'File',
      [file, line === undefined ? undefined : `line ${line}`].filter((one) => one !== undefined).join(', '),
    ]);
  }
  if (key !== undefined) rows.push(['Key', key]);
  const places = at
    .slice(0, MOST_PLACES)
    .map(([x, y], i) =>
      el(
        'li',
        {},
        el('span', { class: 'place-number' }, String(i + 1)),
        `x = ${numberText(x, 6)}, y = ${numberText(y, 6)}`,
      ),
    );
  if (at.length > MOST_PLACES) places.push(el('li', {}, `and ${at.length - MOST_PLACES} more`));
  const where =
    rows.length + places.length === 0
      ? undefined
      : el(
          'div',
          { class: 'where' },
          el('h2', {}, at.length > 1 ? 'Places' : 'Where'),
          el(
            'dl',
            { class: 'pairs' },
            ...rows.flatMap(([name, value]) => [el('dt', {}, name), el('dd', {}, value)]),
          ),
          el('ul', { class: 'places' }, ...places),
        );
  return [
    el('h1', { class: 'sentence large' }, `${data.what} cannot be solved yet.`),
    el(
      'div',
      { class: 'refusal', role: 'alert' },
      el(
        'div',
        { class: 'cloud' },
        el('p', { class: 'refusal-what' }, sentenceOf(refusal.what)),
        el('p', { class: 'refusal-remedy' }, sentenceOf(refusal.remedy)),
      ),
      where,
      el(
        'p',
        { class: 'refusal-acts' },
        fileButton('Choose another file', data.take, true),
        data.back === undefined ? undefined : button(data.back.words, data.back.act, { class: 'quiet' }),
      ),
      el('p', { class: 'soft' }, 'Or mend it and drop it here again. The file itself is never changed.'),
    ),
  ];
}
