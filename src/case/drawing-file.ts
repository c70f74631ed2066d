import type { Point } from '../../mesher/index.ts';
import { mapCurve } from '../importers/affine.ts';
import { boxOf, type FoundDrawing, type FoundShape } from '../importers/found-shape.ts';
import { readDrawing } from '../importers/registry.ts';
import { tellRoles } from '../importers/roles.ts';
import { type DrawingContext, readPoint } from './drawing-context.ts';
import { joinKey } from './key-path.ts';
import { suggestName } from './nearest-name.ts';
import { readShape, type Shape } from './shapes.ts';
import { smallestGap } from './smallest-gap.ts';

/** The keys of a `drawing` that names a file. */
export interface FileDrawing {
  readonly file?: unknown;
  readonly take?: unknown;
  readonly outline?: unknown;
  /** Names given to shapes of the file, or further shapes typed in; other closed shapes inside are holes too. */
  readonly holes?: unknown;
  readonly y?: unknown;
  readonly regions?: unknown;
  readonly innerWalls?: unknown;
  readonly ignore?: unknown;
  readonly scale?: unknown;
}

export interface FilePart {
  readonly name: string;
  readonly role: 'outline' | 'hole' | 'inner wall' | 'region';
  readonly key: string;
  readonly shape: Shape;
  readonly hasWinding: false;
}

export interface ShapesOfFile {
  readonly parts: readonly FilePart[];
  readonly taken: readonly string[];
  readonly leftOut: readonly string[];
  readonly warnings: readonly string[];
}

/**
 * Reads the file a drawing names and says what each of its shapes stands for, in the case's length unit.
 *
 * @throws what `ctx.fail` throws: no such shape, no scale, an outline that cannot be told
 */
export function shapesOfFile(raw: FileDrawing, ctx: DrawingContext): ShapesOfFile {
  const name = textOf(raw.file, 'drawing.file', ctx);
  if (!ctx.readFile) {
    return ctx.fail(
      'FILE_NOT_READ',
      `${name} cannot be read here`,
      'drawing.file',
      'Send the drawing with the case',
    );
  }
  const found = readDrawing(ctx.readFile(name, 'drawing.file'), name);
  return new Taking(found, name, raw, ctx).run();
}

class Taking {
  private readonly found: FoundDrawing;
  private readonly file: string;
  private readonly raw: FileDrawing;
  private readonly ctx: DrawingContext;
  /** Shapes typed in beside the file, by what stands for them among the found ones. */
  private readonly typed = new Map<FoundShape, Shape>();
  private readonly parts: FilePart[] = [];
  private readonly taken: string[] = [];
  private readonly leftOut: string[] = [];
  private readonly warnings: string[] = [];
  private readonly scale: { readonly factor: number; readonly words: string };

  constructor(found: FoundDrawing, file: string, raw: FileDrawing, ctx: DrawingContext) {
    this.found = found;
    this.file = file;
    this.raw = raw;
    this.ctx = ctx;
    this.scale = scaleOf(found, file, raw, ctx);
  }

  run(): ShapesOfFile {
    const ignored = this.ignored();
    const pool = this.taking().filter((shape) => !ignored.has(shape));
    const holes = this.named('holes');
    const innerWalls = this.named('innerWalls');
    const regions = this.named('regions');
    const spoken = new Set([...holes, ...innerWalls, ...regions].map(({ shape }) => shape));
    const { outline: wanted } = this.raw;
    const outline = wanted === undefined ? undefined : this.shapeFor('outline', wanted, 'drawing.outline');
    if (outline && !outline.closed) this.refuseOpen(outline, 'drawing.outline');
    const candidates = pool.filter((shape) => !spoken.has(shape) && shape !== outline);
    const roles = tellRoles(outline ? [...candidates, outline] : candidates, outline);
    if ('unclear' in roles) return this.refuseUnclear(roles.unclear, roles.candidates);
    if (roles.proposed) {
      const line = `outline proposed: "${roles.outline.name}" of ${this.file}; say "outline" in the drawing to settle it`;
      this.warnings.push(line);
    }
    this.add(loopName(roles.outline, 'outline'), 'outline', roles.outline, 'drawing.outline');
    this.addHoles(roles.holes);
    for (const { name, shape, key } of holes) this.add(name, 'hole', this.closed(shape, key), key);
    for (const { name, shape, key } of innerWalls) this.add(name, 'inner wall', shape, key);
    for (const { name, shape, key } of regions) this.add(name, 'region', this.closed(shape, key), key);
    this.reportLeftOut(pool, ignored, new Set([...spoken, roles.outline]), roles.others);
    this.taken.push(`scale: ${this.scale.words}`, `coordinates: ${this.found.frame}`);
    const gap = smallestGap(this.parts.filter(({ role }) => role !== 'region'));
    if (gap) this.taken.push(`smallest gap: ${this.show(gap.gap)}, between "${gap.between.join('" and "')}"`);
    return { parts: this.parts, taken: this.taken, leftOut: this.leftOut, warnings: this.warnings };
  }

  private addHoles(holes: readonly FoundShape[]): void {
    let unnamed = 0;
    for (const shape of holes) {
      if (!shape.isNamed) unnamed++;
      this.add(loopName(shape, `hole ${unnamed}`), 'hole', shape, 'drawing.file');
    }
  }

  private add(name: string, role: FilePart['role'], found: FoundShape, key: string): void {
    const shape = this.typed.get(found) ?? scaled(found, this.scale.factor);
    const { curves } = shape;
    this.parts.push({ name, role, key, shape, hasWinding: false });
    const [low, high] = boxOf(curves);
    const size = `${this.show(high[0] - low[0], false)} × ${this.show(high[1] - low[1])}`;
    this.taken.push(`"${name}": ${role}, ${size} (${placeOf(found, name)})`);
  }

  /** The shapes of the groups that `take` names, or all. */
  private taking(): readonly FoundShape[] {
    const { take } = this.raw;
    const { shapes } = this.found;
    if (take === undefined) return shapes;
    return listOf(take, 'drawing.take', this.ctx).flatMap((wanted) =>
      this.groupOrShape(wanted, 'drawing.take'),
    );
  }

  private ignored(): ReadonlySet<FoundShape> {
    const { ignore } = this.raw;
    if (ignore === undefined) return new Set();
    const names = listOf(ignore, 'drawing.ignore', this.ctx);
    return new Set(names.flatMap((name) => this.groupOrShape(name, 'drawing.ignore')));
  }

  private groupOrShape(name: string, key: string): readonly FoundShape[] {
    const { shapes } = this.found;
    const group = shapes.filter((shape) => shape.groups.includes(name));
    const own = shapes.filter((shape) => shape.name === name);
    if (group.length + own.length > 0) return [...own, ...group.filter((shape) => !own.includes(shape))];
    const known = new Set(shapes.flatMap((shape) => [...shape.groups, shape.name]));
    const remedy = suggestName(name, known, 'shape or group');
    return this.ctx.fail('NAME_UNKNOWN', `${this.file} has no shape or group "${name}"`, key, remedy);
  }

  private named(
    group: 'holes' | 'innerWalls' | 'regions',
  ): { name: string; shape: FoundShape; key: string }[] {
    const raw = this.raw[group];
    if (raw === undefined) return [];
    if (typeof raw !== 'object' || raw === null || Array.isArray(raw)) {
      const remedy = 'Give { "name in the case": "shape in the file" }';
      return this.ctx.fail(
        'CASE_VALUE_WRONG',
        `${group} of a file are given by name`,
        `drawing.${group}`,
        remedy,
      );
    }
    return Object.entries(raw).map(([name, wanted]) => {
      const key = joinKey('drawing', group, name);
      return { name, shape: this.shapeFor(name, wanted, key), key };
    });
  }

  /** A shape of the file by its name, or one typed in, which lies in the case's own coordinates. */
  private shapeFor(name: string, wanted: unknown, key: string): FoundShape {
    if (typeof wanted !== 'string') {
      const { y } = this.raw;
      const shape = readShape(wanted, key, y === 'up' || y === 'down' ? y : undefined, this.ctx);
      const k = 1 / this.scale.factor;
      const found: FoundShape = {
        name,
        isNamed: true,
        element: shape.kind,
        line: 0,
        groups: [],
        curves: shape.curves.map((curve) => mapCurve([k, 0, 0, k, 0, 0], curve)),
        closed: shape.closed || shape.kind === 'path',
      };
      this.typed.set(found, shape);
      return found;
    }
    const shape = this.found.shapes.find((each) => each.name === wanted);
    if (shape) return shape;
    const known = this.found.shapes.map((each) => each.name);
    const remedy = suggestName(wanted, known, 'shape');
    return this.ctx.fail('NAME_UNKNOWN', `${this.file} has no shape "${wanted}"`, key, remedy);
  }

  private closed(shape: FoundShape, key: string): FoundShape {
    return shape.closed ? shape : this.refuseOpen(shape, key);
  }

  private refuseOpen(shape: FoundShape, key: string): never {
    const ends = [shape.curves[0]?.from, shape.curves.at(-1)?.to].map((p) => (p ? this.show2(p) : ''));
    return this.ctx.fail(
      'LOOP_OPEN',
      `"${shape.name}" (${this.file}, ${placeOf(shape, shape.name)}) is an open line from ${ends.join(' to ')}`,
      key,
      'Close it in the drawing, or fill it',
    );
  }

  private refuseUnclear(unclear: string, candidates: readonly FoundShape[]): never {
    const names = candidates.slice(0, 6).map((shape) => `"${shape.name}" (line ${shape.line})`);
    return this.ctx.fail(
      'DRAWING_OUTLINE_UNCLEAR',
      `the outline in ${this.file} cannot be told: ${unclear}`,
      'drawing.outline',
      names.length > 0
        ? `Say which it is: "outline": one of ${names.join(', ')}`
        : 'Draw the compartment as a closed line',
    );
  }

  private reportLeftOut(
    pool: readonly FoundShape[],
    ignored: ReadonlySet<FoundShape>,
    spoken: ReadonlySet<FoundShape>,
    others: readonly { readonly shape: FoundShape; readonly why: string }[],
  ): void {
    const tell = (shape: FoundShape, why: string): number =>
      this.leftOut.push(`"${shape.name}" (${placeOf(shape, shape.name)}): ${why}`);
    for (const { shape, why } of others) tell(shape, why);
    for (const shape of this.found.shapes) {
      if (spoken.has(shape)) continue;
      if (ignored.has(shape)) tell(shape, 'ignored');
      else if (!pool.includes(shape)) tell(shape, 'not in what is taken');
      else if (!shape.closed) tell(shape, 'open line; name it under "innerWalls" to take it');
    }
    this.leftOut.push(...this.found.leftOut);
  }

  private show(length: number, withUnit = true): string {
    const unit = this.ctx.units.length;
    return `${Number(length.toPrecision(4))}${withUnit && unit !== '' ? ` ${unit}` : ''}`;
  }

  private show2(point: Point): string {
    return `(${this.show(point[0] * this.scale.factor, false)}, ${this.show(point[1] * this.scale.factor, false)})`;
  }
}

/** Case length per drawing unit: from `scale`, else the page; never guessed. */
function scaleOf(
  found: FoundDrawing,
  file: string,
  raw: FileDrawing,
  ctx: DrawingContext,
): { factor: number; words: string } {
  const { units } = ctx;
  const say = (factor: number, from: string): { factor: number; words: string } => ({
    factor,
    words: `one drawing unit is ${Number(factor.toPrecision(6))}${units.length === '' ? '' : ` ${units.length}`}, from ${from}`,
  });
  if (raw.scale !== undefined) {
    const { between, is } = raw.scale as { readonly between?: unknown; readonly is?: unknown };
    if (!Array.isArray(between) || between.length !== 2 || is === undefined) {
      const remedy = 'Give { "between": [[x, y], [x, y]], "is": "1.2 mm" }, places as written in the file';
      ctx.fail(
        'CASE_VALUE_WRONG',
        'a scale is two places of the drawing and their distance',
        'drawing.scale',
        remedy,
      );
    }
    const [a, b] = (between as unknown[]).map((each) => readPoint(each, 'drawing.scale.between', ctx));
    const drawn = a && b ? Math.hypot(a[0] - b[0], a[1] - b[1]) : 0;
    const real = ctx.quantity(is, 'length', 'drawing.scale.is');
    if (!(drawn > 0 && real > 0)) {
      ctx.fail(
        'VALUE_OUT_OF_RANGE',
        'the scale has no length',
        'drawing.scale',
        'Give two places apart and a length above 0',
      );
    }
    return say(real / drawn, 'the scale in the case');
  }
  const physical = units.length === '' ? undefined : found.physicalScale;
  if (physical) {
    return say(physical.value * ctx.quantity(`1 ${physical.unit}`, 'length', 'drawing.file'), physical.from);
  }
  const box = boxOf(found.shapes.flatMap((shape) => shape.curves));
  const wide = Number((box[1][0] - box[0][0]).toPrecision(4));
  return ctx.fail(
    'DRAWING_SCALE_MISSING',
    `${file} does not say how long its units are (all shapes together are ${wide} units wide)`,
    'drawing.scale',
    'Add "scale": { "between": [[x, y], [x, y]], "is": "1.2 mm" } with two places as written in the file',
  );
}

function scaled(found: FoundShape, k: number): Shape {
  return {
    kind: 'path',
    curves: found.curves.map((curve) => mapCurve([k, 0, 0, k, 0, 0], curve)),
    closed: found.closed,
  };
}

function loopName(shape: FoundShape, unnamed: string): string {
  return shape.isNamed ? shape.name : unnamed;
}

/** Element and line, and the name in the file where the case calls it something else. */
function placeOf(shape: FoundShape, name: string): string {
  if (shape.line === 0) return `${shape.element}, typed in`;
  return `${shape.name === name ? '' : `"${shape.name}", `}${shape.element}, line ${shape.line}`;
}

function textOf(raw: unknown, key: string, ctx: DrawingContext): string {
  return typeof raw === 'string'
    ? raw
    : ctx.fail('CASE_VALUE_WRONG', 'a name is a text', key, 'Give it in quotes');
}

function listOf(raw: unknown, key: string, ctx: DrawingContext): string[] {
  return (Array.isArray(raw) ? raw : [raw]).map((each) => textOf(each, key, ctx));
}
