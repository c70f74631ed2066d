import { type Chain, type Curve, enclosedArea, type Point, partOf, reversed } from '../../mesher/index.ts';
import { boxOf } from '../importers/found-shape.ts';
import { nearestOn, placeAt, rulerOf } from './arc-length.ts';

/** How a shape becomes a loop or an inner wall of a drawing. */
export interface LoopWishes {
  /** Loops are closed with a straight line where the shape is open; inner walls stay as they are. */
  readonly closed: boolean;
  /** Ends nearer than this are one point. */
  readonly tolerance: number;
  /** 1 counter-clockwise, −1 clockwise; without it the loop runs as drawn. */
  readonly sense?: 1 | -1;
  /** Where s = 0 shall be; the start of the first curve without it. */
  readonly mark?: Point;
}

/** A chain, and what was done to close it, if that is worth telling. */
export interface LoopOfShape {
  readonly chain: Chain;
  readonly closing?: { readonly what: string; readonly at: Point };
}

/** Curves as a named chain with pieces numbered from 0. */
export function chainOf(name: string, curves: readonly Curve[]): Chain {
  return { name, pieces: curves.map((curve, tag) => ({ curve, tag })) };
}

/** Makes the chain of a shape: closed, turned round and begun at its mark as wished. */
export function loopOfShape(name: string, curves: readonly Curve[], wishes: LoopWishes): LoopOfShape {
  const { curves: whole, closing } = wishes.closed ? closedUp(curves, wishes.tolerance) : { curves };
  let chain = chainOf(name, whole);
  if (wishes.sense !== undefined && enclosedArea(chain) * wishes.sense < 0) chain = turnedRound(chain);
  if (wishes.mark) chain = begunAt(chain, wishes.mark, wishes.tolerance);
  return closing ? { chain, closing } : { chain };
}

/** The same loop run the other way from the same first point. */
function turnedRound(chain: Chain): Chain {
  return chainOf(chain.name, chain.pieces.map(({ curve }) => reversed(curve)).reverse());
}

interface ClosedUp {
  readonly curves: readonly Curve[];
  readonly closing?: { readonly what: string; readonly at: Point };
}

/**
 * Ends apart by rounding are made one point, silently: a path that returns to its first point before Z is ordinary.
 * Gaps up to the tolerance are left to healing, which reports them; others are joined by the straight line with which
 * SVG paints an open path.
 */
function closedUp(curves: readonly Curve[], tolerance: number): ClosedUp {
  const first = curves[0];
  const last = curves.at(-1);
  if (!first || !last) return { curves };
  const [low, high] = boxOf(curves);
  const rounding = 1e-12 * apart(low, high);
  const gap = apart(last.to, first.from);
  const before = curves.at(-2);
  if (gap === 0 && last.kind === 'line' && before) {
    const short = apart(last.from, last.to);
    // The closing line of Z after a point that repeats the first up to rounding; one of length 0 was drawn as a point.
    if (short > 0 && short <= rounding) {
      return { curves: [...curves.slice(0, -2), { ...before, to: first.from }] };
    }
  }
  if (gap === 0) return { curves };
  if (gap <= rounding) return { curves: [...curves.slice(0, -1), { ...last, to: first.from }] };
  if (gap <= tolerance) return { curves };
  return {
    curves: [...curves, { kind: 'line', from: last.to, to: first.from }],
    closing: { what: 'closed with a straight line', at: last.to },
  };
}

/** The closed chain cut at its point nearest to the mark and begun there. */
function begunAt(chain: Chain, mark: Point, tolerance: number): Chain {
  const ruler = rulerOf(chain);
  const { s } = nearestOn(ruler, mark);
  const joint = ruler.joints.findIndex((at) => Math.abs(at - s) <= tolerance);
  if (joint >= 0) {
    const turned = [...chain.pieces.slice(joint), ...chain.pieces.slice(0, joint)];
    return chainOf(
      chain.name,
      turned.map(({ curve }) => curve),
    );
  }
  const { piece, t } = placeAt(ruler, s);
  const cut = chain.pieces[piece]?.curve;
  if (!cut) return chain;
  const curves = chain.pieces.map(({ curve }) => curve);
  return chainOf(chain.name, [
    partOf(cut, t, 1),
    ...curves.slice(piece + 1),
    ...curves.slice(0, piece),
    partOf(cut, 0, t),
  ]);
}

function apart(a: Point, b: Point): number {
  return Math.hypot(a[0] - b[0], a[1] - b[1]);
}
