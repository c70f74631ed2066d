import { toHex } from '../colour/oklab.ts';
import { bandColours, type Scheme } from '../colour/ramp.ts';
import { svg, textScale } from '../page/dom.ts';
import { type Bands, stepDecimals } from '../words/nice-steps.ts';
import { fixedText } from '../words/number-text.ts';

/** The scale of the bands: one box per band, numbers at every second or so of the heavy edges, the unit at the end. */
export function legend(scheme: Scheme, bands: Bands, unit: string, width: number): SVGSVGElement {
  const colours = bandColours(scheme, bands.count);
  const each = width / bands.count;
  const k = textScale();
  const root = svg('svg', {
    class: 'legend',
    width: width + 20 + 44 * k,
    height: 14 + 18 * k,
    role: 'img',
    'aria-label': `Scale: 0 to ${fixedText(bands.step * bands.count, stepDecimals(bands.step))} ${unit}`,
  });
  const boxes = colours.map((rgb, i) =>
    svg('rect', {
      x: (8 + i * each).toFixed(2),
      y: 1,
      width: (each + 0.5).toFixed(2),
      height: 10,
      fill: toHex(rgb),
    }),
  );
  root.append(...boxes, svg('rect', { class: 'frame', x: 8, y: 0.5, width, height: 11 }));
  const heavy = bands.count / 4;
  const every = Math.ceil((heavy * k) / 5);
  for (let i = 0; i <= heavy; i++) {
    const x = 8 + 4 * i * each;
    root.append(svg('path', { class: 'frame', d: `M${x.toFixed(1)} 11v${i % every === 0 ? 5 : 3}` }));
    if (i % every !== 0) continue;
    const number = fixedText(4 * i * bands.step, stepDecimals(4 * bands.step));
    root.append(
      svg('text', { x: x.toFixed(1), y: 14 + 13 * k, class: 'tick', 'text-anchor': 'middle' }, number),
    );
    if (i + every <= heavy || unit === '') continue;
    // The unit follows the last number.
    root.append(
      svg('text', { x: (x + k * (number.length * 3.4 + 4)).toFixed(1), y: 14 + 13 * k, class: 'tick' }, unit),
    );
  }
  return root;
}
