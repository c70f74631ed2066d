import math from 'mathjs/lib/browser/math.js';
import type { CaseUnits } from './case.ts';
import { type Dimension, exampleOf, nameOf, powersOf, unitText } from './dimensions.ts';
import type { CaseCode } from './errors.ts';
import { numberOf, one, powerOf, type Ratio, ratioOfDecimal, times } from './exact-ratio.ts';

/** Called with what is wrong with a text and what to do; does not come back. */
export type Refuse = (code: CaseCode, what: string, remedy: string) => never;

/** A unit as powers of length and time, and how many metres^a·seconds^b it is. */
interface UnitMeaning {
  readonly ratio: Ratio;
  readonly powers: readonly [length: number, time: number];
}

/** Spellings that people use and mathjs does not know. */
const spellings: Readonly<Record<string, string>> = {
  d: 'day',
  mins: 'minutes',
  hrs: 'hours',
  sec: 's',
  secs: 's',
  micron: 'um',
  microns: 'um',
  Å: 'angstrom',
};

const superscripts = '⁰¹²³⁴⁵⁶⁷⁸⁹';

/** A unit as people write it, in the plain form that mathjs reads: `µm²·s⁻¹` becomes `um^2*s^-1`. */
const plainUnit = (text: string): string =>
  text
    .normalize('NFC')
    .replace(/^\//, '1/')
    .replace(/[µμ]/g, 'u')
    .replace(/[−–]/g, '-')
    .replace(/[·⋅×]/g, '*')
    .replace(/(⁻?)([⁰¹²³⁴⁵⁶⁷⁸⁹]+)/g, (_, sign: string, digits: string) => {
      const plain = [...digits].map((digit) => superscripts.indexOf(digit)).join('');
      return `^${sign === '' ? '' : '-'}${plain}`;
    })
    .replace(/([A-Za-zÅ])(-?\d+)/g, '$1^$2')
    .replace(/[A-Za-zÅ]+/g, (word) => (Object.hasOwn(spellings, word) ? (spellings[word] ?? word) : word));

const meanings = new Map<string, UnitMeaning | undefined>();

/** What a unit text means, or undefined when it is no unit of length and time. */
function meaningOf(text: string): UnitMeaning | undefined {
  const plain = plainUnit(text.trim());
  if (plain.length > 60) return undefined;
  if (meanings.size > 1000) meanings.clear();
  if (!meanings.has(plain)) meanings.set(plain, readMeaning(plain));
  return meanings.get(plain);
}

function readMeaning(plain: string): UnitMeaning | undefined {
  if (plain === '' || plain === '1') return { ratio: one, powers: [0, 0] };
  let ratio = one;
  try {
    // The parts are public in mathjs's description of units but not in its types.
    const { units, dimensions } = math.unit(plain) as unknown as {
      readonly dimensions: readonly number[];
      readonly units: readonly { unit: { value: number }; prefix: { value: number }; power: number }[];
    };
    const [mass = 0, length = 0, time = 0, ...others] = dimensions;
    if (mass !== 0 || others.some((power) => power !== 0)) return undefined;
    for (const part of units) {
      const unit = ratioOfDecimal(String(part.unit.value));
      const prefix = ratioOfDecimal(String(part.prefix.value));
      if (unit === undefined || prefix === undefined || !Number.isInteger(part.power)) return undefined;
      if (Math.abs(part.power) > 6) return undefined;
      ratio = times(ratio, powerOf(times(unit, prefix), part.power));
    }
    return { ratio, powers: [length, time] };
  } catch {
    return undefined;
  }
}

/** How many of the unit `to` one of the unit `from` is, exactly; both must be units of the same dimension. */
export function ratioOfUnits(from: string, to: string): Ratio | undefined {
  const [a, b] = [meaningOf(from), meaningOf(to)];
  if (a === undefined || b === undefined) return undefined;
  return a.powers.join() === b.powers.join() ? times(a.ratio, powerOf(b.ratio, -1)) : undefined;
}

/**
 * Reads the case's units. Printed with µ; both empty for `"none"`.
 *
 * @throws what `refuse` throws, where a unit is none of length or time
 */
export function readUnits(
  raw: 'none' | { readonly length: string; readonly time: string },
  refuse: (of: 'length' | 'time', what: string, remedy: string) => never,
): CaseUnits {
  if (raw === 'none') return { length: '', time: '' };
  const read = (of: 'length' | 'time', example: string): string => {
    const text = raw[of].trim();
    if (meaningOf(text)?.powers.join() !== powersOf(of).join() || text === '') {
      refuse(of, `${JSON.stringify(raw[of])} is no unit of ${of}`, `Give one such as ${example}`);
    }
    return text.replace(/^u(?=m$|s$)|μ/, 'µ').replace(/^microns?$/, 'µm');
  };
  return { length: read('length', '"mm" or "um"'), time: read('time', '"s" or "min"') };
}

/** The unit of the case's length^a·time^b in plain letters; empty under `"units": "none"` and for plain numbers. */
export const caseUnit = (dimension: Dimension, units: CaseUnits): string =>
  units.length === '' ? '' : unitText(powersOf(dimension), units);

/**
 * The factor that takes a number in `unit` to the case's units.
 *
 * @param unit as people write it; for an angle only `deg` and `rad`, which end as degrees
 */
export function factorToCase(unit: string, dimension: Dimension, units: CaseUnits, refuse: Refuse): Ratio {
  const text = unit.trim();
  const example = exampleOf(dimension, units);
  if (dimension === 'fraction' && text === '%') return { over: 1n, under: 100n };
  if (dimension === 'angle') {
    const known = {
      deg: one,
      '°': one,
      degrees: one,
      degree: one,
      rad: ratioOfDecimal(String(180 / Math.PI)),
    };
    const factor = Object.entries(known).find(([name]) => name === text)?.[1];
    return (
      factor ??
      refuse('UNIT_WRONG', `${JSON.stringify(text)} is no unit of angle`, `Write degrees: ${example}`)
    );
  }
  const meaning = meaningOf(text);
  if (meaning === undefined) {
    return refuse(
      'UNIT_WRONG',
      `${JSON.stringify(text)} is not known as a unit of length and time`,
      `Here ${nameOf(dimension)} is expected: give one such as ${example}`,
    );
  }
  if (units.length === '') {
    if (text === '1') return one;
    return refuse(
      'UNIT_WRONG',
      `${JSON.stringify(text)} is a unit, but this case is without units ("units": "none")`,
      'Give a plain number, or state the units of the case',
    );
  }
  const [length, time] = powersOf(dimension);
  if (meaning.powers[0] !== length || meaning.powers[1] !== time) {
    const unit = unitText(meaning.powers, { length: 'length', time: 'time' });
    refuse(
      'UNIT_WRONG',
      `${JSON.stringify(text)} is ${unit === '' ? 'a plain number' : unit}, but ${nameOf(dimension)} is ${unitText([length, time], { length: 'length', time: 'time' }) || 'a plain number'}`,
      `Give one such as ${example}`,
    );
  }
  return ratioOfUnits(text, unitText([length, time], units)) ?? one;
}

/** A number as people and this program write it: `−58.3`, `1.2×10⁻⁴`, thousands apart by U+202F. */
const numberPattern =
  /^([+−–-]?)((?:\d{1,3}(?:[\u202f\u00a0\u2009]\d{3})+|\d+)(?:\.\d*)?|\.\d+)(?:[eE]([+−–-]?\d+)|\s*[×·*x]\s*10(?:\^([+−–-]?\d+)|([⁻⁺]?[⁰¹²³⁴⁵⁶⁷⁸⁹]+)))?(?![\d.])/;

const plainMinus = (text: string): string => text.replace(/[−–⁻]/g, '-').replace(/⁺/g, '');

function splitNumber(text: string): { digits: string; unit: string } | undefined {
  const found = numberPattern.exec(text);
  if (found === null) return undefined;
  const [all, sign = '', body = '', e, power, small] = found;
  const raised = [...(small ?? '')].map((digit) => {
    const value = superscripts.indexOf(digit);
    return value < 0 ? digit : String(value);
  });
  const exponent = e ?? power ?? (small === undefined ? '0' : raised.join(''));
  return {
    digits: `${plainMinus(sign)}${body.replace(/[\u202f\u00a0\u2009]/g, '')}e${plainMinus(exponent)}`,
    unit: text.slice(all.length).trim(),
  };
}

function refuseComma(text: string, refuse: Refuse): void {
  const found = /^[+−-]?\d[\d.]*,\d[\d,]*/.exec(text)?.[0];
  if (found === undefined) return;
  const point = text.replace(found, found.replace(/\./g, '').replace(',', '.'));
  const grouped = /^[+−-]?\d{1,3}(,\d{3})+$/.test(found);
  refuse(
    'CASE_VALUE_WRONG',
    `${JSON.stringify(text)} is written with a comma`,
    `Write ${JSON.stringify(point)}${grouped ? `, or ${JSON.stringify(text.replaceAll(',', ''))} if thousands are meant` : ''}`,
  );
}

/**
 * A quantity as text with its unit, in the case's units (an angle in degrees): converted exactly, rounded once.
 *
 * @throws what `refuse` throws: a decimal comma, no number, no unit or one of another dimension, not finite
 */
export function parseQuantity(text: string, dimension: Dimension, units: CaseUnits, refuse: Refuse): number {
  const trimmed = text.trim();
  const shown = JSON.stringify(trimmed.slice(0, 80));
  const example = exampleOf(dimension, units);
  refuseComma(trimmed, refuse);
  const split = trimmed.length > 200 ? undefined : splitNumber(trimmed);
  if (split === undefined) {
    return refuse(
      'CASE_VALUE_WRONG',
      `${shown} does not start with a number`,
      `Give ${nameOf(dimension)} such as ${example}`,
    );
  }
  const [length, time] = powersOf(dimension);
  if (split.unit === '' && (length !== 0 || time !== 0) && units.length !== '') {
    refuse(
      'UNIT_WRONG',
      `${shown} has no unit`,
      `Write the unit, such as ${example}, or a number without quotes, which is in ${caseUnit(dimension, units)}`,
    );
  }
  const ratio = ratioOfDecimal(split.digits);
  const factor = split.unit === '' ? one : factorToCase(split.unit, dimension, units, refuse);
  const value = ratio === undefined ? Number.NaN : numberOf(times(ratio, factor));
  return Number.isFinite(value)
    ? value
    : refuse(
        'VALUE_OUT_OF_RANGE',
        `${shown} is not a finite number`,
        'Give a number between 1e-300 and 1e300',
      );
}
