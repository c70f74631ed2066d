import type { Point } from '../../mesher/index.ts';
import type { Case, Drawing, Start } from './case.ts';
import type { CaseContext } from './case-context.ts';
import { compileExpression } from './expression.ts';
import { joinKey } from './key-path.ts';
import { suggestName } from './nearest-name.ts';
import type { RawCase, RawPoint, RawStart } from './schema.ts';
import { entriesOf } from './schema-parts.ts';

/** The start of a case that states none. */
const anywhere: Start = { kind: 'evenIn', name: 'anywhere', region: 'everywhere' };

/** A point of the case, y upwards. */
function readPlace(raw: RawPoint, key: string, drawing: Drawing, ctx: CaseContext): Point {
  const [x, y] = raw.map((part, i) => ctx.quantity(part, 'length', joinKey(key, i)));
  return [x ?? Number.NaN, (drawing.writtenDown === true ? -1 : 1) * (y ?? Number.NaN)];
}

/**
 * Reads the starts; without any, one called `anywhere`, even everywhere.
 *
 * @throws {CaseError} a region, point or expression that is refused, a table that cannot be read
 */
export function readStarts(raw: RawCase['starts'], drawing: Drawing, ctx: CaseContext): Start[] {
  const entries = entriesOf(raw);
  if (entries.length === 0) return [anywhere];
  return entries.map(([name, start]) => readStart(name, start, drawing, ctx));
}

function readStart(name: string, raw: RawStart, drawing: Drawing, ctx: CaseContext): Start {
  const key = joinKey('starts', name);
  const place = `start ${JSON.stringify(name)}`;
  if ('evenIn' in raw)
    return { kind: 'evenIn', name, region: regionOf(raw.evenIn, joinKey(key, 'evenIn'), drawing, ctx) };
  if ('point' in raw)
    return { kind: 'point', name, at: readPlace(raw.point, joinKey(key, 'point'), drawing, ctx) };
  if ('spot' in raw) {
    return {
      kind: 'spot',
      name,
      at: readPlace(raw.spot, joinKey(key, 'spot'), drawing, ctx),
      radius: ctx.positive(raw.radius, 'length', joinKey(key, 'radius')).value,
    };
  }
  if ('density' in raw) {
    const isText = typeof raw.density === 'string';
    const text = typeof raw.density === 'string' ? raw.density : raw.density.expression;
    compileExpression(text, joinKey(key, 'density', ...(isText ? [] : ['expression'])), ctx.fail);
    return notYetStart(name, ctx.notYet('density start', place));
  }
  ctx.readFile(raw.table, joinKey(key, 'table'));
  return notYetStart(name, ctx.notYet('table start', place));
}

const notYetStart = (name: string, told: string | undefined): Start => ({
  kind: 'notYet',
  name,
  notAvailable: told === undefined ? [] : [told],
});

function regionOf(name: string, key: string, drawing: Drawing, ctx: CaseContext): number | 'everywhere' {
  if (name === 'everywhere') return name;
  const names = drawing.regions.map((region) => region.name);
  const index = names.indexOf(name);
  if (index >= 0) return index;
  return ctx.fail(
    'NAME_UNKNOWN',
    `no region is called ${JSON.stringify(name)}`,
    key,
    suggestName(name, [...names, 'everywhere'], 'region'),
  );
}

/** Reads the pins. */
export const readPins = (raw: RawCase['pins'], drawing: Drawing, ctx: CaseContext): Case['pins'] =>
  entriesOf(raw).map(([name, place]) => ({
    name,
    at: readPlace(place, joinKey('pins', name), drawing, ctx),
  }));
