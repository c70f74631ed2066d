import type { LayoutView, LoopView } from '../../src/service/contract.ts';
import { button, el, svg, textScale } from '../page/dom.ts';
import { chevronPath, chevrons, dotPlaces, GLYPH_SCALE, glyphSizes } from '../plan/glyphs.ts';
import { type Px, pathOf } from '../plan/polyline.ts';
import { catchingStretches, loopsByUse, type Stretch, stretchLength } from '../plan/stretches.ts';
import { niceStep, stepDecimals, ticksTo } from '../words/nice-steps.ts';
import { fixedText, withUnit } from '../words/number-text.ts';
import { glyphKey } from './glyph-key.ts';
import { fluxCurve, fluxTop, spansOf, stripRows } from './strip-scale.ts';

export interface StripData {
  readonly layout: LayoutView;
  readonly lengthUnit: string;
  readonly letter: (wall: string) => string;
  /** What is said of a stretch: title, and a line below it. */
  readonly words: (stretch: Stretch) => readonly [string, string];
  readonly light: (stretch: number | undefined) => void;
}

const CURVE = 68;
const LEFT = 34;

/** The walls unrolled: inside is up, x is arc length, one scale for all loops of the layout. */
export class StripView {
  readonly element: HTMLElement;
  readonly #data: StripData;
  readonly #body = el('div', { class: 'strip-body' });
  readonly #sizes: ResizeObserver;
  readonly #note = el('span', { class: 'strip-note' });
  #all = false;
  #width = 0;

  constructor(data: StripData) {
    this.#data = data;
    const head = el(
      'div',
      { class: 'strip-head' },
      el('h2', {}, 'Walls, unrolled'),
      glyphKey(data.layout, data.lengthUnit),
    );
    this.element = el(
      'section',
      { class: 'strip', 'aria-label': 'Walls, unrolled' },
      head,
      this.#body,
      this.#posts(),
    );
    this.#sizes = new ResizeObserver(() => {
      if (this.#body.clientWidth !== this.#width) this.#draw();
    });
    this.#sizes.observe(this.#body);
  }

  /** Draws at once, so that the height of the strip is known to what stands above it. */
  drawNow(): void {
    if (this.#body.clientWidth > 0) this.#draw();
  }

  dispose(): void {
    this.#sizes.disconnect();
  }

  /** One line for the posts and inner walls on which nothing catches. */
  #posts(): HTMLElement {
    const { idle } = loopsByUse(this.#data.layout);
    const line = el('p', { class: 'strip-posts' });
    if (idle.length === 0) {
      line.append(this.#note);
      return line;
    }
    const words = `Nothing is caught on ${idleWords(idle)}.`;
    const toggle = button('Show their walls', () => {
      this.#all = !this.#all;
      toggle.textContent = this.#all ? 'Hide their walls' : 'Show their walls';
      toggle.setAttribute('aria-expanded', String(this.#all));
      this.#draw();
    });
    toggle.className = 'plain link';
    toggle.setAttribute('aria-expanded', 'false');
    line.append(words, toggle, this.#note);
    return line;
  }

  #draw(): void {
    const { layout } = this.#data;
    this.#width = this.#body.clientWidth;
    const width = Math.max(120, this.#width - LEFT - 34);
    const { used } = loopsByUse(layout);
    const { rows, scale } = stripRows(this.#all ? layout.loops : used, width, 22);
    const stretches = catchingStretches(layout);
    const flux = fluxTop(stretches.map((stretch) => stretch.wall));
    const tip = el('p', { class: 'strip-tip', 'aria-hidden': 'true' });
    const list = el('ul', { class: 'stretches' });
    const parts: Element[] = [];
    rows.forEach((row, index) => {
      const busy = stretches.some((one) => row.loops.some(({ loop }) => loop === one.loop));
      const above = busy ? CURVE : 12;
      const drawing = svg('svg', {
        class: 'row',
        width: this.#width,
        height: above + 10 + 14 * textScale(),
        'aria-hidden': 'true',
      });
      for (const { loop, left } of row.loops) {
        const own = stretches.filter((one) => one.loop === loop);
        drawing.append(...this.#loop(loop, own, { left: LEFT + left, base: above, scale, top: flux.top }));
        for (const stretch of own) {
          list.append(this.#handle(stretch, { left: LEFT + left, scale }, index, tip));
        }
      }
      if (busy && flux.top > 0) drawing.append(fluxAxis(above, flux.top));
      parts.push(el('div', { class: 'row-place' }, drawing));
    });
    const axis = this.#axis(width, scale);
    this.#body.replaceChildren(...parts, axis, list, tip);
    const tops = parts.map((part) => (part as HTMLElement).offsetTop);
    for (const item of list.querySelectorAll<HTMLElement>('button')) {
      const row = Number(item.dataset['row']);
      item.style.setProperty('top', `${tops[row] ?? 0}px`);
      item.style.setProperty('height', `${(parts[row] as HTMLElement | undefined)?.offsetHeight ?? 24}px`);
    }
    this.#note.textContent = flux.cut
      ? 'Peaks at pad ends are cut off: the share per length has no bound there.'
      : '';
  }

  #loop(
    loop: LoopView,
    own: readonly Stretch[],
    at: { left: number; base: number; scale: number; top: number },
  ): SVGElement[] {
    const sizes = glyphSizes(GLYPH_SCALE.strip);
    const x = (s: number) => at.left + s * at.scale;
    const parts: SVGElement[] = [];
    const end = x(loop.length);
    const spans = own.flatMap((stretch) =>
      spansOf(stretch.wall, loop.length).map((span) => ({ stretch, span })),
    );
    spans.sort((a, b) => a.span[0] - b.span[0]);
    let from = at.left;
    const plain: Px[][] = [];
    for (const { span } of spans) {
      if (x(span[0]) > from)
        plain.push([
          [from, at.base],
          [x(span[0]), at.base],
        ]);
      from = x(span[1]);
    }
    if (end > from)
      plain.push([
        [from, at.base],
        [end, at.base],
      ]);
    for (const stretch of own) parts.push(...this.#curve(stretch, at));
    parts.push(
      svg('path', {
        class: 'plain',
        d: plain.map((run) => pathOf(run)).join(''),
        'stroke-width': sizes.turnsBack,
      }),
    );
    for (const { stretch, span } of spans) {
      const weak = stretch.wall.kind === 'partlyAbsorbing';
      // From left to right the inside is up, so the chevrons fall below.
      const line: Px[] = [
        [x(span[0]), at.base],
        [x(span[1]), at.base],
      ];
      if (weak) {
        const dots = dotPlaces(line, sizes).map((dot) => `M${dot.at[0].toFixed(1)} ${at.base}h0`);
        parts.push(svg('path', { class: 'catch dots', d: dots.join(''), 'stroke-width': sizes.dot }));
      } else {
        parts.push(svg('path', { class: 'catch', d: pathOf(line), 'stroke-width': sizes.catches }));
      }
      const marks = chevrons(line, sizes, { weak, post: false });
      parts.push(
        svg('path', { class: 'catch chevrons', d: chevronPath(marks), 'stroke-width': sizes.stroke }),
      );
      const name = stretch.wall.name;
      if (name === undefined) continue;
      const middle = (x(span[0]) + x(span[1])) / 2;
      parts.push(
        svg(
          'text',
          { class: 'wall-name', x: middle, y: at.base + 8 + 12 * textScale(), 'text-anchor': 'middle' },
          this.#data.letter(name),
        ),
      );
    }
    const d = `M${at.left} ${at.base - 6}v12M${end.toFixed(1)} ${at.base - 6}v12`;
    parts.push(svg('path', { class: 'plain', d, 'stroke-width': 1.2 }));
    if (loop.role !== 'outline') {
      const words = svg(
        'text',
        { class: 'soft', x: at.left + 3, y: at.base - (own.length > 0 ? 48 : 6) },
        loop.name,
      );
      parts.push(words);
    }
    return parts;
  }

  #curve(stretch: Stretch, at: { left: number; base: number; scale: number; top: number }): SVGElement[] {
    const inner = fluxCurve(stretch.wall);
    const [begin, finish] = [inner[0], inner.at(-1)];
    if (begin === undefined || finish === undefined || at.top <= 0) return [];
    const curve = [
      [0, begin[1]] as const,
      ...inner,
      [stretchLength(stretch.wall, stretch.loop), finish[1]] as const,
    ];
    const high = CURVE - 14;
    const { loop, wall } = stretch;
    const place = ([s, value]: readonly [number, number]): Px => {
      const along = (((wall.from + s) % loop.length) + loop.length) % loop.length;
      return [at.left + along * at.scale, at.base - 2 - (high * Math.min(value, at.top)) / at.top];
    };
    // A stretch that runs over the mark is drawn in two parts.
    const runs: Px[][] = [[]];
    for (const point of curve.map(place)) {
      const last = runs.at(-1)?.at(-1);
      if (last !== undefined && point[0] < last[0]) runs.push([]);
      runs.at(-1)?.push(point);
    }
    return runs.flatMap((run) => {
      const [first, last] = [run[0], run.at(-1)];
      if (first === undefined || last === undefined) return [];
      const floor: Px[] = [
        [last[0], at.base - 2],
        [first[0], at.base - 2],
      ];
      return [
        svg('path', { class: 'flux-fill', d: pathOf([...run, ...floor], true) }),
        svg('path', { class: 'flux', d: pathOf(run) }),
      ];
    });
  }

  #handle(stretch: Stretch, at: { left: number; scale: number }, row: number, tip: HTMLElement): HTMLElement {
    const [title, below] = this.#data.words(stretch);
    const spans = spansOf(stretch.wall, stretch.loop.length);
    const [from = 0, to = 0] = [...spans].sort((a, b) => b[1] - b[0] - (a[1] - a[0]))[0] ?? [];
    const width = Math.max(24, (to - from) * at.scale);
    const middle = at.left + ((from + to) / 2) * at.scale;
    const item = el('button', {
      type: 'button',
      class: 'stretch',
      'data-row': row,
      'aria-label': `${title}. ${below}`,
    });
    item.style.setProperty('left', `${(middle - width / 2).toFixed(1)}px`);
    item.style.setProperty('width', `${width.toFixed(1)}px`);
    const show = (on: boolean) => () => {
      tip.replaceChildren(...(on ? [el('strong', {}, title), el('span', {}, below)] : []));
      // Beside the stretch, on the side where there is room.
      const toLeft = middle > this.#width / 2;
      const edge = toLeft ? this.#width - middle + width / 2 + 10 : middle + width / 2 + 10;
      tip.style.setProperty(toLeft ? 'right' : 'left', `${edge.toFixed(1)}px`);
      tip.style.removeProperty(toLeft ? 'left' : 'right');
      tip.style.setProperty('top', `${item.offsetTop}px`);
      this.#data.light(on ? stretch.id : undefined);
    };
    item.addEventListener('pointerenter', show(true));
    item.addEventListener('focus', show(true));
    item.addEventListener('pointerleave', show(false));
    item.addEventListener('blur', show(false));
    return el('li', {}, item);
  }

  #axis(width: number, scale: number): SVGElement {
    const longest = width / scale;
    const step = niceStep(longest, 4.5);
    const minor = step / 5;
    const drawing = svg('svg', {
      class: 'axis',
      width: this.#width,
      height: 8 + 16 * textScale(),
      'aria-hidden': 'true',
    });
    ticksTo(longest, minor).forEach((s, i) => {
      const x = (LEFT + s * scale).toFixed(1);
      drawing.append(svg('path', { class: 'tick-line', d: `M${x} 1v${i % 5 === 0 ? 5 : 3}` }));
    });
    const ticks = ticksTo(longest, step);
    ticks.forEach((s, i) => {
      const number = fixedText(s, stepDecimals(step));
      const words =
        i === 0 ? 's = 0' : i === ticks.length - 1 ? withUnit(number, this.#data.lengthUnit) : number;
      drawing.append(
        svg(
          'text',
          {
            class: 'tick',
            x: LEFT + s * scale,
            y: 8 + 11 * textScale(),
            'text-anchor': i === 0 ? 'start' : 'middle',
          },
          words,
        ),
      );
    });
    return drawing;
  }
}

/** 'oval post and baffle'; more than three are counted by their kind. */
function idleWords(idle: readonly LoopView[]): string {
  const names = idle.map((loop) => loop.name);
  if (names.length > 3) {
    const walls = idle.filter((loop) => loop.role === 'inner wall').length;
    const posts = names.length - walls;
    const count = (n: number, what: string) => (n === 0 ? '' : n === 1 ? `1 ${what}` : `${n} ${what}s`);
    const parts = [count(posts, 'post'), count(walls, 'inner wall')];
    return parts.filter((part) => part !== '').join(' and ');
  }
  const last = names.at(-1) ?? '';
  return names.length === 1 ? last : `${names.slice(0, -1).join(', ')} and ${last}`;
}

function fluxAxis(base: number, top: number): SVGElement {
  const high = CURVE - 14;
  const group = svg('g', { class: 'flux-axis' });
  for (const part of [0, 0.5, 1]) {
    const y = base - 2 - high * part;
    group.append(
      svg('path', { class: 'flux-tick', d: `M${LEFT - 5} ${y}h3` }),
      svg(
        'text',
        { class: 'tick', x: LEFT - 9, y: y + 4, 'text-anchor': 'end' },
        part === 0 ? '0' : fixedText(part * top, stepDecimals(top / 2)),
      ),
    );
  }
  return group;
}
