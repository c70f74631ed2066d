import {
  type Chain,
  type Domain,
  type Healing,
  healDomain,
  MesherError,
  type Point,
} from '../../mesher/index.ts';
import { boxOf } from '../importers/found-shape.ts';
import type { Drawing } from './case.ts';
import type { DrawingContext } from './drawing-context.ts';
import { type FileDrawing, shapesOfFile } from './drawing-file.ts';
import { joinKey } from './key-path.ts';
import { loopOfShape } from './loop-of-shape.ts';
import { readShape, type Shape } from './shapes.ts';

/** The `drawing` part of a case before its shapes are read. */
export interface RawDrawing extends FileDrawing {
  readonly y?: unknown;
  readonly outline?: unknown;
  readonly holes?: unknown;
  readonly innerWalls?: unknown;
  readonly regions?: unknown;
  readonly tolerance?: unknown;
}

/** Default tolerance ÷ size of the drawing (CASE.md). */
export const defaultTolerance = { typed: 1e-12, fromFile: 1e-9 } as const;

/** What a shape stands for, with the key it is written under. */
interface Part {
  readonly name: string;
  readonly role: 'outline' | 'hole' | 'inner wall' | 'region';
  readonly key: string;
  readonly shape: Shape;
  /** Whether the person drew it in a direction of their own that a report should mention. */
  readonly hasWinding: boolean;
}

/** Names that no loop may have: they mean something else in a case. */
const reserved: ReadonlySet<string> = new Set(['all', 'everywhere', 'outline', 'lost']);

/**
 * The drawing of a case in its length unit, y upwards, healed as a whole.
 *
 * @param raw the case's `drawing`, typed shapes or a file
 * @throws what `ctx.fail` throws: a shape not understood, loops that cross, overlap or lie outside, with the places;
 *   {CaseError} what a drawing's reader finds wrong, with file and line
 */
export function buildDrawing(raw: RawDrawing, ctx: DrawingContext): Drawing {
  const down = raw.y === 'down';
  const file = raw.file === undefined ? undefined : shapesOfFile(raw, ctx);
  const parts = file ? file.parts : typedParts(raw, ctx);
  refuseNames(parts, ctx);
  const tolerance = toleranceOf(raw, parts, ctx);
  const closings: Healing[] = [];
  const chains = (role: Part['role']): Chain[] =>
    parts.filter((part) => part.role === role).map((part) => chainFor(part, tolerance, ctx, closings));
  const outline = chains('outline')[0];
  if (!outline)
    return ctx.fail('CASE_KEY_MISSING', 'the drawing has no outline', 'drawing.outline', 'Give one');
  const drawn: Domain = {
    outline,
    holes: chains('hole'),
    innerWalls: chains('inner wall'),
    regions: chains('region'),
    tolerance,
  };
  const { domain, healed } = healedOrRefused(drawn, parts, down, file?.warnings ?? [], ctx);
  const sameAs = new Map(
    healed.flatMap(({ loop, keptAs }) => (keptAs === undefined ? [] : [[loop, keptAs] as const])),
  );
  return {
    ...domain,
    healed: [...closings, ...healed],
    taken: file?.taken ?? [],
    leftOut: file?.leftOut ?? [],
    warnings: file?.warnings ?? [],
    ...(down ? { writtenDown: true as const } : {}),
    ...(sameAs.size > 0 ? { sameAs } : {}),
  };
}

function typedParts(raw: RawDrawing, ctx: DrawingContext): Part[] {
  const y = raw.y === 'up' || raw.y === 'down' ? raw.y : undefined;
  if (raw.y !== undefined && y === undefined) {
    ctx.fail('CASE_VALUE_WRONG', 'y grows either up or down', 'drawing.y', 'Give "up" or "down"');
  }
  if (raw.outline === undefined) {
    ctx.fail(
      'CASE_KEY_MISSING',
      'the drawing has no outline',
      'drawing.outline',
      'Give a shape, or a drawing "file"',
    );
  }
  const part = (name: string, role: Part['role'], key: string, written: unknown): Part => {
    const shape = readShape(written, key, y, ctx);
    const hasWinding = shape.kind === 'path' || shape.kind === 'polygon' || shape.kind === 'line';
    return { name, role, key, shape, hasWinding };
  };
  const group = (role: Part['role'], key: 'holes' | 'innerWalls' | 'regions'): Part[] =>
    Object.entries(asRecord(raw[key], `drawing.${key}`, ctx)).map(([name, written]) =>
      part(name, role, joinKey('drawing', key, name), written),
    );
  return [
    part('outline', 'outline', 'drawing.outline', raw.outline),
    ...group('hole', 'holes'),
    ...group('inner wall', 'innerWalls'),
    ...group('region', 'regions'),
  ];
}

function asRecord(raw: unknown, key: string, ctx: DrawingContext): Readonly<Record<string, unknown>> {
  if (raw === undefined) return {};
  if (typeof raw === 'object' && raw !== null && !Array.isArray(raw)) return raw as Record<string, unknown>;
  return ctx.fail('CASE_VALUE_WRONG', 'shapes are given by name', key, 'Give { "name": { "circle": … }, … }');
}

/** A loop's name is said in `on`, a region's in starts: each must mean one thing. */
function refuseNames(parts: readonly Part[], ctx: DrawingContext): void {
  const walls = new Map<string, Part>();
  for (const part of parts) {
    if (part.role !== 'outline' && reserved.has(part.name)) {
      ctx.fail(
        'NAME_RESERVED',
        `"${part.name}" means something else in a case`,
        part.key,
        'Choose another name',
      );
    }
    if (part.role === 'region') continue;
    const other = walls.get(part.name);
    if (other) {
      const what = `"${part.name}" is both ${withArticle(other.role)} and ${withArticle(part.role)}`;
      ctx.fail('NAME_TWICE', what, part.key, 'Give each loop and inner wall its own name');
    }
    walls.set(part.name, part);
  }
}

function withArticle(role: Part['role']): string {
  return role === 'outline' ? 'the outline' : `${role === 'inner wall' ? 'an' : 'a'} ${role}`;
}

function toleranceOf(raw: RawDrawing, parts: readonly Part[], ctx: DrawingContext): number {
  if (raw.tolerance !== undefined) {
    const tolerance = ctx.quantity(raw.tolerance, 'length', 'drawing.tolerance');
    if (tolerance >= 0) return tolerance;
    ctx.fail(
      'VALUE_OUT_OF_RANGE',
      `a tolerance of ${tolerance}`,
      'drawing.tolerance',
      'Give a length from 0 on',
    );
  }
  const [low, high] = boxOf(
    parts.filter((part) => part.role === 'outline').flatMap((part) => part.shape.curves),
  );
  const size = Math.hypot(high[0] - low[0], high[1] - low[1]);
  return size * (raw.file === undefined ? defaultTolerance.typed : defaultTolerance.fromFile);
}

function chainFor(part: Part, tolerance: number, ctx: DrawingContext, closings: Healing[]): Chain {
  const { shape, role, name } = part;
  const closed = role !== 'inner wall';
  if (closed && shape.kind === 'line' && !shape.closed) {
    ctx.fail(
      'LOOP_OPEN',
      `"${name}" is an open line`,
      part.key,
      'Give a polygon, or end the line where it began',
    );
  }
  if (shape.mark && !closed && !shape.closed) {
    ctx.fail(
      'CASE_VALUE_WRONG',
      'only a closed shape can have a mark',
      part.key,
      'Begin the line where s = 0 shall be',
    );
  }
  const made = loopOfShape(name, shape.curves, {
    closed,
    tolerance,
    ...(closed && (role === 'region' || !part.hasWinding) ? { sense: role === 'hole' ? -1 : 1 } : {}),
    ...(shape.mark ? { mark: shape.mark } : {}),
  });
  if (made.closing && part.hasWinding) closings.push({ ...made.closing, loop: name });
  return made.chain;
}

/** Heals all loops at once; what cannot be healed is refused with the key of the loop it concerns. */
function healedOrRefused(
  drawn: Domain,
  parts: readonly Part[],
  down: boolean,
  warnings: readonly string[],
  ctx: DrawingContext,
): { domain: Domain; healed: readonly Healing[] } {
  try {
    return healDomain(drawn);
  } catch (error) {
    if (!(error instanceof MesherError)) throw error;
    const { at, loops } = error.where;
    const key = parts.find((part) => part.name === loops?.at(-1))?.key ?? 'drawing';
    const asWritten = at?.map(([x, y]): Point => [x, down ? 0 - y : y]);
    // A proposal that was wrong is the likeliest reason, and the person has not seen it yet.
    const remedy = [error.remedy, ...warnings.map((text) => `Note: ${text}.`)].join(' ');
    return ctx.fail(error.code, error.what, key, remedy, asWritten);
  }
}
