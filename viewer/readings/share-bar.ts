import { el, svg } from '../page/dom.ts';
import { percentText, wholePercents } from '../words/shares.ts';

/** Where the particles are caught, as one bar: fills by order, letter and percent beneath. */

const FILLS = ['solid', 'hatch', 'dots', 'cross', 'level'] as const;

function patterns(id: string): SVGDefsElement {
  const pattern = (name: string, size: number, ...parts: SVGElement[]) =>
    svg(
      'pattern',
      { id: `${id}-${name}`, width: size, height: size, patternUnits: 'userSpaceOnUse' },
      svg('rect', { class: 'fill-ground', width: size, height: size }),
      ...parts,
    );
  return svg(
    'defs',
    {},
    pattern('solid', 6, svg('rect', { class: 'fill-ink', width: 6, height: 6 })),
    pattern('hatch', 5, svg('path', { class: 'fill-line', d: 'M-1 6L6 -1M-1 1L1 -1M4 6L6 4' })),
    pattern(
      'dots',
      4,
      svg('circle', { class: 'fill-ink', cx: 1, cy: 1, r: 0.8 }),
      svg('circle', { class: 'fill-ink', cx: 3, cy: 3, r: 0.8 }),
    ),
    pattern('cross', 5, svg('path', { class: 'fill-line', d: 'M-1 6L6 -1M-1 -1L6 6' })),
    pattern('level', 4, svg('path', { class: 'fill-line', d: 'M0 1h4' })),
  );
}

export interface Share {
  readonly name: string;
  readonly letter: string;
  readonly value: number;
}

/** At most eight parts: the smallest ones go together. */
function grouped(shares: readonly Share[]): Share[] {
  const sorted = [...shares].sort((a, b) => b.value - a.value);
  if (sorted.length <= 8) return sorted;
  const rest = sorted.slice(7);
  const others = rest.reduce((sum, share) => sum + share.value, 0);
  return [...sorted.slice(0, 7), { name: `${rest.length} others`, letter: 'others', value: others }];
}

let count = 0;

/** The bar and, beneath it, each wall's full name with its percent. */
export function shareBar(shares: readonly Share[], width: number): HTMLElement {
  const parts = grouped(shares.filter((share) => share.value > 0));
  const percents = wholePercents(parts.map((share) => share.value));
  const id = `fill-${++count}`;
  const total = parts.reduce((sum, share) => sum + share.value, 0) || 1;
  const drawing = svg('svg', { class: 'share-bar', width, height: 15, 'aria-hidden': 'true' }, patterns(id));
  const list = el('ul', { class: 'share-list' });
  let x = 0.5;
  parts.forEach((share, i) => {
    const wide = ((width - 1) * share.value) / total;
    const fill = FILLS[i % FILLS.length] ?? 'solid';
    const box = { x: x.toFixed(2), y: 0.5, width: wide.toFixed(2), height: 14 };
    drawing.append(svg('rect', { class: 'share-part', fill: `url(#${id}-${fill})`, ...box }));
    x += wide;
    const swatch = svg(
      'svg',
      { class: 'swatch', width: 14, height: 11, 'aria-hidden': 'true' },
      svg('rect', {
        class: 'share-part',
        fill: `url(#${id}-${fill})`,
        x: 0.5,
        y: 0.5,
        width: 13,
        height: 10,
      }),
    );
    const percent = percentText(percents[i] ?? 0, share.value);
    list.append(
      el(
        'li',
        {},
        swatch,
        el('b', {}, share.letter),
        el('span', { class: 'name' }, share.name),
        el('span', { class: 'percent' }, `${percent}\u00a0%`),
      ),
    );
  });
  return el('div', {}, drawing, list);
}
