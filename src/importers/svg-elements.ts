import type { Curve, Point } from '../../mesher/index.ts';
import { CaseError } from '../case/errors.ts';
import { ellipseCurves, linesThrough, rectangleCurves } from './basic-shapes.ts';
import { readPathData, type Subpath } from './path-data.ts';
import type { XmlElement } from './xml-tree.ts';

/** The seven elements of SVG that draw a shape. */
export type DrawnElement = 'path' | 'rect' | 'circle' | 'ellipse' | 'polygon' | 'polyline' | 'line';

export const shapeElements: ReadonlySet<string> = new Set([
  'path',
  'rect',
  'circle',
  'ellipse',
  'polygon',
  'polyline',
  'line',
]);

/**
 * What an element draws, in its own frame (y downwards); more than one stroke only for a path.
 *
 * @throws {CaseError} DRAWING_NOT_READ with file and line
 * Source: W3C, SVG 1.1 (second edition, 2011), chapters 8 and 9.
 */
export function strokesOf(element: XmlElement, tag: DrawnElement, file: string): readonly Subpath[] {
  const number = (key: string, fallback = 0): number => numberOf(element, key, fallback, file);
  switch (tag) {
    case 'path': {
      const { subpaths, problem } = readPathData(element.attributes.get('d') ?? 'M 0 0');
      if (problem !== undefined) throw notRead(element, file, problem);
      return subpaths;
    }
    case 'rect':
      return closed(rectangleOf(element, number));
    case 'circle': {
      const r = number('r');
      return r > 0 ? closed(turnedQuarters([number('cx'), number('cy')], [r, r])) : [];
    }
    case 'ellipse': {
      const radii: [number, number] = [number('rx'), number('ry')];
      return radii[0] > 0 && radii[1] > 0 ? closed(turnedQuarters([number('cx'), number('cy')], radii)) : [];
    }
    case 'polygon': {
      const points = pointsOf(element, file);
      const first = points[0];
      return first && points.length > 1 ? closed(linesThrough([...points, first])) : [];
    }
    case 'polyline':
      return [{ curves: linesThrough(pointsOf(element, file)), closed: false }];
    case 'line': {
      const from: Point = [number('x1'), number('y1')];
      return [{ curves: linesThrough([from, [number('x2'), number('y2')]]), closed: false }];
    }
  }
}

function closed(curves: readonly Curve[]): readonly Subpath[] {
  return [{ curves, closed: true }];
}

/** Starts at the +x point and runs counter-clockwise as seen, which is against the angle in a frame with y downwards. */
function turnedQuarters(centre: Point, radii: readonly [number, number]): Curve[] {
  return ellipseCurves([centre[0], -centre[1]], radii, 0).map((curve) =>
    curve.kind === 'arc'
      ? {
          ...curve,
          from: [curve.from[0], -curve.from[1]],
          to: [curve.to[0], -curve.to[1]],
          centre,
          start: -curve.start,
          sweep: -curve.sweep,
        }
      : curve,
  );
}

/** From the lower left corner as seen; rx and ry as SVG resolves them: one stands for both, capped at half a side. */
function rectangleOf(element: XmlElement, number: (key: string, fallback?: number) => number): Curve[] {
  const [x, y, width, height] = [number('x'), number('y'), number('width'), number('height')];
  if (!(width > 0 && height > 0)) return [];
  const says = (key: string): boolean =>
    element.attributes.has(key) && element.attributes.get(key) !== 'auto';
  const rx = Math.min(width / 2, says('rx') ? number('rx') : says('ry') ? number('ry') : 0);
  const ry = Math.min(height / 2, says('ry') ? number('ry') : says('rx') ? number('rx') : 0);
  return rectangleCurves([x, y + height], [x + width, y], [rx, ry]);
}

function numberOf(element: XmlElement, key: string, fallback: number, file: string): number {
  const text = element.attributes.get(key)?.trim();
  if (text === undefined) return fallback;
  const value = Number(text.replace(/px$/, ''));
  if (text === '' || !Number.isFinite(value)) {
    throw notRead(element, file, `${key}="${text}" is not a number in drawing units`);
  }
  return value;
}

function pointsOf(element: XmlElement, file: string): Point[] {
  const text = (element.attributes.get('points') ?? '').trim();
  const values = text === '' ? [] : text.split(/\s*,\s*|\s+|(?<=[\d.])(?=-)/).map(Number);
  if (!values.every(Number.isFinite) || values.length % 2 !== 0) {
    throw notRead(element, file, 'points are not pairs of numbers');
  }
  const points: Point[] = [];
  for (let i = 0; i + 1 < values.length; i += 2) points.push([values[i] ?? 0, values[i + 1] ?? 0]);
  return points;
}

function notRead(element: XmlElement, file: string, what: string): CaseError {
  return new CaseError(
    'DRAWING_NOT_READ',
    `${file} line ${element.line}, <${element.tag}>: ${what}`,
    { file, line: element.line },
    'Mend the element, or save the drawing again as plain SVG',
  );
}
