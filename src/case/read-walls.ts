import { rulerOf } from './arc-length.ts';
import type { Assignment, Drawing, Layout, NamedWall, WallKind } from './case.ts';
import type { CaseContext } from './case-context.ts';
import { exampleOf } from './dimensions.ts';
import { joinKey } from './key-path.ts';
import { suggestName } from './nearest-name.ts';
import type { RawCase, RawExtent, RawKind, RawLayout } from './schema.ts';
import { entriesOf } from './schema-parts.ts';
import { common, intervalsOf, totalLength } from './spans.ts';
import { loopNamed, narrowWallParts, resolveWallParts } from './stretches.ts';

/**
 * Reads the named walls.
 *
 * @throws {CaseError} a loop that is not there, a stretch that is refused
 */
export const readWalls = (raw: RawCase['walls'], drawing: Drawing, ctx: CaseContext): NamedWall[] =>
  entriesOf(raw).map(([name, wall]) => ({
    name,
    as: wall.as ?? 'pad',
    parts: resolveWallParts(wall, drawing, ctx, joinKey('walls', name)),
  }));

/** What the layouts of a case are read against. */
export interface LayoutSurroundings {
  readonly drawing: Drawing;
  readonly walls: readonly NamedWall[];
  /** Whether the drawing gives a depth, which catching from below needs. */
  readonly hasDepth: boolean;
  /** Whether particles can be lost inside, so that a layout without exits has an answer. */
  readonly hasLoss: boolean;
}

/**
 * Reads the layouts. Two walls that share a stretch in one layout are refused.
 *
 * @throws {CaseError} names, kinds and extents that are refused
 */
export function readLayouts(raw: RawCase['layouts'], around: LayoutSurroundings, ctx: CaseContext): Layout[] {
  const entries = entriesOf(raw);
  if (entries.length === 0) {
    ctx.fail(
      'CASE_VALUE_WRONG',
      'the case has no layout',
      'layouts',
      'Give one: { "first": { "left pad": "absorbing" } }',
    );
  }
  return entries.map(([name, layout]) => readLayout(name, layout, around, ctx));
}

function readLayout(name: string, raw: RawLayout, around: LayoutSurroundings, ctx: CaseContext): Layout {
  const { drawing, walls } = around;
  const key = joinKey('layouts', name);
  const { without = [] } = raw;
  readWithout(without, key, drawing, ctx);
  const assignments: Assignment[] = [];
  const floors: { region: string; kappa: ReturnType<CaseContext['positive']> }[] = [];
  const kinds = entriesOf(raw).filter((entry): entry is [string, RawKind] => entry[0] !== 'without');
  for (const [of, kind] of kinds) {
    const at = joinKey(key, of);
    const wall = walls.find((each) => each.name === of);
    if (typeof kind === 'object' && 'floor' in kind) {
      refuseFloor(of, at, around, ctx);
      const kappa = ctx.positive(kind.floor, 'reactivity', joinKey(at, 'floor'));
      if (kappa.within !== undefined) ctx.notYet('within', joinKey(at, 'floor'));
      floors.push({ region: of, kappa });
      continue;
    }
    if (wall === undefined) {
      const isRegion = drawing.regions.some((region) => region.name === of);
      const remedy = isRegion
        ? 'A region can only catch from below: { "floor": "2e-3 mm/s" }'
        : suggestName(
            of,
            walls.map((each) => each.name),
            'wall',
          );
      return ctx.fail('NAME_UNKNOWN', `no wall is called ${JSON.stringify(of)}`, at, remedy);
    }
    const assignment = readAssignment(wall, kind, at, drawing, ctx);
    refuseLeftOut(assignment, without, at, ctx);
    assignments.push(assignment);
  }
  refuseOverlaps(assignments, key, drawing, ctx);
  const catches =
    floors.length > 0 ||
    assignments.some(({ kind }) => kind.kind === 'absorbing' || kind.kind === 'partlyAbsorbing');
  if (!catches && !around.hasLoss) {
    ctx.warnings.push(
      `layout ${JSON.stringify(name)}: nothing catches, so the time is endless; make a wall absorbing`,
    );
  }
  return {
    name,
    assignments,
    without,
    ...(floors.length === 0 ? {} : { floors }),
  };
}

function readWithout(without: readonly string[], key: string, drawing: Drawing, ctx: CaseContext): void {
  const holes = drawing.holes.map((hole) => hole.name);
  for (const [i, name] of without.entries()) {
    if (holes.includes(name) || drawing.sameAs?.has(name) === true) continue;
    ctx.fail(
      'NAME_UNKNOWN',
      `no hole is called ${JSON.stringify(name)}`,
      joinKey(key, 'without', i),
      suggestName(name, holes, 'hole'),
    );
  }
}

function refuseFloor(of: string, key: string, around: LayoutSurroundings, ctx: CaseContext): void {
  const regions = around.drawing.regions.map((region) => region.name);
  if (regions.includes(of)) {
    if (around.hasDepth) return;
    ctx.fail(
      'FLOOR_WITHOUT_DEPTH',
      `${JSON.stringify(of)} catches from below, and the drawing has no "depth"`,
      key,
      `Add one to "drawing", such as "depth": ${exampleOf('length', ctx.units)}: what is caught per time is the reactivity over the depth`,
    );
  }
  const isWall = around.walls.some((wall) => wall.name === of);
  const remedy = isWall
    ? 'Give a wall a kind such as { "partlyAbsorbing": "2e-3 mm/s" }'
    : suggestName(of, regions, 'region');
  ctx.fail(
    'NAME_UNKNOWN',
    `only a region has a floor, and no region is called ${JSON.stringify(of)}`,
    key,
    remedy,
  );
}

/** A wall none of which is there in this layout. */
function refuseLeftOut(
  { wall }: Assignment,
  without: readonly string[],
  key: string,
  ctx: CaseContext,
): void {
  if (wall.parts.length === 0 || !wall.parts.every((part) => without.includes(part.loop))) return;
  const loops = wall.parts.map((part) => JSON.stringify(part.loop)).join(', ');
  ctx.fail(
    'WALL_KIND_NOT_POSSIBLE',
    `the wall lies on ${loops}, which this layout leaves out`,
    key,
    'Take the wall out of the layout, or the hole out of "without"',
  );
}

function readAssignment(
  wall: NamedWall,
  raw: Exclude<RawKind, { floor: unknown }>,
  key: string,
  drawing: Drawing,
  ctx: CaseContext,
): Assignment {
  if (typeof raw === 'string') return { wall, kind: { kind: raw } };
  const form = 'absorbing' in raw ? 'absorbing' : 'partlyAbsorbing' in raw ? 'partlyAbsorbing' : 'permeable';
  const at = joinKey(key, form);
  if ('absorbing' in raw) {
    return { wall: narrowed(wall, raw.absorbing, at, drawing, ctx), kind: { kind: 'absorbing' } };
  }
  const written = 'partlyAbsorbing' in raw ? raw.partlyAbsorbing : raw.permeable;
  const stated = ctx.stated(written, 'reactivity', at);
  if (!(stated.value > 0)) {
    ctx.fail(
      'VALUE_OUT_OF_RANGE',
      `${form} is ${stated.value}, which is not above 0`,
      key,
      `Give a value such as "2e-3 ${ctx.units.length === '' ? '' : `${ctx.units.length}/${ctx.units.time}`}`.trim() +
        '", or make the wall "reflecting"',
    );
  }
  if (stated.within !== undefined) ctx.notYet('within', at);
  const kind: WallKind =
    form === 'partlyAbsorbing' ? { kind: form, kappa: stated } : { kind: 'permeable', permeability: stated };
  if (form === 'permeable') refusePermeable(wall, key, drawing, ctx);
  return { wall: typeof written === 'object' ? narrowed(wall, written, at, drawing, ctx) : wall, kind };
}

function refusePermeable(wall: NamedWall, key: string, drawing: Drawing, ctx: CaseContext): void {
  const inner = drawing.innerWalls.map((chain) => chain.name);
  const other = wall.parts.find((part) => !inner.includes(part.loop))?.loop;
  if (other === undefined) return;
  ctx.fail(
    'WALL_KIND_NOT_POSSIBLE',
    `only an inner wall can be permeable, and this wall lies on ${JSON.stringify(other)}`,
    key,
    'Draw it under "innerWalls", or give { "partlyAbsorbing": … }',
  );
}

/** The wall cut down to an extent of its own in this layout; the whole wall where none is given. */
function narrowed(
  wall: NamedWall,
  extent: RawExtent,
  key: string,
  drawing: Drawing,
  ctx: CaseContext,
): NamedWall {
  const given = ['from', 'to', 'near', 'width', 'angles', 'where'].some((name) => name in extent);
  return given ? { ...wall, parts: narrowWallParts(wall, extent, drawing, ctx, key) } : wall;
}

/** Two walls on one stretch: which of them is meant cannot be told. */
function refuseOverlaps(
  assignments: readonly Assignment[],
  key: string,
  drawing: Drawing,
  ctx: CaseContext,
): void {
  for (const [i, { wall }] of assignments.entries()) {
    for (const { wall: other } of assignments.slice(0, i)) {
      for (const part of wall.parts) {
        const same = other.parts.find((each) => each.loop === part.loop);
        const chain = loopNamed(part.loop, drawing);
        if (same === undefined || chain === undefined) continue;
        const { length } = rulerOf(chain);
        const shared = common(intervalsOf(part.spans, length), intervalsOf(same.spans, length));
        const first = shared[0];
        if (first === undefined || totalLength(shared) <= Math.max(drawing.tolerance, 1e-12 * length))
          continue;
        const [from, to] = first.map((s) => Number(s.toPrecision(6)));
        ctx.fail(
          'WALL_KINDS_OVERLAP',
          `${JSON.stringify(other.name)} and ${JSON.stringify(wall.name)} share a stretch of ${JSON.stringify(part.loop)}, from ${from} to ${to} along it`,
          joinKey(key, wall.name),
          'Take one of them out of this layout, or shorten one',
        );
      }
    }
  }
}
