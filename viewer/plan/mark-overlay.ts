import type { LayoutView } from '../../src/service/contract.ts';
import { svg } from '../page/dom.ts';
import type { Hidden } from './hidden.ts';
import type { Isoline } from './isolines.ts';
import { type LabelRoom, placesAround } from './labels.ts';
import type { Locator } from './locate.ts';
import { lengthsAlong, type Px, pathOf, placesAt, refined } from './polyline.ts';
import type { Projection, Rect } from './projection.ts';
import { catchingStretches, type Stretch } from './stretches.ts';
import { outwardPx } from './wall-overlay.ts';

/** Everything written on the plan: release, pins with their readings, names of walls, numbers of isolines. */

/** Width of some writing at 12 px, near enough to keep writing apart. */
const widthOf = (words: string, perLetter = 6.5): number => words.length * perLetter + 4;

function text(at: Px, words: string, attributes: Record<string, string> = {}): SVGTextElement {
  return svg(
    'text',
    { x: at[0].toFixed(1), y: at[1].toFixed(1), 'text-anchor': 'middle', ...attributes },
    words,
  );
}

export interface PinReading {
  readonly name: string;
  readonly at: readonly [number, number];
  readonly reading: string;
}

/** Dashed edge of the region, or a ring around the point, from which the particles are released. */
export function releaseMarks(
  layout: LayoutView,
  start: string,
  view: Projection,
  hidden: Hidden,
  locator: Locator,
): SVGGElement {
  const group = svg('g', { class: 'release' });
  const chosen = layout.starts.find((one) => one.name === start);
  const region = layout.regions.find((one) => one.name === chosen?.region);
  for (const line of region?.lines ?? []) {
    const d = insideRuns(line, view, hidden, locator)
      .map((run) => pathOf(run))
      .join('');
    group.append(svg('path', { class: 'casing thin', d }), svg('path', { class: 'edge', d }));
  }
  if (chosen?.at !== undefined) {
    const [x, y] = chosen.at;
    const value = locator.valueNear(x, y);
    const [px, py] = view.at(x, y, (Number.isNaN(value) ? 0 : value) * view.rise);
    group.append(
      svg('circle', { class: 'casing thin', cx: px, cy: py, r: 9 }),
      svg('circle', { class: 'edge', cx: px, cy: py, r: 9 }),
      svg('circle', { class: 'spot', cx: px, cy: py, r: 2.4 }),
    );
  }
  return group;
}

/** The parts of a line that lie inside the compartment, carried on the surface, and seen. */
function insideRuns(line: readonly Px[], view: Projection, hidden: Hidden, locator: Locator): Px[][] {
  const runs: Px[][] = [];
  let run: Px[] = [];
  for (const [x, y] of refined(line, 3 / view.scale)) {
    const height = locator.valueAt(x, y) * view.rise;
    // Outside the compartment the height is not a number.
    if (Number.isNaN(height) || hidden(x, y, height + 2 / view.scale)) {
      if (run.length > 1) runs.push(run);
      run = [];
    } else run.push(view.at(x, y, height));
  }
  return run.length > 1 ? [...runs, run] : runs;
}

/** Pins as numbers in circles, readings outside on leaders. `around` is what the drawing covers. */
export function pinMarks(
  pins: readonly PinReading[],
  view: Projection,
  locator: Locator,
  room: LabelRoom,
  around: Rect,
): SVGGElement {
  const group = svg('g', { class: 'pins' });
  const k = room.textScale;
  const r = 9 * Math.min(k, 1.6);
  const places = pins.map((pin) => {
    const value = locator.valueNear(pin.at[0], pin.at[1]);
    return view.at(pin.at[0], pin.at[1], (Number.isNaN(value) ? 0 : value) * view.rise);
  });
  for (const [x, y] of places)
    room.take({ left: x - r - 2, right: x + r + 2, top: y - r - 2, bottom: y + r + 2 });
  pins.forEach((pin, i) => {
    const at = places[i] ?? [0, 0];
    const width = k * Math.max(widthOf(pin.reading, 8.2), widthOf(pin.name, 6.2));
    const box: [number, number] = [width, 36 * k];
    const middle = room.place(placesAround(at, around, box), box);
    if (middle !== undefined) {
      const side = middle[0] + width / 2 < around.left ? 1 : middle[0] - width / 2 > around.right ? -1 : 0;
      const edge: Px =
        side === 0
          ? [Math.min(middle[0] + width / 2, Math.max(middle[0] - width / 2, at[0])), middle[1] + 18 * k]
          : [middle[0] + side * (width / 2 + 3), middle[1]];
      const size = Math.hypot(edge[0] - at[0], edge[1] - at[1]) || 1;
      const from: Px = [at[0] + (r * (edge[0] - at[0])) / size, at[1] + (r * (edge[1] - at[1])) / size];
      const d = pathOf([from, edge]);
      // Numbers of isolines keep off the leader.
      for (const [x, y] of refined([from, edge], 10)) {
        room.take({ left: x - 4, right: x + 4, top: y - 5, bottom: y + 5 });
      }
      group.append(svg('path', { class: 'casing thin', d }), svg('path', { class: 'leader', d }));
      const anchor = side === 1 ? 'end' : 'start';
      const x = side === 1 ? middle[0] + width / 2 : middle[0] - width / 2;
      group.append(
        text([x, middle[1] - 3 * k], pin.reading, { class: 'reading', 'text-anchor': anchor }),
        text([x, middle[1] + 13 * k], pin.name, { class: 'soft', 'text-anchor': anchor }),
      );
    }
    group.append(
      svg('circle', { class: 'pin', cx: at[0].toFixed(1), cy: at[1].toFixed(1), r }),
      text([at[0], at[1] + 4 * k], String(i + 1), { class: 'pin-number' }),
    );
  });
  return group;
}

export interface WallNames {
  /** Short letter of a wall. */
  readonly letter: (name: string) => string;
}

function nameCandidates(at: Px, along: Px, out: Px, size: readonly [number, number]): Px[] {
  const reach = 17 + Math.abs(out[0]) * (size[0] / 2) + Math.abs(out[1]) * (size[1] / 2);
  const found: Px[] = [];
  for (const extra of [0, 14, 30]) {
    for (const shift of [0, 24, -24, 48, -48, 80, -80]) {
      found.push([
        at[0] + (reach + extra) * out[0] + shift * along[0],
        at[1] + (reach + extra) * out[1] + shift * along[1],
      ]);
    }
  }
  return found;
}

function wallName(stretch: Stretch, letter: string, view: Projection, room: LabelRoom): SVGElement[] {
  const { wall } = stretch;
  const k = room.textScale;
  const line = wall.points.map(([x, y]): Px => view.at(x, y, 0));
  const length = lengthsAlong(line).at(-1) ?? 0;
  if (stretch.whole && stretch.post && view.lift === 0) {
    const [x, y] = wall.points.slice(1).reduce(([sx, sy], [px, py]) => [sx + px, sy + py], [0, 0]);
    const n = Math.max(1, wall.points.length - 1);
    if (length / (2 * Math.PI) > 15) {
      const [mx, my] = view.at(x / n, y / n, 0);
      return [text([mx, my + 5 * k], letter, { class: 'wall-name letter' })];
    }
  }
  const [middle] = placesAt(line, [length / 2]);
  if (middle === undefined) return [];
  const out: Px = [-middle.along[1], middle.along[0]];
  const full = wall.name === undefined || wall.name === letter ? letter : `${letter}, ${wall.name}`;
  const weak = wall.kappa === undefined ? '' : `catches weakly, κ = ${wall.kappa}`;
  const forms =
    view.lift > 0 || stretch.post
      ? [[letter, '']]
      : [
          [full, weak],
          [full, ''],
          [letter, ''],
        ];
  for (const [words = '', below = ''] of forms) {
    const size: [number, number] = [
      k * Math.max(widthOf(words, 6.9), below === '' ? 0 : widthOf(below, 6)),
      k * (below === '' ? 17 : 33),
    ];
    const at = room.place(nameCandidates(middle.at, middle.along, out, size), size);
    if (at === undefined) continue;
    const top: Px = [at[0], at[1] + k * (below === '' ? 4 : -4)];
    const parts = [text(top, words, { class: 'wall-name' })];
    if (below !== '') parts.push(text([at[0], at[1] + 12 * k], below, { class: 'soft' }));
    return parts;
  }
  return [];
}

/** Names of the walls that catch, outside them, and 's = 0' of the outline. */
export function wallNames(
  layout: LayoutView,
  view: Projection,
  hidden: Hidden,
  room: LabelRoom,
  names: WallNames,
): SVGGElement {
  const group = svg('g', { class: 'names' });
  const outline = layout.loops.find((loop) => loop.role === 'outline');
  if (outline !== undefined && view.lift === 0) {
    const at = view.at(outline.mark[0], outline.mark[1], 0);
    const out = outwardPx(outline, view);
    const size: [number, number] = [36 * room.textScale, 16 * room.textScale];
    const place = room.place(nameCandidates(at, [-out[1], out[0]], out, size), size);
    if (place !== undefined)
      group.append(text([place[0], place[1] + 4 * room.textScale], 's = 0', { class: 'tick' }));
  }
  for (const stretch of catchingStretches(layout)) {
    // Letters of posts would stand on the lifted surface and not on the post.
    if (view.lift > 0 && stretch.post) continue;
    const middle = stretch.wall.points[stretch.wall.points.length >> 1];
    if (middle === undefined || stretch.wall.name === undefined || hidden(middle[0], middle[1], 0)) continue;
    group.append(...wallName(stretch, names.letter(stretch.wall.name), view, room));
  }
  return group;
}

/** Numbers on the heavy isolines, one each, where there is room and they are seen. */
export function isolineNumbers(
  lines: readonly (Isoline & { readonly words: string; readonly light: boolean; readonly fill: string })[],
  view: Projection,
  hidden: Hidden,
  room: LabelRoom,
): SVGGElement {
  const group = svg('g', { class: 'numbers' });
  for (const line of lines) {
    const height = line.level * view.rise;
    const points = line.points.map(([x, y]): Px => view.at(x, y, height));
    const length = lengthsAlong(points).at(-1) ?? 0;
    if (length < 54) continue;
    const size: [number, number] = [(line.words.length * 7 + 8) * room.textScale, 16 * room.textScale];
    const wanted = [0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8].map((part) => part * length);
    const free = placesAt(points, wanted).filter((_, i) => {
      if (view.lift === 0) return true;
      const [spot] = placesAt(line.points, [
        ((lengthsAlong(line.points).at(-1) ?? 0) * (wanted[i] ?? 0)) / length,
      ]);
      return spot !== undefined && !hidden(spot.at[0], spot.at[1], height);
    });
    const order = [3, 2, 4, 1, 5, 0, 6].flatMap((i) => (free[i] === undefined ? [] : [free[i].at]));
    const at = room.place(order, size);
    if (at === undefined) continue;
    const label = text([at[0], at[1] + 4 * room.textScale], line.words, {
      class: line.light ? 'number light' : 'number dark',
    });
    label.style.setProperty('stroke', line.fill);
    group.append(label);
  }
  return group;
}
