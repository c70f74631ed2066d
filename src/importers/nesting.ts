import { type Curve, enclosedArea, type Point, pointAt } from '../../mesher/index.ts';
import { boxOf, type FoundShape } from './found-shape.ts';

/** A closed shape as a polygon with what is asked of it often. */
export interface Outlined {
  readonly shape: FoundShape;
  /** Made when first asked for: most shapes are told apart by their boxes. */
  readonly polygon: () => readonly Point[];
  readonly box: readonly [low: Point, high: Point];
  /** By the curves, not by the polygon; in drawing units squared. */
  readonly area: number;
}

/** Chords per curved piece: only for telling which shape lies in which. */
const chords = 16;

export function outlined(shape: FoundShape): Outlined {
  let made: readonly Point[] | undefined;
  const polygon = (): readonly Point[] => {
    made ??= shape.curves.flatMap(pointsOn);
    return made;
  };
  const first = shape.curves[0]?.from ?? [0, 0];
  const last = shape.curves.at(-1)?.to ?? [0, 0];
  const pieces = [...shape.curves, { kind: 'line', from: last, to: first } as const].map((curve, tag) => ({
    curve,
    tag,
  }));
  return { shape, polygon, box: boxOf(shape.curves), area: Math.abs(enclosedArea({ name: '', pieces })) };
}

function pointsOn(curve: Curve): Point[] {
  if (curve.kind === 'line') return [curve.from];
  return Array.from({ length: chords }, (_, i) => pointAt(curve, i / chords));
}

/** How much of `inner` lies inside `outer`, by its corners and points between. */
export function sideOf(inner: Outlined, outer: Outlined): 'inside' | 'across' | 'outside' {
  if (areApart(inner.box, outer.box)) return 'outside';
  const points = inner.polygon();
  let inside = 0;
  for (const point of points) if (holds(outer, point)) inside++;
  if (inside === 0) return 'outside';
  return inside === points.length ? 'inside' : 'across';
}

function areApart(a: Outlined['box'], b: Outlined['box']): boolean {
  return a[1][0] < b[0][0] || b[1][0] < a[0][0] || a[1][1] < b[0][1] || b[1][1] < a[0][1];
}

/** Even–odd rule by a ray along +x (Shimrat 1962; recalled). */
function holds(outer: Outlined, [x, y]: Point): boolean {
  const [low, high] = outer.box;
  if (x < low[0] || x > high[0] || y < low[1] || y > high[1]) return false;
  const polygon = outer.polygon();
  let inside = false;
  for (let i = 0, j = polygon.length - 1; i < polygon.length; j = i++) {
    const a = polygon[i];
    const b = polygon[j];
    if (!a || !b || a[1] > y === b[1] > y) continue;
    if (x < a[0] + ((y - a[1]) / (b[1] - a[1])) * (b[0] - a[0])) inside = !inside;
  }
  return inside;
}
