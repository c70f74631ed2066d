import poly2tri from 'poly2tri';
import { MesherError } from './errors.ts';

/** The door to poly2tri: a first triangulation of points and lines, tried with several cures and checked. */

/** More points than this are refused: time grows as the square on smooth outlines, and so does the stack. */
export const mostCorners = 50_000;

/** A triangulation of a box round all points; its four corners are the last four points. */
export interface BoxTriangulation {
  /** 2 per point: the points given, then the corners of the box, counter-clockwise from the lower left. */
  readonly points: Float64Array;
  /** 3 per triangle: point numbers, counter-clockwise but for rounding. */
  readonly triangles: Int32Array;
}

/**
 * Triangulates the box round `points` so that every line is an edge.
 *
 * poly2tri is tried on coordinates moved and scaled to about 2^40, then snapped to integers up to 2^25, then turned
 * by 0.6 rad, each of them once more turned the other way; a result counts only when triangle count and edges are
 * right. Areas are left to the caller, who has exact predicates and repairs rounding.
 *
 * @param points 2 per point, all different
 * @param ends 2 point numbers per line; lines meet in their ends only
 * @throws {MesherError} TOO_MANY_CORNERS, TRIANGULATION_FAILED
 */
export function triangulateBox(
  points: Float64Array,
  ends: Int32Array,
  accept: (candidate: BoxTriangulation) => boolean,
): void {
  const count = points.length / 2;
  if (count > mostCorners) {
    throw new MesherError(
      'TOO_MANY_CORNERS',
      `the drawing has ${count} corners, more than ${mostCorners}`,
      {},
      'Draw smooth walls as arcs or curves, or leave out points that do not matter.',
    );
  }
  const boxed = withBox(points);
  let cause: unknown;
  for (const cure of cures) {
    try {
      const triangles = sweep(cure(boxed), ends);
      if (triangles && accept({ points: boxed, triangles })) return;
    } catch (error) {
      if (error instanceof MesherError) throw error;
      cause = error;
    }
  }
  throw new MesherError(
    'TRIANGULATION_FAILED',
    cause instanceof RangeError
      ? `the drawing has too many corners (${count}) for the stack of this thread`
      : 'no first triangulation of the drawing was found',
    {},
    'Mesh it in a thread with a larger stack, or move corners that lie very near other walls.',
    cause,
  );
}

/** The points and four corners of a box half as large again as they reach. */
function withBox(points: Float64Array): Float64Array {
  const box = bounds(points);
  const pad = 0.25 * Math.max(box.width, box.height);
  const left = box.left - pad;
  const low = box.low - pad;
  const right = box.left + box.width + pad;
  const high = box.low + box.height + pad;
  const boxed = new Float64Array(points.length + 8);
  boxed.set(points);
  boxed.set([left, low, right, low, right, high, left, high], points.length);
  return boxed;
}

function bounds(xy: Float64Array): { left: number; low: number; width: number; height: number } {
  let left = Number.POSITIVE_INFINITY;
  let low = Number.POSITIVE_INFINITY;
  let right = Number.NEGATIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < xy.length; i += 2) {
    left = Math.min(left, xy[i]);
    right = Math.max(right, xy[i]);
    low = Math.min(low, xy[i + 1]);
    high = Math.max(high, xy[i + 1]);
  }
  return { left, low, width: right - left, height: high - low };
}

type Cure = (xy: Float64Array) => Float64Array;

/** Moved to the middle and scaled by a power of two to about 2^power: differences keep their digits. */
function centred(xy: Float64Array, power: number): Float64Array {
  const box = bounds(xy);
  const scale = 2 ** (power - Math.ceil(Math.log2(Math.max(box.width, box.height))));
  const midX = box.left + box.width / 2;
  const midY = box.low + box.height / 2;
  const out = new Float64Array(xy.length);
  for (let i = 0; i < xy.length; i += 2) {
    out[i] = (xy[i] - midX) * scale;
    out[i + 1] = (xy[i + 1] - midY) * scale;
  }
  return out;
}

function rotated(xy: Float64Array, angle: number): Float64Array {
  const c = Math.cos(angle);
  const s = Math.sin(angle);
  const out = new Float64Array(xy.length);
  for (let i = 0; i < xy.length; i += 2) {
    out[i] = c * xy[i] - s * xy[i + 1];
    out[i + 1] = s * xy[i] + c * xy[i + 1];
  }
  return out;
}

const cures: readonly Cure[] = [
  (xy) => centred(xy, 40),
  (xy) => centred(xy, 25).map(Math.round),
  (xy) => rotated(centred(xy, 40), 0.6),
  (xy) => rotated(centred(xy, 40), 2.2),
  (xy) => rotated(centred(xy, 40), -0.9),
];

interface SweepPoint extends poly2tri.XY {
  readonly number: number;
  _p2t_edge_list?: { p: SweepPoint; q: SweepPoint }[];
}

/** One run of poly2tri; undefined when the result cannot be a triangulation of the box. */
function sweep(xy: Float64Array, ends: Int32Array): Int32Array | undefined {
  const count = xy.length / 2;
  const points: SweepPoint[] = [];
  for (let i = 0; i < count; i++) points.push({ x: xy[2 * i], y: xy[2 * i + 1], number: i });
  const box = points.slice(count - 4);
  const context = new poly2tri.SweepContext(box, { cloneArrays: true });
  context.addPoints(points.slice(0, count - 4));
  for (let i = 0; i < ends.length; i += 2) {
    const a = points[ends[i]];
    const b = points[ends[i + 1]];
    if (a.x === b.x && a.y === b.y) return undefined;
    // An edge hangs on its upper end; the package's own edges close every chain, and ours need not be closed.
    const upper = a.y > b.y || (a.y === b.y && a.x > b.x) ? a : b;
    const edge = { p: upper === a ? b : a, q: upper };
    if (upper._p2t_edge_list) upper._p2t_edge_list.push(edge);
    else upper._p2t_edge_list = [edge];
  }
  context.triangulate();
  // All triangles of the sweep: the package's own list stops at the first line.
  const all = (context as unknown as { getMap(): poly2tri.Triangle[] }).getMap();
  const out = new Int32Array(3 * all.length);
  let n = 0;
  for (const triangle of all) {
    const a = (triangle.getPoint(0) as SweepPoint).number;
    const b = (triangle.getPoint(1) as SweepPoint).number;
    const c = (triangle.getPoint(2) as SweepPoint).number;
    // Points without a number are the two the sweep adds below everything.
    if (a === undefined || b === undefined || c === undefined) continue;
    out[n] = a;
    out[n + 1] = b;
    out[n + 2] = c;
    n += 3;
  }
  return n === 3 * (2 * count - 6) ? out.slice(0, n) : undefined;
}
