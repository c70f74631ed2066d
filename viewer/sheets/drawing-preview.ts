import { svg } from '../page/dom.ts';
import type { Role } from './drawn-case.ts';

/**
 * Shows a dropped drawing in the lines of the page. The file is only read as data: shapes are made anew from a few
 * geometric attributes, so neither its scripts, styles nor links reach the page.
 */

const SHAPES: Readonly<Record<string, readonly string[]>> = {
  path: ['d'],
  rect: ['x', 'y', 'width', 'height', 'rx', 'ry'],
  circle: ['cx', 'cy', 'r'],
  ellipse: ['cx', 'cy', 'rx', 'ry'],
  line: ['x1', 'y1', 'x2', 'y2'],
  polyline: ['points'],
  polygon: ['points'],
};
const MOST_SHAPES = 2000;

function nameOf(element: Element): string | undefined {
  for (const child of element.children) if (child.localName === 'title') return child.textContent?.trim();
  return element.id === '' ? undefined : element.id;
}

function copy(
  from: Element,
  into: SVGElement,
  count: { left: number },
  named: Map<string, SVGGeometryElement>,
): void {
  for (const child of from.children) {
    if (count.left <= 0) return;
    const transform = child.getAttribute('transform') ?? undefined;
    const attributes = SHAPES[child.localName];
    if (attributes !== undefined) {
      count.left--;
      const shape = document.createElementNS(
        'http://www.w3.org/2000/svg',
        child.localName,
      ) as SVGGeometryElement;
      for (const name of [...attributes, 'transform']) {
        const value = child.getAttribute(name);
        if (value !== null) shape.setAttribute(name, value);
      }
      shape.setAttribute('class', 'found');
      shape.setAttribute('vector-effect', 'non-scaling-stroke');
      into.append(shape);
      const name = nameOf(child);
      if (name !== undefined) named.set(name, shape);
    } else if (child.localName === 'g' || child.localName === 'svg' || child.localName === 'a') {
      const group = svg('g', { transform });
      into.append(group);
      copy(child, group, count, named);
    }
  }
}

export interface DrawingPreview {
  readonly element: SVGSVGElement;
  /** Draws each shape as what it is taken for. */
  readonly show: (roles: readonly Role[]) => void;
}

/** An SVG of the drawing with the numbers of the shapes found by name. Fits itself once it is on the page. */
export function drawingPreview(text: string, names: readonly string[]): DrawingPreview {
  const root = svg('svg', {
    class: 'drawing-preview',
    role: 'img',
    'aria-label': 'The drawing as it was read',
  });
  const named = new Map<string, SVGGeometryElement>();
  const show = (roles: readonly Role[]) => {
    names.forEach((name, i) => {
      named.get(name)?.setAttribute('class', `found found-${(roles[i] ?? 'left out').replace(' ', '-')}`);
    });
  };
  const file = new DOMParser().parseFromString(text, 'image/svg+xml');
  if (file.querySelector('parsererror') !== null) return { element: root, show };
  const lines = svg('g');
  root.append(lines);
  copy(file.documentElement, lines, { left: MOST_SHAPES }, named);
  requestAnimationFrame(() => fitAndNumber(root, lines, names, named));
  return { element: root, show };
}

function fitAndNumber(
  root: SVGSVGElement,
  lines: SVGGElement,
  names: readonly string[],
  named: ReadonlyMap<string, SVGGeometryElement>,
): void {
  if (!root.isConnected) return;
  const box = lines.getBBox();
  const size = Math.max(box.width, box.height);
  if (!(size > 0)) return;
  const margin = 0.06 * size;
  root.setAttribute(
    'viewBox',
    `${box.x - margin} ${box.y - margin} ${box.width + 2 * margin} ${box.height + 2 * margin}`,
  );
  const matrix = root.getScreenCTM();
  if (matrix === null) return;
  const unit = 1 / matrix.a;
  names.forEach((name, i) => {
    const shape = named.get(name);
    const own = shape?.getBBox();
    const toScreen = shape?.getScreenCTM();
    if (shape === undefined || own === undefined || toScreen === null || toScreen === undefined) return;
    const small = own.width * own.height < 0.3 * box.width * box.height && own.width * own.height > 0;
    // A large or open shape carries its number on its line.
    const local = small
      ? new DOMPoint(own.x + own.width / 2, own.y + own.height / 2)
      : shape.getPointAtLength(0.3 * shape.getTotalLength());
    const at = DOMPoint.fromPoint(local).matrixTransform(toScreen).matrixTransform(matrix.inverse());
    const label = svg('text', { class: 'found-number', x: at.x, y: at.y + 4.5 * unit }, String(i + 1));
    label.style.setProperty('font-size', `${13 * unit}px`);
    label.style.setProperty('stroke-width', `${9 * unit}px`);
    root.append(label);
  });
}
