import type { SampleView } from '../../src/service/contract.ts';
import { button, el, svg } from '../page/dom.ts';
import { fileButton } from './file-place.ts';

export interface EmptyData {
  /** Undefined while they are asked for. */
  readonly samples: readonly SampleView[] | undefined;
  readonly openSample: (name: string) => void;
  readonly take: (files: readonly File[]) => void;
}

const blank = (width: number) => {
  const element = el('span', { class: 'blank', 'aria-hidden': 'true' });
  element.style.setProperty('width', `${width}em`);
  return element;
};

/** The empty sheet: a sentence with blanks, the outline where a drawing goes, and the samples. */
export function emptySheet(data: EmptyData): HTMLElement[] {
  const sentence = el(
    'h1',
    { class: 'sentence large faint', 'aria-label': 'Released somewhere, how long until it has been caught?' },
    'Released ',
    blank(6),
    ', how long until it has been caught? It must be under ',
    blank(3.2),
    '.',
  );
  const outline = svg(
    'svg',
    { class: 'drop-outline', viewBox: '0 0 1080 600', preserveAspectRatio: 'none', 'aria-hidden': 'true' },
    svg('path', {
      d: 'M136 2H904A174 152 0 0 1 1078 154V300A174 182 0 0 1 904 482H396Q362 482 362 512V530Q362 598 290 598H226Q120 598 120 530V512Q120 482 88 482Q2 476 2 392V126Q2 2 136 2Z',
      'vector-effect': 'non-scaling-stroke',
    }),
  );
  const place = el(
    'div',
    { class: 'drop-place' },
    outline,
    el(
      'div',
      { class: 'drop-words' },
      el('p', { class: 'invite' }, 'Drop the drawing of a flat compartment here.'),
      fileButton('Choose a file', data.take, true),
      el(
        'p',
        { class: 'soft' },
        'An SVG drawing, or a case file. A drawing is then asked how long one of its units is.',
      ),
    ),
  );
  return [sentence, place, samples(data)];
}

function samples(data: EmptyData): HTMLElement {
  const row = el('section', { class: 'samples', 'aria-label': 'Samples' });
  const head = el(
    'div',
    { class: 'samples-head' },
    el('h2', {}, 'Or start from a sample'),
    el('p', {}, 'it is yours to change'),
  );
  row.append(head);
  if (data.samples === undefined) row.append(el('p', { class: 'soft' }, 'asking for the samples …'));
  else if (data.samples.length === 0)
    row.append(el('p', { class: 'soft' }, 'No samples come with this service.'));
  const list = el('ul', { class: 'sample-list' });
  for (const sample of data.samples ?? []) {
    list.append(
      el(
        'li',
        {},
        button(sample.title, () => data.openSample(sample.name), { class: 'plain link sample' }),
      ),
    );
  }
  row.append(list);
  return row;
}
