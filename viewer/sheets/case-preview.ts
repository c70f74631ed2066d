import { el, svg } from '../page/dom.ts';

/**
 * Draws the shapes of a refused case file with a revision cloud at each place that needs repair. It reads no more of
 * the file than plain numbers: what it does not understand it leaves out.
 */

type Raw = Readonly<Record<string, unknown>>;

const record = (value: unknown): Raw =>
  typeof value === 'object' && value !== null && !Array.isArray(value) ? (value as Raw) : {};

/** All entries as finite numbers, else undefined. */
function numbers(value: unknown, count?: number): number[] | undefined {
  if (!Array.isArray(value) || (count !== undefined && value.length !== count)) return undefined;
  return value.every((one): one is number => typeof one === 'number' && Number.isFinite(one))
    ? value
    : undefined;
}

function points(value: unknown): string | undefined {
  if (!Array.isArray(value)) return undefined;
  const pairs = value.map((one) => numbers(one, 2));
  return pairs.every((pair) => pair !== undefined)
    ? pairs.map((pair) => pair?.join(',')).join(' ')
    : undefined;
}

function shapeOf(raw: Raw): SVGElement | undefined {
  const attributes = { class: 'found', 'vector-effect': 'non-scaling-stroke' };
  const circle = numbers(raw['circle'], 2);
  if (circle !== undefined && typeof raw['radius'] === 'number') {
    return svg('circle', { ...attributes, cx: circle[0], cy: circle[1], r: Math.abs(raw['radius']) });
  }
  const box = numbers(raw['rectangle'], 4);
  if (box !== undefined) {
    const [x0 = 0, y0 = 0, x1 = 0, y1 = 0] = box;
    return svg('polygon', { ...attributes, points: `${x0},${y0} ${x1},${y0} ${x1},${y1} ${x0},${y1}` });
  }
  const [middle, radii] = [numbers(raw['ellipse'], 2), numbers(raw['radii'], 2)];
  if (middle !== undefined && radii !== undefined) {
    const turned = Number.parseFloat(String(raw['turned'] ?? 0));
    const transform = `rotate(${Number.isFinite(turned) ? turned : 0} ${middle[0]} ${middle[1]})`;
    return svg('ellipse', {
      ...attributes,
      cx: middle[0],
      cy: middle[1],
      rx: radii[0],
      ry: radii[1],
      transform,
    });
  }
  const polygon = points(raw['polygon']);
  if (polygon !== undefined) return svg('polygon', { ...attributes, points: polygon });
  const line = points(raw['line']);
  if (line !== undefined) return svg('polyline', { ...attributes, points: line });
  if (typeof raw['path'] === 'string') return svg('path', { ...attributes, d: raw['path'] });
  return undefined;
}

/** A closed scalloped ring around a place: the cloud by which a drawing marks what is to be revised. */
export function cloudPath(x: number, y: number, radius: number, bumps = 14): string {
  const at = (i: number) => {
    const angle = (2 * Math.PI * i) / bumps;
    return `${x + radius * Math.cos(angle)} ${y + radius * Math.sin(angle)}`;
  };
  const bump = (radius * Math.PI * 1.15) / bumps;
  const arcs = Array.from({ length: bumps }, (_, i) => `A${bump} ${bump} 0 0 1 ${at(i + 1)}`);
  return `M${at(0)}${arcs.join('')}Z`;
}

/** The drawing with its clouds, or nothing if the file holds no shape that can be drawn. */
export function casePreview(
  text: string,
  places: readonly (readonly [number, number])[],
): HTMLElement | undefined {
  let parsed: unknown;
  try {
    parsed = JSON.parse(text);
  } catch {
    return undefined;
  }
  const drawing = record(record(parsed)['drawing']);
  const all = [
    drawing['outline'],
    ...['holes', 'innerWalls'].flatMap((key) => Object.values(record(drawing[key]))),
  ];
  const shapes = all.slice(0, 2000).flatMap((one) => shapeOf(record(one)) ?? []);
  if (shapes.length === 0) return undefined;
  const down = drawing['y'] === 'down';
  const lines = svg('g', down ? {} : { transform: 'scale(1 -1)' }, ...shapes);
  const root = svg(
    'svg',
    { class: 'drawing-preview', role: 'img', 'aria-label': 'The drawing as the file gives it' },
    lines,
  );
  requestAnimationFrame(() => {
    if (!root.isConnected) return;
    const box = lines.getBBox();
    const size = Math.max(box.width, box.height);
    if (!(size > 0) || !Number.isFinite(size)) return;
    const margin = 0.09 * size;
    const top = down ? box.y : -box.y - box.height;
    root.setAttribute(
      'viewBox',
      `${box.x - margin} ${top - margin} ${box.width + 2 * margin} ${box.height + 2 * margin}`,
    );
    const unit = 1 / (root.getScreenCTM()?.a ?? 1);
    const seen = places.slice(0, 12).map(([x, y]) => [x, down ? y : -y] as const);
    for (const group of nearGroups(seen, 44 * unit)) {
      const [x, y] = seen[group[0] ?? 0] ?? [0, 0];
      root.append(...mark(x, y, groupWords(group), unit));
    }
  });
  return el('div', { class: 'preview' }, root);
}

/** Places that one cloud covers together: each within `reach` of the first of its group. */
export function nearGroups(places: readonly (readonly [number, number])[], reach: number): number[][] {
  const groups: number[][] = [];
  places.forEach(([x, y], i) => {
    const near = groups.find(([first = 0]) => {
      const [px, py] = places[first] ?? [0, 0];
      return Math.hypot(x - px, y - py) < reach;
    });
    if (near === undefined) groups.push([i]);
    else near.push(i);
  });
  return groups;
}

function groupWords(group: readonly number[]): string {
  const numbers = group.map((i) => i + 1);
  const [first = 0, last = 0] = [numbers[0], numbers.at(-1)];
  const inOrder = numbers.length > 2 && last - first === numbers.length - 1;
  return inOrder ? `${first}–${last}` : numbers.join(', ');
}

function mark(x: number, y: number, words: string, unit: number): SVGElement[] {
  const wide = (11 + 3.4 * (words.length - 1)) * unit;
  const [dx, dy] = [34 * unit + wide, -42 * unit];
  const label = svg('text', { class: 'cloud-number', x: x + dx, y: y + dy + 4.5 * unit }, words);
  label.style.setProperty('font-size', `${13 * unit}px`);
  const leader = `M${x + 21 * unit} ${y - 18 * unit}L${x + dx - wide} ${y + dy}`;
  return [
    svg('path', { class: 'revision', d: cloudPath(x, y, 24 * unit), 'vector-effect': 'non-scaling-stroke' }),
    svg('path', { class: 'revision', d: leader, 'vector-effect': 'non-scaling-stroke' }),
    svg('ellipse', { class: 'cloud-ring', cx: x + dx, cy: y + dy, rx: wide, ry: 11 * unit }),
    label,
  ];
}
