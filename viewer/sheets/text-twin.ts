import { el } from '../page/dom.ts';
import { loopsByUse, type Stretch } from '../plan/stretches.ts';
import { numberText, pointText, withUnit } from '../words/number-text.ts';
import { type BenchWords, stretchWords } from './bench-words.ts';

/** The plan in words, for screen readers: the longest time and where, pins, walls. */
export function textTwin(data: BenchWords, stretches: readonly Stretch[]): HTMLElement {
  const { layout, shown, time } = data;
  const { low, high } = layout.bounds;
  const size = Math.max(high[0] - low[0], high[1] - low[1]);
  const inTime = (value: number) => withUnit(numberText(value * time.factor), time.name);
  const pins = layout.pins.map((pin, i) => {
    const mean = shown.pins.find((one) => one.name === pin.name)?.mean.value;
    const reading = mean === undefined ? 'no reading' : `mean ${inTime(mean)}`;
    return el(
      'li',
      {},
      `Pin ${i + 1}, ${pin.name}, at ${pointText(pin.at, size, data.lengthUnit)}: ${reading}`,
    );
  });
  const walls = stretches.map((stretch) => el('li', {}, stretchWords(data, stretch).join('. ')));
  const { idle } = loopsByUse(layout);
  if (idle.length > 0)
    walls.push(el('li', {}, `${idle.map((loop) => loop.name).join(', ')}: turns back all around`));
  return el(
    'section',
    { class: 'heard', 'aria-label': 'The plan in words' },
    el('h2', {}, 'The plan in words'),
    el(
      'p',
      {},
      `Longest mean time: ${inTime(layout.longest.value)} at ${pointText(layout.longest.at, size, data.lengthUnit)}.`,
    ),
    el('h3', {}, 'Pins'),
    el('ul', {}, ...(pins.length > 0 ? pins : [el('li', {}, 'none')])),
    el('h3', {}, 'Walls that catch'),
    el('ul', {}, ...(walls.length > 0 ? walls : [el('li', {}, 'none')])),
  );
}
