import {
  type Chain,
  curveLength,
  nearestParameter,
  type Point,
  parameterAtLength,
  pointAt,
} from '../../mesher/index.ts';

/** A loop or inner wall with the arc length at each joint of its pieces. */
export interface Ruler {
  readonly chain: Chain;
  /** Length before each piece, and at last the whole length; one more than there are pieces. */
  readonly joints: readonly number[];
  readonly length: number;
  readonly closed: boolean;
}

const known = new WeakMap<Chain, Ruler>();

/** The ruler along a chain, measured once. */
export function rulerOf(chain: Chain): Ruler {
  const made = known.get(chain);
  if (made) return made;
  const joints = [0];
  let length = 0;
  for (const { curve } of chain.pieces) {
    length += curveLength(curve);
    joints.push(length);
  }
  const ruler = { chain, joints, length, closed: isClosed(chain) };
  known.set(chain, ruler);
  return ruler;
}

/** Whether a chain ends exactly where it begins. */
export function isClosed(chain: Chain): boolean {
  const from = chain.pieces[0]?.curve.from;
  const to = chain.pieces.at(-1)?.curve.to;
  return from !== undefined && to !== undefined && from[0] === to[0] && from[1] === to[1];
}

/** The piece that holds arc length `s`, and the parameter on it; a joint belongs to the piece that begins there. */
export function placeAt(ruler: Ruler, s: number): { readonly piece: number; readonly t: number } {
  const { joints, chain } = ruler;
  let low = 0;
  let high = chain.pieces.length;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if ((joints[middle] ?? 0) <= s) low = middle;
    else high = middle;
  }
  const curve = chain.pieces[low]?.curve;
  return { piece: low, t: curve ? parameterAtLength(curve, s - (joints[low] ?? 0)) : 0 };
}

/** The point at arc length `s`, taken around the loop when it is closed. */
export function pointAtLength(ruler: Ruler, s: number): Point {
  const { piece, t } = placeAt(ruler, ruler.closed ? around(s, ruler.length) : s);
  const curve = ruler.chain.pieces[piece]?.curve;
  return curve ? pointAt(curve, t) : [Number.NaN, Number.NaN];
}

/** Arc length at a parameter of a piece. */
export function lengthAt(ruler: Ruler, piece: number, t: number): number {
  const curve = ruler.chain.pieces[piece]?.curve;
  const before = ruler.joints[piece] ?? 0;
  if (!curve || t === 0) return before;
  return t === 1 ? (ruler.joints[piece + 1] ?? before) : before + curveLength(curve, 0, t);
}

/** The nearest place of a chain to a point. */
export function nearestOn(ruler: Ruler, point: Point): { readonly s: number; readonly distance: number } {
  let best = { piece: 0, t: 0, distance: Number.POSITIVE_INFINITY };
  ruler.chain.pieces.forEach(({ curve }, piece) => {
    const { t, distance } = nearestParameter(curve, point);
    if (distance < best.distance) best = { piece, t, distance };
  });
  return { s: lengthAt(ruler, best.piece, best.t), distance: best.distance };
}

/** `s` brought into 0 … `length` (length itself excluded). */
export function around(s: number, length: number): number {
  const turned = s - Math.floor(s / length) * length;
  return turned < length ? turned : 0;
}
