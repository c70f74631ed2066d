import type { LayoutView } from '../../src/service/contract.ts';
import { toHex } from '../colour/oklab.ts';
import { wantsLightInk, washAt } from '../colour/ramp.ts';
import { currentScheme, el, onScheme, svg, textScale, tokenColour } from '../page/dom.ts';
import type { DisplayUnit } from '../words/display-unit.ts';
import { type Bands, bandsFor, niceStep, stepDecimals } from '../words/nice-steps.ts';
import { fixedText, givenText, numberText, pointText, withUnit } from '../words/number-text.ts';
import type { Field } from './field.ts';
import { hiddenBy } from './hidden.ts';
import { type Isoline, isolines } from './isolines.ts';
import { LabelRoom } from './labels.ts';
import { legend } from './legend.ts';
import { LiftSlider } from './lift-slider.ts';
import { Locator } from './locate.ts';
import { isolineNumbers, type PinReading, pinMarks, releaseMarks, wallNames } from './mark-overlay.ts';
import { type Projection, project, type Rect } from './projection.ts';
import { PlanScene } from './scene.ts';
import { catchingStretches } from './stretches.ts';
import { originMarks, wallOverlay } from './wall-overlay.ts';

export interface PlanData {
  readonly layout: LayoutView;
  readonly field: Field;
  /** Unit of length of the case, and the unit that times are shown in. */
  readonly lengthUnit: string;
  readonly time: DisplayUnit;
  readonly pins: readonly PinReading[];
  readonly letter: (wall: string) => string;
  readonly start: string;
  /** Words that describe the plan as a whole, for those who hear it. */
  readonly summary: string;
  readonly lift: number;
  readonly lifted: (lift: number) => void;
}

/** Height of the longest time on the fully lifted view, over the root of the drawing's area. */
const FULL_HEIGHT = 0.62;

/** The plan of one layout: surface, walls, writing, scale, legend and the slider that lifts it. */
export class PlanView {
  readonly element: HTMLElement;
  readonly #data: PlanData;
  readonly #canvas = el('canvas', { 'aria-hidden': 'true' });
  readonly #overlay = svg('svg', { class: 'overlay', 'aria-hidden': 'true' });
  readonly #legend = el('div', { class: 'legend-place' });
  readonly #foot = el('div', { class: 'plan-foot', 'aria-hidden': 'true' });
  readonly #probe = el('output', { class: 'probe' });
  readonly #slider: LiftSlider;
  readonly #scene: PlanScene | undefined;
  readonly #locator: Locator;
  readonly #bands: Bands;
  readonly #heavy: readonly Isoline[];
  readonly #fullRise: number;
  readonly #longest: number;
  readonly #ends: (() => void)[] = [];
  #start: string;
  #lit: number | undefined;
  #view: Projection | undefined;
  #due = 0;
  #drawn: readonly [number, number] = [0, 0];

  constructor(data: PlanData) {
    this.#data = data;
    this.#start = data.start;
    const { field, time } = data;
    this.#longest = field.values.reduce((most, value) => Math.max(most, value), 0);
    this.#bands = bandsFor(this.#longest * time.factor);
    this.#locator = new Locator(field);
    const heavyStep = (4 * this.#bands.step) / time.factor;
    this.#heavy = Array.from({ length: this.#bands.count / 4 }, (_, i) =>
      isolines(field, (i + 1) * heavyStep),
    ).flat();
    const { low, high } = data.layout.bounds;
    const side = Math.sqrt(Math.max((high[0] - low[0]) * (high[1] - low[1]), Number.MIN_VALUE));
    this.#fullRise = this.#longest > 0 ? (FULL_HEIGHT * side) / this.#longest : 0;
    this.#slider = new LiftSlider((lift) => {
      data.lifted(lift);
      this.redraw();
    });
    const stage = el(
      'div',
      {
        class: 'stage',
        tabindex: 0,
        role: 'application',
        'aria-roledescription': 'plan',
        'aria-label': data.summary,
      },
      this.#canvas,
      this.#overlay,
    );
    this.element = el(
      'div',
      { class: 'plan' },
      this.#slider.element,
      stage,
      this.#legend,
      this.#foot,
      this.#probe,
    );
    try {
      const bands = { count: this.#bands.count, step: this.#bands.step / time.factor };
      this.#scene = new PlanScene(this.#canvas, field, bands, this.#fullRise);
    } catch {
      this.#probe.textContent =
        'This browser gives no WebGL 2: walls and numbers are drawn, the wash is not.';
    }
    if (data.lift > 0) this.#slider.set(data.lift);
    this.#listen(stage);
    this.#repaint();
  }

  #listen(stage: HTMLElement): void {
    const sizes = new ResizeObserver(() => {
      if (stage.clientWidth !== this.#drawn[0] || stage.clientHeight !== this.#drawn[1]) this.redraw();
    });
    sizes.observe(stage);
    this.#ends.push(
      () => sizes.disconnect(),
      onScheme(() => {
        this.#repaint();
        this.#draw();
      }),
    );
    let probe: [number, number] | undefined;
    stage.addEventListener('pointermove', (event) => {
      const box = stage.getBoundingClientRect();
      const at = this.#under(event.clientX - box.left, event.clientY - box.top);
      this.#read(at, false);
      if (at !== undefined) probe = at;
    });
    stage.addEventListener('pointerleave', () => this.#read(undefined, false));
    stage.addEventListener('blur', () => this.#read(undefined, false));
    stage.addEventListener('keydown', (event) => {
      const moves: Record<string, [number, number]> = {
        ArrowLeft: [-1, 0],
        ArrowRight: [1, 0],
        ArrowUp: [0, 1],
        ArrowDown: [0, -1],
      };
      const move = moves[event.key];
      if (move === undefined) return;
      event.preventDefault();
      const { low, high } = this.#data.layout.bounds;
      const step = ((event.shiftKey ? 0.1 : 0.02) * Math.max(high[0] - low[0], high[1] - low[1])) as number;
      const from = probe ?? this.#data.layout.longest.at;
      const to: [number, number] = [
        Math.min(high[0], Math.max(low[0], from[0] + step * move[0])),
        Math.min(high[1], Math.max(low[1], from[1] + step * move[1])),
      ];
      probe = to;
      this.#read(to, true);
    });
  }

  /** The point of the surface that is seen at a px, in case coordinates. */
  #under(px: number, py: number): [number, number] | undefined {
    const view = this.#view;
    if (view === undefined) return undefined;
    const [x, y] = view.back(px, py);
    const [ex, ey, ez] = view.eye;
    const reach = (view.rise * this.#longest) / ez;
    const steps = view.lift === 0 ? 0 : 200;
    for (let step = steps; step >= 0; step--) {
      const t = steps === 0 ? 0 : (step * reach) / steps;
      const value = this.#locator.valueAt(x + t * ex, y + t * ey);
      if (value * view.rise >= t * ez) return [x + t * ex, y + t * ey];
    }
    return undefined;
  }

  #read(at: readonly [number, number] | undefined, byKey: boolean): void {
    this.#overlay.querySelector('.cross')?.remove();
    if (at === undefined || this.#view === undefined) {
      this.#probe.textContent = '';
      return;
    }
    const { time, lengthUnit, layout } = this.#data;
    const value = this.#locator.valueAt(at[0], at[1]);
    const { low, high } = layout.bounds;
    const place = pointText(at, Math.max(high[0] - low[0], high[1] - low[1]), lengthUnit);
    this.#probe.textContent = Number.isNaN(value)
      ? `outside at ${place}`
      : `${withUnit(numberText(value * time.factor), time.name)} at ${place}`;
    if (!byKey) return;
    const [x, y] = this.#view.at(at[0], at[1], (Number.isNaN(value) ? 0 : value) * this.#view.rise);
    const d = `M${x - 9} ${y}h18M${x} ${y - 9}v18`;
    this.#overlay.append(
      svg(
        'g',
        { class: 'cross' },
        svg('path', { class: 'casing thin', d }),
        svg('path', { class: 'leader', d }),
      ),
    );
  }

  /** Shows another start: only the release mark changes. */
  setStart(start: string): void {
    this.#start = start;
    this.redraw();
  }

  /** Marks the stretch under the hand, also when the hand is on the strip. */
  light(stretch: number | undefined): void {
    if (this.#lit === stretch) return;
    this.#lit = stretch;
    this.redraw();
  }

  /** Draws at once: when this returns, the picture is there. */
  drawNow(): void {
    cancelAnimationFrame(this.#due);
    this.#due = 0;
    this.#draw();
  }

  /** Draws at the next frame. */
  redraw(): void {
    if (this.#due !== 0) return;
    this.#due = requestAnimationFrame(() => {
      this.#due = 0;
      this.#draw();
    });
  }

  dispose(): void {
    cancelAnimationFrame(this.#due);
    for (const end of this.#ends) end();
    this.#scene?.dispose();
  }

  #repaint(): void {
    const scheme = currentScheme();
    const dark = scheme === 'dark';
    const ink = tokenColour('--ink', dark ? '#EBE8DF' : '#1F2734');
    this.#scene?.paint(scheme, ink, tokenColour('--sheet', dark ? '#191E28' : '#FCFAF7'));
  }

  #draw(): void {
    const stage = this.#canvas.parentElement;
    if (stage === null || stage.clientWidth === 0) return;
    const size: [number, number] = [stage.clientWidth, stage.clientHeight];
    this.#drawn = size;
    const lift = this.#slider.lift;
    const side = this.#data.pins.length > 0 ? Math.min(150, size[0] * 0.15) : 56;
    const room: Rect = {
      left: side,
      right: size[0] - side,
      top: this.#hasWritingAbove() && lift < 0.5 ? 92 : 62,
      bottom: size[1] - 58,
    };
    const { field, time, lengthUnit } = this.#data;
    const extent = { nodes: field.nodes, values: field.values, fullRise: this.#fullRise };
    const view = project(extent, lift, room, size);
    this.#view = view;
    this.#scene?.draw(view, size, Math.min(2, devicePixelRatio));
    this.#write(view, size);
    const width = Math.min(280, Math.max(150, size[0] * 0.28));
    this.#legend.replaceChildren(legend(currentScheme(), this.#bands, time.name, Math.round(width)));
    this.#foot.replaceChildren(
      ...(lift === 0 ? scaleBar(view.scale, lengthUnit) : [heightWords(this.#bands, time.name)]),
    );
  }

  #hasWritingAbove(): boolean {
    return catchingStretches(this.#data.layout).some((stretch) => !stretch.post);
  }

  #write(view: Projection, size: readonly [number, number]): void {
    const { layout, pins, letter, time } = this.#data;
    const hidden = hiddenBy(this.#locator, view, this.#longest * view.rise);
    const room = new LabelRoom({ left: 2, right: size[0] - 2, top: 2, bottom: size[1] - 2 }, textScale());
    // The legend stands at the upper right.
    room.take({ left: size[0] - 350, right: size[0], top: 0, bottom: 20 + 20 * textScale() });
    room.take({ left: 0, right: 230, top: size[1] - 28, bottom: size[1] });
    room.take({ left: size[0] - 230, right: size[0], top: size[1] - 28, bottom: size[1] });
    this.#overlay.setAttribute('viewBox', `0 0 ${size[0]} ${size[1]}`);
    const scheme = currentScheme();
    const lines = this.#heavy.map((line) => {
      const t = (line.level * time.factor) / (this.#bands.step * this.#bands.count);
      const colour = washAt(scheme, t);
      const words = fixedText(line.level * time.factor, stepDecimals(4 * this.#bands.step));
      return { ...line, words, light: wantsLightInk(colour), fill: toHex(colour) };
    });
    const names = wallNames(layout, view, hidden, room, { letter });
    const pinGroup = pinMarks(pins, view, this.#locator, room, view.covers);
    this.#overlay.replaceChildren(
      releaseMarks(layout, this.#start, view, hidden, this.#locator),
      isolineNumbers(lines, view, hidden, room),
      wallOverlay(layout, view, hidden, this.#lit),
      originMarks(layout, view, hidden),
      names,
      pinGroup,
    );
  }
}

/** A scale bar of a nice length with a tick at its middle. */
function scaleBar(scale: number, unit: string): Element[] {
  const length = niceStep(150 / scale, 1.6);
  const width = length * scale;
  const bar = svg(
    'svg',
    { class: 'scale', width: Math.ceil(width) + 2, height: 12 },
    svg('path', { class: 'frame', d: `M1 3v6h${width.toFixed(1)}v-6M${(1 + width / 2).toFixed(1)} 9v-3` }),
  );
  return [bar, el('span', {}, withUnit(fixedText(length, stepDecimals(length)), unit))];
}

function heightWords(bands: Bands, unit: string): Element {
  const words = withUnit(givenText(bands.step * bands.count), unit);
  return el('span', {}, `Height is the mean time: the sheet is 0, the end of the scale ${words}.`);
}
