import type { Curve, Point } from '../../mesher/index.ts';

/** One shape of a drawing file, before anything is said about what it stands for. */
export interface FoundShape {
  /** Its title, else its id, else 'shape N' by position; unique in the file. */
  readonly name: string;
  /** False when the name is only its position. */
  readonly isNamed: boolean;
  /** Kind of element it comes from, e.g. 'circle'. */
  readonly element: string;
  /** Line of the file its element begins on, from 1. */
  readonly line: number;
  /** Names of the groups it lies in, outermost first. */
  readonly groups: readonly string[];
  /** In drawing units, y upwards; the closing line is there only where the file draws it. */
  readonly curves: readonly Curve[];
  /** Closed as the file paints it; its ends may still be apart when it is closed by its fill alone. */
  readonly closed: boolean;
}

/** How long one drawing unit is. */
export interface PhysicalScale {
  /** e.g. 0.001 with unit 'mm' */
  readonly value: number;
  /** A unit of length as people write it. */
  readonly unit: string;
  /** Where it is from, in words. */
  readonly from: string;
}

/** What a drawing file holds. */
export interface FoundDrawing {
  readonly shapes: readonly FoundShape[];
  /** Absent when the file says no physical size: then it must be asked. */
  readonly physicalScale?: PhysicalScale;
  /** What is in the file and is no shape that can be taken, in words with lines. */
  readonly leftOut: readonly string[];
  /** How coordinates of the file become those of the shapes, in words. */
  readonly frame: string;
  /** y of the shapes = `top` − y as written. */
  readonly top: number;
  /** x of the shapes = x as written − `left`. */
  readonly left: number;
}

/** Smallest box around the ends and bulges of some curves (control points for Béziers), low and high corner. */
export function boxOf(curves: readonly Curve[]): readonly [low: Point, high: Point] {
  let x0 = Number.POSITIVE_INFINITY;
  let y0 = Number.POSITIVE_INFINITY;
  let x1 = Number.NEGATIVE_INFINITY;
  let y1 = Number.NEGATIVE_INFINITY;
  const take = (x: number, y: number): void => {
    x0 = Math.min(x0, x);
    y0 = Math.min(y0, y);
    x1 = Math.max(x1, x);
    y1 = Math.max(y1, y);
  };
  for (const curve of curves) {
    take(...curve.from);
    take(...curve.to);
    if (curve.kind === 'cubic') for (const c of curve.controls) take(...c);
    if (curve.kind === 'arc') for (const p of turningPoints(curve)) take(...p);
  }
  return [
    [x0, y0],
    [x1, y1],
  ];
}

/** Places of an arc where x or y is stationary. */
function turningPoints(arc: Curve & { kind: 'arc' }): Point[] {
  const c = Math.cos(arc.turned);
  const s = Math.sin(arc.turned);
  const [a, b] = arc.radii;
  const places: Point[] = [];
  for (const first of [Math.atan2(-s * b, c * a), Math.atan2(c * b, s * a)]) {
    for (const angle of [first, first + Math.PI]) {
      const turns = (angle - arc.start) / arc.sweep;
      const t =
        turns -
        Math.floor(turns / ((2 * Math.PI) / Math.abs(arc.sweep))) * ((2 * Math.PI) / Math.abs(arc.sweep));
      if (t > 1) continue;
      const x = a * Math.cos(angle);
      const y = b * Math.sin(angle);
      places.push([arc.centre[0] + c * x - s * y, arc.centre[1] + s * x + c * y]);
    }
  }
  return places;
}
