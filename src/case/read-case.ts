import Value from 'typebox/value';
import type { Coefficient } from '../../solver/index.ts';
import { caseHash } from './canonical.ts';
import type { Case, CaseUnits } from './case.ts';
import { type CaseContext, type CaseSource, caseContext, failIn } from './case-context.ts';
import { buildDrawing } from './drawing.ts';
import { CaseError } from './errors.ts';
import { explainMismatch, type Mismatch } from './explain-mismatch.ts';
import type { FigureNames } from './figures.ts';
import { joinKey } from './key-path.ts';
import { suggestName } from './nearest-name.ts';
import { parseJson } from './parse-json.ts';
import { readAccuracy, readAsked, readReport } from './read-asked.ts';
import { canBeLost, readParticle } from './read-particle.ts';
import { readPins, readStarts } from './read-starts.ts';
import { readVarying } from './read-varying.ts';
import { readLayouts, readWalls } from './read-walls.ts';
import { resolveValues, withoutNotes } from './resolve-case.ts';
import { caseSchema, type RawCase } from './schema.ts';
import { entriesOf } from './schema-parts.ts';
import { readUnits } from './units.ts';

const maxCharacters = 10_000_000;

/** Names that mean something in every case. */
const reservedNames: ReadonlySet<string> = new Set(['all', 'everywhere', 'outline', 'lost']);

/**
 * Reads a case: its form, its units, its drawing, and everything that refers to them. What comes back is right by
 * construction; what it asks for and this version does not compute is named in `notAvailable`.
 *
 * @param text one JSON object (CASE.md), at most 10 MB
 * @param source names for messages, and how files beside the case are read
 * @throws {CaseError} the first thing that is wrong, with file, line and key
 */
export function readCase(text: string, source: CaseSource = {}): Case {
  if (text.length > maxCharacters) {
    throw new CaseError(
      'CASE_TOO_LARGE',
      `the case has ${(text.length / 1e6).toFixed(1)} MB`,
      source.file === undefined ? {} : { file: source.file },
      'Keep it below 10 MB: put the drawing into a file of its own',
    );
  }
  const { value, lineOf } = parseJson(text, source.file);
  const fail = failIn(source.file, lineOf);
  if (!isCase(value)) {
    const { code, what, key, remedy } = explainMismatch(caseSchema, value) ?? unexplained;
    return fail(code, what, key, remedy);
  }
  const units: CaseUnits = readUnits(value.units, (of, what, remedy) =>
    fail('UNIT_WRONG', what, joinKey('units', of), remedy),
  );
  return new CaseReading(value, source, caseContext(units, fail, source)).read();
}

/** Said if ever the check refuses what the words find in order; a test holds the two together. */
const unexplained: Mismatch = {
  code: 'CASE_VALUE_WRONG',
  what: 'this does not fit the form of a case',
  key: '',
  remedy: 'Check it against the schema of a case',
};

/** The schema's own check, as a type: it decides, and `explainMismatch` finds the words. */
const isCase = (value: unknown): value is RawCase => Value.Check(caseSchema, value);

class CaseReading {
  private readonly raw: RawCase;
  private readonly source: CaseSource;
  private readonly ctx: CaseContext;

  constructor(raw: RawCase, source: CaseSource, ctx: CaseContext) {
    this.raw = raw;
    this.source = source;
    this.ctx = ctx;
  }

  read(): Case {
    const { raw, ctx } = this;
    this.refuseNames();
    const drawing = buildDrawing(withoutNotes(raw.drawing), ctx);
    const particle = readParticle(raw.particle, drawing, ctx);
    const hasLoss = canBeLost(particle);
    const depth = this.readDepth(drawing.writtenDown === true);
    const walls = readWalls(raw.walls, drawing, ctx);
    const hasDepth = depth !== undefined;
    const layouts = readLayouts(raw.layouts, { drawing, walls, hasDepth, hasLoss }, ctx);
    const starts = readStarts(raw.starts, drawing, ctx);
    const floors = layouts.flatMap((layout) => layout.floors?.map((floor) => floor.region) ?? []);
    const names: FigureNames = {
      exits: [...walls.map((wall) => wall.name), ...new Set(floors), ...(hasLoss ? ['lost'] : [])],
      regions: drawing.regions.map((region) => region.name),
    };
    const asked = readAsked(
      raw.asked,
      starts.map((start) => start.name),
      names,
      ctx,
    );
    const accuracy = readAccuracy(raw.accuracy, asked, ctx);
    const report = readReport(raw.report, names, ctx);
    const reference = this.reference(layouts.map((layout) => layout.name));
    const pins = readPins(raw.pins, drawing, ctx);
    const title = raw.title ?? this.titleFromFile();
    const resolved = {
      ...(resolveValues(raw, ctx.resolved) as object),
      units: ctx.units,
      reference,
      accuracy,
      particle: {
        ...(resolveValues(raw.particle, ctx.resolved, 'particle') as object),
        noise: particle.noise,
      },
      asked: asked.map(({ text, start, limit }, i) => ({
        figure: text,
        start,
        counts: raw.asked?.[i]?.counts ?? 'gone',
        limit: limit === undefined ? undefined : { kind: limit.kind, value: limit.value },
      })),
      starts:
        raw.starts === undefined
          ? { anywhere: { evenIn: 'everywhere' } }
          : resolveValues(raw.starts, ctx.resolved, 'starts'),
    };
    return {
      title,
      units: ctx.units,
      drawing,
      particle,
      ...(depth === undefined ? {} : { depth }),
      walls,
      layouts,
      reference,
      starts,
      pins,
      asked,
      accuracy,
      ...(report === undefined ? {} : { report }),
      notAvailable: [...ctx.notAvailable],
      warnings: [...(drawing.warnings ?? []), ...ctx.warnings],
      hash: caseHash(resolved, ctx.files),
    };
  }

  /** Walls and regions share one name space; some names mean something everywhere. */
  private refuseNames(): void {
    const { raw, ctx } = this;
    const { drawing } = raw;
    const groups: [string, [string, unknown][], string][] = [
      ['drawing.holes', entriesOf<unknown>(drawing.holes), 'hole'],
      ['drawing.innerWalls', entriesOf<unknown>(drawing.innerWalls), 'inner wall'],
      ['drawing.regions', entriesOf<unknown>(drawing.regions), 'region'],
      ['walls', entriesOf<unknown>(raw.walls), 'wall'],
    ];
    for (const [at, entries] of groups) {
      for (const [name] of entries) {
        if (!reservedNames.has(name)) continue;
        ctx.fail(
          'NAME_RESERVED',
          `${JSON.stringify(name)} means something in every case and cannot be a name`,
          joinKey(at, name),
          'Choose another name',
        );
      }
    }
    const regions = new Set(groups[2]?.[1].map(([name]) => name));
    for (const [name] of entriesOf(raw.walls)) {
      if (!regions.has(name)) continue;
      ctx.fail(
        'NAME_TWICE',
        `${JSON.stringify(name)} is both a region and a wall`,
        joinKey('walls', name),
        'Give one of them another name',
      );
    }
    const maps = [
      ...groups,
      ['layouts', entriesOf<unknown>(raw.layouts)],
      ['starts', entriesOf<unknown>(raw.starts)],
      ['pins', entriesOf<unknown>(raw.pins)],
    ] as const;
    for (const [at, entries] of maps) {
      for (const [name] of entries) this.refuseForm(name, joinKey(at, name));
    }
  }

  private refuseForm(name: string, key: string): void {
    if (name !== '' && name.length <= 100 && name === name.trim() && !/[\p{Cc}\p{Cs}]/u.test(name)) return;
    this.ctx.fail(
      'CASE_VALUE_WRONG',
      `${JSON.stringify(name.slice(0, 40))} cannot be a name`,
      key,
      'Give 1 to 100 characters in one line, without a space at either end',
    );
  }

  private readDepth(writtenDown: boolean): Coefficient | undefined {
    const { depth } = this.raw.drawing;
    if (depth === undefined) return undefined;
    const options = { isPositive: true, writtenDown };
    return readVarying(depth, 'length', 'drawing.depth', this.ctx, options).coefficient;
  }

  private reference(layouts: readonly string[]): string {
    const { reference } = this.raw;
    if (reference === undefined) return layouts[0] ?? '';
    if (layouts.includes(reference)) return reference;
    return this.ctx.fail(
      'NAME_UNKNOWN',
      `no layout is called ${JSON.stringify(reference)}`,
      'reference',
      suggestName(reference, layouts, 'layout'),
    );
  }

  private titleFromFile(): string {
    const name = this.source.file
      ?.split(/[\\/]/)
      .at(-1)
      ?.replace(/(\.case)?\.json$/i, '');
    return name === undefined || name === '' || name === '-' ? 'Untitled case' : name;
  }
}
