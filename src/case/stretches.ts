import type { Chain, Curve, Point } from '../../mesher/index.ts';
import { around, nearestOn, type Ruler, rulerOf } from './arc-length.ts';
import type { Drawing, NamedWall, Span } from './case.ts';
import { type DrawingContext, readLength, readPoint } from './drawing-context.ts';
import { compileCondition } from './expression.ts';
import { joinKey } from './key-path.ts';
import { suggestName } from './nearest-name.ts';
import { common, intervalsOf, spansOf, totalLength } from './spans.ts';
import { whereHolds } from './where-holds.ts';

/** A stretch of wall as a case states it: a whole loop, or part of it in one of four ways. */
export interface RawExtent {
  readonly on?: unknown;
  readonly from?: unknown;
  readonly to?: unknown;
  readonly near?: unknown;
  readonly width?: unknown;
  readonly angles?: unknown;
  readonly where?: unknown;
  /** Where `from` and `to` count from, if not from the loop's own mark. */
  readonly mark?: unknown;
}

type Parts = NamedWall['parts'];

/**
 * The parts of loops that a wall names, by arc length; ends within the tolerance of a corner lie on it.
 *
 * @param key of the wall in the case
 * @throws what `ctx.fail` throws: no such loop, a stretch beyond it or without length
 */
export function resolveWallParts(
  extent: RawExtent,
  drawing: Drawing,
  ctx: DrawingContext,
  key: string,
): Parts {
  const chains = loopsNamed(extent.on, drawing, ctx, joinKey(key, 'on'));
  return new Resolving(chains.map(rulerOf), extent, drawing, ctx, key).parts();
}

/**
 * The part of a named wall that a layout singles out.
 *
 * @throws what `ctx.fail` throws, when the part reaches beyond the wall (a `where` is only looked at within it)
 */
export function narrowWallParts(
  wall: NamedWall,
  extent: RawExtent,
  drawing: Drawing,
  ctx: DrawingContext,
  key: string,
): Parts {
  const chains = wall.parts
    .map(({ loop }) => loopNamed(loop, drawing))
    .filter((chain) => chain !== undefined);
  const narrow = new Resolving(chains.map(rulerOf), extent, drawing, ctx, key).parts();
  const result: { loop: string; spans: Parts[number]['spans'] }[] = [];
  for (const part of narrow) {
    const chain = chains.find(({ name }) => name === part.loop);
    const own = wall.parts.find(({ loop }) => loop === part.loop);
    if (!chain || !own) continue;
    const { length, closed } = rulerOf(chain);
    const wished = intervalsOf(part.spans, length);
    const within = common(wished, intervalsOf(own.spans, length));
    const beyond = totalLength(wished) - totalLength(within);
    if (extent.where === undefined && beyond > slack(drawing, length)) {
      ctx.fail(
        'WALL_EXTENT_WRONG',
        `this part reaches ${show(beyond, ctx)} beyond the wall "${wall.name}"`,
        key,
        'Keep the part within the wall, or make the wall longer',
      );
    }
    if (within.length > 0) result.push({ loop: part.loop, spans: spansOf(within, length, closed) });
  }
  if (result.length === 0) {
    ctx.fail(
      'WALL_EXTENT_WRONG',
      `no part of "${wall.name}" is meant by this`,
      key,
      'Widen the condition, or leave it out',
    );
  }
  return result;
}

/** A loop or inner wall by its name; `outline` always means the outline. */
export function loopNamed(name: string, drawing: Drawing): Chain | undefined {
  if (name === 'outline') return drawing.outline;
  const kept = drawing.sameAs?.get(name) ?? name;
  return [drawing.outline, ...drawing.holes, ...drawing.innerWalls].find((chain) => chain.name === kept);
}

function loopsNamed(on: unknown, drawing: Drawing, ctx: DrawingContext, key: string): readonly Chain[] {
  if (on === 'all') return [drawing.outline, ...drawing.holes];
  const chain = typeof on === 'string' ? loopNamed(on, drawing) : undefined;
  if (chain) return [chain];
  const known = [
    'outline',
    'all',
    ...drawing.holes.map((c) => c.name),
    ...drawing.innerWalls.map((c) => c.name),
  ];
  const remedy =
    typeof on === 'string' ? suggestName(on, known, 'loop') : 'Give "on": the name of a loop or "outline"';
  return ctx.fail('NAME_UNKNOWN', `the drawing has no loop ${JSON.stringify(on ?? null)}`, key, remedy);
}

class Resolving {
  private readonly rulers: readonly Ruler[];
  private readonly extent: RawExtent;
  private readonly drawing: Drawing;
  private readonly ctx: DrawingContext;
  private readonly key: string;

  constructor(
    rulers: readonly Ruler[],
    extent: RawExtent,
    drawing: Drawing,
    ctx: DrawingContext,
    key: string,
  ) {
    this.rulers = rulers;
    this.extent = extent;
    this.drawing = drawing;
    this.ctx = ctx;
    this.key = key;
  }

  parts(): Parts {
    const { from, to, near, width, angles, where } = this.extent;
    const ways = [
      [from ?? to, '"from" and "to"'],
      [near ?? width, '"near" and "width"'],
      [angles, '"angles"'],
      [where, '"where"'],
    ].filter(([value]) => value !== undefined);
    if (ways.length > 1) {
      const named = ways.map(([, words]) => words).join(' and by ');
      this.fail(
        `the stretch is given by ${named}`,
        'Give it in one way, or the whole loop with none of them',
      );
    }
    if (where !== undefined) return this.byCondition(where);
    if (near !== undefined || width !== undefined) return this.byNearest(near, width);
    if (angles !== undefined) return this.one('"angles"', (ruler) => this.byAngles(ruler, angles));
    if (from !== undefined || to !== undefined) {
      return this.one('"from" and "to"', (ruler) => this.byLength(ruler, from, to));
    }
    return this.rulers.map(({ chain }) => ({ loop: chain.name, spans: 'whole' as const }));
  }

  private one(words: string, spans: (ruler: Ruler) => readonly Span[] | 'whole'): Parts {
    const [ruler, ...more] = this.rulers;
    if (!ruler || more.length > 0) return this.fail(`${words} need one loop`, 'Name it with "on"');
    return [{ loop: ruler.chain.name, spans: spans(ruler) }];
  }

  private byLength(ruler: Ruler, rawFrom: unknown, rawTo: unknown): readonly Span[] | 'whole' {
    if (rawFrom === undefined || rawTo === undefined) {
      const missing = rawFrom === undefined ? 'from' : 'to';
      return this.ctx.fail(
        'CASE_KEY_MISSING',
        `"${missing}" is missing`,
        this.key,
        'Give both "from" and "to"',
      );
    }
    const { length, closed } = ruler;
    const read = (raw: unknown, which: 'from' | 'to'): number => {
      const s = readLength(raw, joinKey(this.key, which), this.ctx);
      const over = slack(this.drawing, length);
      if (s >= -over && s <= length + over) return Math.min(length, Math.max(0, s));
      const words = `"${which}" is ${show(s, this.ctx)}, but "${ruler.chain.name}" is ${show(length, this.ctx)} long`;
      return this.fail(words, `Give a length from 0 to ${show(length, this.ctx)}`, which);
    };
    const from = read(rawFrom, 'from');
    const to = read(rawTo, 'to');
    if (!closed && from > to) {
      this.fail(
        `"from" lies behind "to" on "${ruler.chain.name}", which is open`,
        'Give the smaller one first: only a closed loop can be passed over its mark',
      );
    }
    const { mark } = this.extent;
    if (mark === undefined) return this.spanBetween(ruler, from, to);
    if (!closed) this.fail('an open inner wall has its mark at its first point', 'Leave "mark" out', 'mark');
    const base = nearestOn(ruler, this.upright(readPoint(mark, joinKey(this.key, 'mark'), this.ctx))).s;
    return to - from === length ? 'whole' : this.spanBetween(ruler, base + from, base + to);
  }

  private byNearest(rawNear: unknown, rawWidth: unknown): Parts {
    if (rawNear === undefined || rawWidth === undefined) {
      const missing = rawNear === undefined ? 'near' : 'width';
      return this.ctx.fail(
        'CASE_KEY_MISSING',
        `"${missing}" is missing`,
        this.key,
        'Give both "near" and "width"',
      );
    }
    const width = readLength(rawWidth, joinKey(this.key, 'width'), this.ctx);
    const near = this.upright(readPoint(rawNear, joinKey(this.key, 'near'), this.ctx));
    const places = this.rulers.map((ruler) => ({ ruler, ...nearestOn(ruler, near) }));
    const place = places.reduce((best, each) => (each.distance < best.distance ? each : best));
    const { ruler, s } = place;
    const { length, closed, chain } = ruler;
    const over = slack(this.drawing, length);
    if (!(width > 0)) this.fail(`a width of ${show(width, this.ctx)}`, 'Give a width above 0', 'width');
    if (width > length + over) {
      const words = `the width is ${show(width, this.ctx)}, but "${chain.name}" is ${show(length, this.ctx)} long`;
      this.fail(words, `Give a width up to ${show(length, this.ctx)}`, 'width');
    }
    if (width >= length - over) return [{ loop: chain.name, spans: 'whole' }];
    const [from, to] = [s - width / 2, s + width / 2];
    if (!closed && (from < -over || to > length + over)) {
      const least = Math.min(s, length - s);
      const words = `the stretch of ${show(width, this.ctx)} runs over an end of "${chain.name}", ${show(least, this.ctx)} from its middle`;
      this.fail(words, `Give a width up to ${show(2 * least, this.ctx)}, or "from" and "to"`, 'width');
    }
    const spans = closed
      ? this.spanBetween(ruler, from, to)
      : this.spanBetween(ruler, Math.max(0, from), Math.min(length, to));
    return [{ loop: chain.name, spans }];
  }

  private byAngles(ruler: Ruler, raw: unknown): readonly Span[] | 'whole' {
    const circle = circleOf(ruler.chain);
    if (!circle) {
      return this.fail(
        `"${ruler.chain.name}" is not a circle`,
        'Give the stretch by "from" and "to" or "near" and "width"',
        'angles',
      );
    }
    const at = joinKey(this.key, 'angles');
    if (!Array.isArray(raw) || raw.length !== 2) {
      return this.ctx.fail(
        'CASE_VALUE_WRONG',
        'two angles are needed',
        at,
        'Give [from, to] in degrees, such as [60, 120]',
      );
    }
    const [a, b] = (raw as unknown[]).map((each) => this.ctx.quantity(each, 'angle', at)) as [number, number];
    const turn = b - a;
    if (Math.abs(turn) === 360) return 'whole';
    if (turn === 0 || Math.abs(turn) > 360) {
      this.fail(
        `from ${a}° to ${b}° is no part of a circle`,
        'Give two different angles within one turn',
        'angles',
      );
    }
    // Counter-clockwise from the first to the second, whichever way the loop itself runs.
    const lengthTo = (degrees: number): number =>
      circle.sense * (degrees * (Math.PI / 180) - circle.start) * circle.radius;
    const [first, last] = circle.sense > 0 ? [a, b] : [b, a];
    return this.spanBetween(ruler, lengthTo(first), lengthTo(last));
  }

  private byCondition(raw: unknown): Parts {
    const at = joinKey(this.key, 'where');
    if (typeof raw !== 'string') {
      return this.ctx.fail(
        'CASE_VALUE_WRONG',
        'a condition is a text',
        at,
        'Give one such as "x < 0.5 and y > 0.1"',
      );
    }
    const { tolerance, writtenDown } = this.drawing;
    const written = compileCondition(raw, at, this.ctx.fail, tolerance);
    const condition = writtenDown ? (x: number, y: number): boolean => written(x, -y) : written;
    const parts: { loop: string; spans: readonly Span[] | 'whole' }[] = [];
    for (const ruler of this.rulers) {
      const { length, closed, chain } = ruler;
      const settled = whereHolds(ruler, condition).map(
        ([a, b]) => [this.onCorner(ruler, a), this.onCorner(ruler, b)] as const,
      );
      const kept = settled.filter(([a, b]) => b - a > 2 * slack(this.drawing, length));
      const spans = spansOf(kept, length, closed);
      if (spans === 'whole' || spans.length > 0) parts.push({ loop: chain.name, spans });
    }
    if (parts.length === 0) {
      const names = this.rulers.map(({ chain }) => `"${chain.name}"`).join(', ');
      this.fail(
        `the condition ${JSON.stringify(raw)} holds nowhere on ${names}`,
        'Check its numbers against the drawing',
        'where',
      );
    }
    return parts;
  }

  /** The span between two lengths, each taken around a closed loop and put on a corner within the tolerance. */
  private spanBetween(ruler: Ruler, from: number, to: number): readonly Span[] | 'whole' {
    const { length, closed } = ruler;
    const over = slack(this.drawing, length);
    if (from <= over && to >= length - over && Math.abs(to - from - length) <= over) return 'whole';
    const settle = (s: number): number => this.onCorner(ruler, closed ? around(s, length) : s);
    const [start, end] = [settle(from), settle(to)];
    // On a closed loop the mark is 0 as a beginning and the whole length as an end.
    const low = closed && start === length ? 0 : start;
    const high = closed && end === 0 ? length : end;
    const run = closed ? around(to - from, length) : to - from;
    if (low === high || run <= over || length - run <= over) {
      this.fail('the stretch has no length', 'Give two different ends, or the whole loop with none');
    }
    return [{ from: low, to: high }];
  }

  /** `s`, or the length of the joint nearest to it when that is within the tolerance. */
  private onCorner(ruler: Ruler, s: number): number {
    const { joints, length } = ruler;
    let low = 0;
    let high = joints.length - 1;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if ((joints[middle] ?? 0) <= s) low = middle;
      else high = middle;
    }
    const over = slack(this.drawing, length);
    for (const joint of [joints[low] ?? 0, joints[high] ?? length])
      if (Math.abs(joint - s) <= over) return joint;
    return s;
  }

  private upright([x, y]: Point): Point {
    return [x, this.drawing.writtenDown ? 0 - y : y];
  }

  private fail(what: string, remedy: string, under?: string): never {
    return this.ctx.fail(
      'WALL_EXTENT_WRONG',
      what,
      under === undefined ? this.key : joinKey(this.key, under),
      remedy,
    );
  }
}

/** The tolerance, and never less than what rounding of a sum of lengths may be. */
function slack(drawing: Drawing, length: number): number {
  return Math.max(drawing.tolerance, 1e-13 * length);
}

/** A chain that is one circle, wherever it begins and whichever way it runs. */
function circleOf(chain: Chain): { start: number; radius: number; sense: 1 | -1 } | undefined {
  const first = chain.pieces[0]?.curve;
  if (first?.kind !== 'arc') return undefined;
  const near = 1e-9 * first.radii[0];
  const isPart = (curve: Curve): boolean =>
    curve.kind === 'arc' &&
    Math.abs(curve.radii[0] - first.radii[0]) <= near &&
    Math.abs(curve.radii[1] - first.radii[0]) <= near &&
    Math.hypot(curve.centre[0] - first.centre[0], curve.centre[1] - first.centre[1]) <= near;
  const sweep = chain.pieces.reduce((sum, { curve }) => sum + (curve.kind === 'arc' ? curve.sweep : 0), 0);
  if (!chain.pieces.every(({ curve }) => isPart(curve)) || Math.abs(Math.abs(sweep) - 2 * Math.PI) > 1e-6) {
    return undefined;
  }
  return { start: first.start + first.turned, radius: first.radii[0], sense: sweep > 0 ? 1 : -1 };
}

function show(length: number, ctx: DrawingContext): string {
  const unit = ctx.units.length;
  return `${Number(length.toPrecision(6))}${unit === '' ? '' : ` ${unit}`}`;
}
