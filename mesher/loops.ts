import { curveLength, nearestParameter, pointAt, reversed } from './curves.ts';
import type { Chain, Curve, Domain, Healing, Piece, Point } from './domain.ts';
import { MesherError } from './errors.ts';
import { chainLength, enclosedArea } from './measure.ts';
import { placeText } from './place-text.ts';

/**
 * Puts single loops right: finite coordinates, gaps closed, repeated points dropped, winding as Domain promises, a
 * hole given twice taken once. What loops do to each other is looked at in arrange.ts and verdict.ts.
 */
export function tidyLoops(domain: Domain): { domain: Domain; healed: Healing[] } {
  const healed: Healing[] = [];
  for (const chain of [domain.outline, ...domain.holes, ...domain.innerWalls, ...domain.regions]) {
    requireFinite(chain);
  }
  const { tolerance } = domain;
  const outline = turned(tidied(domain.outline, true, tolerance, healed), 1, healed);
  const holes = domain.holes.map((hole) => turned(tidied(hole, true, tolerance, healed), -1, healed));
  const innerWalls = domain.innerWalls.map((wall) => tidied(wall, false, tolerance, healed));
  const regions = domain.regions.map((region) => tidied(region, true, tolerance, healed));
  return {
    domain: {
      outline,
      holes: withoutTwins(holes, tolerance, healed),
      innerWalls: innerWalls.filter((wall) => wall.pieces.length > 0),
      regions,
      tolerance,
    },
    healed,
  };
}

function requireFinite(chain: Chain): void {
  for (const { curve } of chain.pieces) {
    const numbers = [...curve.from, ...curve.to];
    if (curve.kind === 'arc')
      numbers.push(...curve.centre, ...curve.radii, curve.turned, curve.start, curve.sweep);
    if (curve.kind === 'cubic') numbers.push(...curve.controls[0], ...curve.controls[1]);
    if (numbers.every((n) => Number.isFinite(n) && Math.abs(n) < 1e150)) continue;
    const at = [curve.from, curve.to].filter((p) => p.every((n) => Number.isFinite(n)));
    throw new MesherError(
      'NOT_FINITE',
      `${chain.name} has a coordinate that is not a finite number (or is beyond 1e150)`,
      { loops: [chain.name], ...(at.length > 0 ? { at } : {}) },
      'Give finite coordinates.',
    );
  }
}

/** Gaps up to the tolerance closed, pieces without length dropped; the first point stays the first. */
function tidied(chain: Chain, closed: boolean, tolerance: number, healed: Healing[]): Chain {
  const kept: Piece[] = [];
  let start: Point | undefined;
  for (const piece of chain.pieces) {
    const from: Point = start ?? kept.at(-1)?.curve.to ?? piece.curve.from;
    const gap = Math.hypot(piece.curve.from[0] - from[0], piece.curve.from[1] - from[1]);
    if (gap > tolerance) throw openLoop(chain, from, piece.curve.from, gap);
    if (gap > 0 && start === undefined) healed.push({ what: 'gap closed', loop: chain.name, at: from });
    const curve = withEnds(piece.curve, from, piece.curve.to);
    if (hasLength(curve, tolerance)) {
      kept.push({ curve, tag: piece.tag });
      start = undefined;
    } else {
      healed.push({ what: 'repeated point', loop: chain.name, at: from });
      if (kept.length === 0) start = from;
    }
  }
  const first = kept[0]?.curve;
  const last = kept.at(-1);
  if (first && last) {
    const gap = Math.hypot(first.from[0] - last.curve.to[0], first.from[1] - last.curve.to[1]);
    if (gap > tolerance && closed) throw openLoop(chain, last.curve.to, first.from, gap);
    if (gap > 0 && gap <= tolerance) {
      healed.push({ what: 'gap closed', loop: chain.name, at: first.from });
      kept[kept.length - 1] = { curve: withEnds(last.curve, last.curve.from, first.from), tag: last.tag };
    }
  }
  if (closed && kept.length === 0) throw noArea(chain);
  return { name: chain.name, pieces: kept };
}

function withEnds(curve: Curve, from: Point, to: Point): Curve {
  return curve.from === from && curve.to === to ? curve : { ...curve, from, to };
}

/** A curve that returns to its start (a circle) has length though its ends are one point. */
function hasLength(curve: Curve, tolerance: number): boolean {
  const apart = Math.hypot(curve.to[0] - curve.from[0], curve.to[1] - curve.from[1]);
  return apart > tolerance || (curve.kind !== 'line' && curveLength(curve) > 4 * tolerance);
}

function openLoop(chain: Chain, a: Point, b: Point, gap: number): MesherError {
  return new MesherError(
    'LOOP_OPEN',
    `${chain.name} is not closed: a gap of ${gap.toPrecision(3)} at ${placeText(a)}`,
    { at: [a, b], loops: [chain.name] },
    'Close it, or raise the tolerance above the gap.',
  );
}

export function noArea(chain: Chain): MesherError {
  const at = chain.pieces[0] ? [chain.pieces[0].curve.from] : [];
  return new MesherError(
    'NO_AREA',
    `${chain.name} has no area: its points lie on one line`,
    { at, loops: [chain.name] },
    'Draw it as a closed shape with an inside.',
  );
}

/** The loop run so that its area has the sign asked for; s = 0 stays at the first point drawn. */
function turned(chain: Chain, sign: 1 | -1, healed: Healing[]): Chain {
  if (enclosedArea(chain) * sign >= 0) return chain;
  const first = chain.pieces[0];
  if (first) healed.push({ what: 'orientation', loop: chain.name, at: first.curve.from });
  const pieces = chain.pieces.map(({ curve, tag }) => ({ curve: reversed(curve), tag })).reverse();
  return { name: chain.name, pieces };
}

/** Holes that trace the same line as an earlier one are left out; `keptAs` in the report names that one. */
function withoutTwins(holes: readonly Chain[], tolerance: number, healed: Healing[]): Chain[] {
  const sized = holes.map((hole, index) => {
    return { hole, index, length: chainLength(hole), area: enclosedArea(hole) };
  });
  const byArea = [...sized].sort((a, b) => a.area - b.area || a.index - b.index);
  const dropped = new Set<number>();
  for (let i = 0; i < byArea.length; i++) {
    const one = byArea[i];
    if (!one || dropped.has(one.index)) continue;
    const slack = 4 * tolerance * one.length;
    for (let j = i + 1; j < byArea.length; j++) {
      const other = byArea[j];
      if (!other || other.area - one.area > slack) break;
      if (dropped.has(other.index) || Math.abs(other.length - one.length) > 1e-9 * one.length) continue;
      if (!sameTrace(one.hole, other.hole, tolerance)) continue;
      const [keep, drop] = one.index < other.index ? [one, other] : [other, one];
      dropped.add(drop.index);
      const at = drop.hole.pieces[0]?.curve.from ?? [0, 0];
      healed.push({ what: 'hole given twice', loop: drop.hole.name, at, keptAs: keep.hole.name });
      if (drop === one) break;
    }
  }
  return holes.filter((_, index) => !dropped.has(index));
}

function sameTrace(a: Chain, b: Chain, tolerance: number): boolean {
  const p = a.pieces[0]?.curve.from ?? [0, 0];
  const q = b.pieces[0]?.curve.from ?? [0, 0];
  if (Math.hypot(p[0] - q[0], p[1] - q[1]) > chainLength(a)) return false;
  return b.pieces.every(({ curve }) =>
    [0, 0.23, 0.5, 0.81].every((t) => {
      const p = pointAt(curve, t);
      return a.pieces.some((piece) => nearestParameter(piece.curve, p).distance <= 2 * tolerance);
    }),
  );
}
