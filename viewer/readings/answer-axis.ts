import { el, svg, textScale } from '../page/dom.ts';
import type { Asked, Figure } from '../words/answers.ts';
import type { DisplayUnit } from '../words/display-unit.ts';
import { niceStep, stepDecimals, ticksTo } from '../words/nice-steps.ts';
import { fixedText } from '../words/number-text.ts';
import { isShare } from '../words/verdict.ts';

/**
 * The answer against its limit: a dashed upright for the limit, a bracket where one exists (square ends when proven,
 * dashed when estimated), and the value. Dot or ring only for a proven verdict, else a tick of 9 px.
 */
export function answerAxis(
  asked: Asked & { readonly value: number },
  bracket: Figure | undefined,
  time: DisplayUnit,
  width: number,
): HTMLElement {
  const share = isShare(asked.figure);
  const factor = share ? 100 : time.factor;
  const limit = asked.under ?? asked.atLeast;
  const shown = [asked.value, limit, bracket?.low, bracket?.high].filter((one) => one !== undefined);
  const top = share ? 100 : Math.max(...shown) * factor * 1.25;
  const step = niceStep(top, 4.5 / textScale());
  const end = share ? 100 : step * Math.ceil(top / step - 1e-9);
  const x = (value: number) => 6 + ((width - 36) * value * factor) / end;
  const drawing = svg('svg', {
    class: 'answer-axis',
    width,
    height: 28 + 14 * textScale(),
    'aria-hidden': 'true',
  });
  drawing.append(svg('path', { class: 'hair', d: `M6 13H${width - 30}` }));
  if (limit !== undefined) drawing.append(svg('path', { class: 'limit', d: `M${x(limit).toFixed(1)} 0v26` }));
  if (bracket?.low !== undefined && bracket.high !== undefined) {
    const [low, high] = [x(bracket.low), x(bracket.high)];
    const ends = bracket.proven ? `M${low + 3} 6h-3v14h3M${high - 3} 6h3v14h-3` : '';
    drawing.append(
      svg('path', { class: bracket.proven ? 'stem' : 'stem guessed', d: `M${low} 13H${high}` }),
      svg('path', { class: 'stem', d: ends }),
    );
  }
  const at = x(asked.value);
  const dot = bracket?.proven === true && (asked.verdict === 'meets' || asked.verdict === 'misses');
  drawing.append(
    dot
      ? svg('circle', { class: asked.verdict === 'meets' ? 'dot' : 'ring', cx: at, cy: 13, r: 4 })
      : svg('path', { class: 'value-tick', d: `M${at.toFixed(1)} 8.5v9` }),
  );
  const ticks = ticksTo(end, step);
  ticks.forEach((tick, i) => {
    const number = fixedText(tick, stepDecimals(step));
    const unit = share ? '%' : time.name;
    const place = 6 + ((width - 36) * tick) / end;
    const words = i === ticks.length - 1 && unit !== '' ? `${number} ${unit}` : number;
    drawing.append(
      svg('path', { class: 'tick-line', d: `M${place.toFixed(1)} 26v3` }),
      svg(
        'text',
        {
          class: 'tick',
          x: place.toFixed(1),
          y: 29 + 11 * textScale(),
          'text-anchor': i === 0 ? 'start' : 'middle',
        },
        words,
      ),
    );
  });
  return el('div', { class: 'answer-place' }, drawing);
}
