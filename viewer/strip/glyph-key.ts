import type { LayoutView } from '../../src/service/contract.ts';
import { el, svg } from '../page/dom.ts';
import { chevronPath, chevrons, dotPlaces, GLYPH_SCALE, glyphSizes } from '../plan/glyphs.ts';
import type { Px } from '../plan/polyline.ts';

/** What the glyphs mean: only those that this layout shows. */
export function glyphKey(layout: LayoutView, lengthUnit: string): HTMLElement {
  const kinds = new Set(layout.walls.map((wall) => wall.kind));
  const rows: [string, SVGElement[]][] = [];
  const sizes = glyphSizes(GLYPH_SCALE.strip);
  const line: Px[] = [
    [1, 5],
    [35, 5],
  ];
  const marks = (weak: boolean) =>
    svg('path', {
      class: 'catch chevrons',
      d: chevronPath(chevrons(line, sizes, { weak, post: false })),
      'stroke-width': sizes.stroke,
    });
  if (kinds.has('absorbing')) {
    rows.push([
      'catches',
      [svg('path', { class: 'catch', d: 'M1 5h34', 'stroke-width': sizes.catches }), marks(false)],
    ]);
  }
  if (kinds.has('partlyAbsorbing')) {
    const dots = dotPlaces(line, sizes).map(({ at }) => `M${at[0].toFixed(1)} 5h0`);
    rows.push([
      'catches weakly',
      [svg('path', { class: 'catch dots', d: dots.join(''), 'stroke-width': sizes.dot }), marks(true)],
    ]);
  }
  if (kinds.has('reflecting')) {
    rows.push([
      'turns back',
      [svg('path', { class: 'plain', d: 'M1 7h34', 'stroke-width': sizes.turnsBack })],
    ]);
  }
  if (layout.walls.some((wall) => wall.flux !== undefined)) {
    rows.push([
      lengthUnit === '' ? 'share caught per length' : `share caught per ${lengthUnit}`,
      [
        svg('path', { class: 'flux-fill', d: 'M1 2Q18 10 35 2V12H1Z' }),
        svg('path', { class: 'flux', d: 'M1 2Q18 10 35 2' }),
      ],
    ]);
  }
  return el(
    'ul',
    { class: 'key', 'aria-hidden': 'true' },
    ...rows.map(([words, parts]) => el('li', {}, svg('svg', { width: 36, height: 14 }, ...parts), words)),
  );
}
