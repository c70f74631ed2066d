import type { Curve, Point } from '../../mesher/index.ts';
import { turnedUp } from '../importers/affine.ts';
import { circleCurves, ellipseCurves, linesThrough, rectangleCurves } from '../importers/basic-shapes.ts';
import { readPathData } from '../importers/path-data.ts';
import { type DrawingContext, readLength, readPoint } from './drawing-context.ts';
import { joinKey } from './key-path.ts';

/** A typed shape as curves with y upwards, the first one starting at the mark. */
export interface Shape {
  readonly kind: 'path' | 'circle' | 'ellipse' | 'rectangle' | 'polygon' | 'line';
  readonly curves: readonly Curve[];
  /** Ends of the curves meet as written. */
  readonly closed: boolean;
  /** Where s = 0 shall be, if not at the start of the first curve. */
  readonly mark?: Point;
}

/** Keys of a shape before they are checked. */
interface WrittenShape {
  readonly path?: unknown;
  readonly circle?: unknown;
  readonly radius?: unknown;
  readonly ellipse?: unknown;
  readonly radii?: unknown;
  readonly turned?: unknown;
  readonly rectangle?: unknown;
  readonly polygon?: unknown;
  readonly line?: unknown;
  readonly mark?: unknown;
}

const forms: readonly Shape['kind'][] = ['path', 'circle', 'ellipse', 'rectangle', 'polygon', 'line'];

const example = 'Give { "circle": [x, y], "radius": r }, or one of path, ellipse, rectangle, polygon, line';

/**
 * An inline shape of a case.
 *
 * @param y which way the case writes y; only a path asks for it
 * @throws what `ctx.fail` throws, where the shape is not understood
 */
export function readShape(
  raw: unknown,
  key: string,
  y: 'up' | 'down' | undefined,
  ctx: DrawingContext,
): Shape {
  const written = asObject(raw, key, ctx);
  const kinds = forms.filter((kind) => written[kind] !== undefined);
  const kind = kinds[0];
  if (kind === undefined || kinds.length > 1) {
    const what =
      kind === undefined ? 'the shape has no form' : `a shape is either ${kinds.join(' or ')}, not both`;
    return ctx.fail('CASE_VALUE_WRONG', what, key, example);
  }
  if (kind === 'path' && y === undefined) {
    ctx.fail(
      'CASE_KEY_MISSING',
      'a path does not say which way y grows',
      'drawing.y',
      'Add "y": "up" to the drawing, or "y": "down" when the path comes from an SVG file',
    );
  }
  const place: Placing = {
    point: (value, at) => {
      const [px, py] = readPoint(value, at, ctx);
      return [px, y === 'down' ? 0 - py : py];
    },
    down: y === 'down',
  };
  const shape = drawn[kind](written, joinKey(key, kind), key, place, ctx);
  const mark = written.mark;
  return mark === undefined ? shape : { ...shape, mark: place.point(mark, joinKey(key, 'mark')) };
}

interface Placing {
  /** A written point with y upwards. */
  readonly point: (value: unknown, key: string) => Point;
  readonly down: boolean;
}

type Draw = (written: WrittenShape, own: string, key: string, place: Placing, ctx: DrawingContext) => Shape;

const drawn: Readonly<Record<Shape['kind'], Draw>> = {
  path: (written, own, _, place, ctx) => {
    const { path } = written;
    if (typeof path !== 'string') {
      return ctx.fail(
        'CASE_VALUE_WRONG',
        'a path is a text',
        own,
        'Give SVG path data such as "M 0 0 H 1 V 1 H 0 Z"',
      );
    }
    const { subpaths, problem } = readPathData(path);
    const first = subpaths[0];
    if (problem !== undefined) {
      ctx.fail('CASE_VALUE_WRONG', problem, own, 'Give SVG path data such as "M 0 0 H 1 V 1 H 0 Z"');
    }
    if (!first || subpaths.length > 1) {
      const what = first
        ? `the path draws ${subpaths.length} lines (it has several M)`
        : 'the path draws nothing';
      return ctx.fail(
        'CASE_VALUE_WRONG',
        what,
        own,
        'Give one line per shape; holes are shapes of their own',
      );
    }
    const curves = place.down ? first.curves.map((curve) => turnedUp(curve)) : first.curves;
    return { kind: 'path', curves, closed: first.closed };
  },
  circle: (written, own, key, place, ctx) => {
    const radius = positive(written.radius, joinKey(key, 'radius'), ctx);
    return {
      kind: 'circle',
      curves: circleCurves(place.point(written.circle, own), radius),
      closed: true,
    };
  },
  ellipse: (written, own, key, place, ctx) => {
    const at = joinKey(key, 'radii');
    const { radii } = written;
    if (!Array.isArray(radii) || radii.length !== 2) {
      return ctx.fail('CASE_VALUE_WRONG', 'an ellipse needs two radii', at, 'Give "radii": [a, b]');
    }
    const [a, b] = [positive(radii[0], at, ctx), positive(radii[1], at, ctx)];
    const turned = written.turned;
    const degrees = turned === undefined ? 0 : ctx.quantity(turned, 'angle', joinKey(key, 'turned'));
    const centre = place.point(written.ellipse, own);
    return {
      kind: 'ellipse',
      curves: ellipseCurves(centre, [a, b], (degrees * Math.PI) / 180),
      closed: true,
    };
  },
  rectangle: (written, own, _, place, ctx) => {
    const { rectangle } = written;
    if (!Array.isArray(rectangle) || rectangle.length !== 4) {
      return ctx.fail('CASE_VALUE_WRONG', 'a rectangle is four lengths', own, 'Give [x0, y0, x1, y1]');
    }
    const a = place.point(rectangle.slice(0, 2), own);
    const b = place.point(rectangle.slice(2), own);
    const low: Point = [Math.min(a[0], b[0]), Math.min(a[1], b[1])];
    const high: Point = [Math.max(a[0], b[0]), Math.max(a[1], b[1])];
    if (low[0] === high[0] || low[1] === high[1]) {
      ctx.fail('NO_AREA', 'the rectangle has no area', own, 'Give two opposite corners: [x0, y0, x1, y1]');
    }
    return { kind: 'rectangle', curves: rectangleCurves(low, high), closed: true };
  },
  polygon: (written, own, _, place, ctx) => {
    const points = readPoints(written.polygon, own, 3, place, ctx);
    const first = points[0];
    // A repeated closing point gives a line without length, which healing reports.
    return { kind: 'polygon', curves: linesThrough(first ? [...points, first] : points), closed: true };
  },
  line: (written, own, _, place, ctx) => {
    const points = readPoints(written.line, own, 2, place, ctx);
    const [first, last] = [points[0], points.at(-1)];
    const closed = points.length > 2 && first?.[0] === last?.[0] && first?.[1] === last?.[1];
    return { kind: 'line', curves: linesThrough(points), closed };
  },
};

function readPoints(raw: unknown, key: string, least: number, place: Placing, ctx: DrawingContext): Point[] {
  if (!Array.isArray(raw) || raw.length < least) {
    const what = `${least === 3 ? 'a polygon' : 'a line'} needs at least ${least} points`;
    return ctx.fail('CASE_VALUE_WRONG', what, key, 'Give a list of points: [[x, y], [x, y], …]');
  }
  return raw.map((point, i) => place.point(point, joinKey(key, i)));
}

function positive(raw: unknown, key: string, ctx: DrawingContext): number {
  if (raw === undefined) ctx.fail('CASE_KEY_MISSING', 'a length is missing', key, example);
  const value = readLength(raw, key, ctx);
  if (!(value > 0)) ctx.fail('VALUE_OUT_OF_RANGE', `${value} is no size`, key, 'Give a length above 0');
  return value;
}

function asObject(raw: unknown, key: string, ctx: DrawingContext): WrittenShape {
  if (typeof raw !== 'object' || raw === null || Array.isArray(raw)) {
    return ctx.fail('CASE_VALUE_WRONG', 'this is not a shape', key, example);
  }
  return raw as WrittenShape;
}
