import type { CaseUnits } from './case.ts';
import { type Dimension, powersOf, unitText } from './dimensions.ts';
import { numberOf } from './exact-ratio.ts';
import { ratioOfUnits } from './units.ts';

/** Readable units by the least amount, in the first of them, from which each is used. */
const ladders = {
  time: {
    of: 's',
    steps: [
      [0, 'ns'],
      [1e-6, 'µs'],
      [1e-3, 'ms'],
      [1, 's'],
      [120, 'min'],
      [7200, 'h'],
      [172800, 'd'],
    ],
  },
  length: {
    of: 'm',
    steps: [
      [0, 'nm'],
      [1e-6, 'µm'],
      [1e-3, 'mm'],
      [1, 'm'],
      [10000, 'km'],
    ],
  },
} as const;

/** Factor to a printed unit and that unit, as picked for one value or for a column of them. */
export interface PrintedUnit {
  readonly factor: number;
  readonly unit: string;
}

/** How a quantity is printed. */
export interface FormatOptions {
  /** Significant digits; default 4. */
  readonly digits?: number;
  /** The unit to print in, so that a column keeps one; default: the readable one for this value. */
  readonly unit?: PrintedUnit;
}

const superscripts = '⁰¹²³⁴⁵⁶⁷⁸⁹';
const raise = (power: number): string =>
  String(power)
    .replace(/\d/g, (digit) => superscripts[Number(digit)] ?? digit)
    .replace('-', '⁻');

/**
 * Four significant digits as print has them: U+2212 for minus, U+202F between thousands, powers of ten below 1e-3 and
 * from 1e7. Not finite: `∞` or `–`.
 */
export function formatNumber(value: number, digits = 4): string {
  if (Number.isNaN(value)) return '–';
  const sign = value < 0 ? '−' : '';
  if (!Number.isFinite(value)) return `${sign}∞`;
  if (value === 0) return '0';
  const [mantissa = '', exponent = '0'] = Math.abs(value)
    .toExponential(digits - 1)
    .split('e');
  const power = Number(exponent);
  if (power < -3 || power >= 7) return `${sign}${mantissa}×10${raise(power)}`;
  const rounded = Number(`${mantissa}e${power}`).toFixed(Math.max(0, digits - 1 - power));
  const [whole = '', part] = rounded.split('.');
  return sign + whole.replace(/(?<=\d)(?=(?:\d{3})+$)/g, '\u202f') + (part === undefined ? '' : `.${part}`);
}

/**
 * The unit in which people read a quantity: s, min, h, d for times, nm, µm, mm for lengths, % for fractions, the
 * case's own unit for the rest.
 *
 * @param value in the case's units; of a column, give the largest
 */
export function readableUnit(value: number, dimension: Dimension, units: CaseUnits): PrintedUnit {
  if (dimension === 'fraction') return { factor: 100, unit: '%' };
  if (dimension === 'angle') return { factor: 1, unit: 'deg' };
  if (units.length === '') return { factor: 1, unit: '' };
  const own = { factor: 1, unit: printedUnit(unitText(powersOf(dimension), units)) };
  if (dimension !== 'time' && dimension !== 'length') return own;
  const { of, steps } = ladders[dimension];
  const toBase = ratioOfUnits(units[dimension], of);
  if (toBase === undefined || value === 0 || !Number.isFinite(value)) return own;
  const amount = Math.abs(value) * numberOf(toBase);
  const unit = steps.findLast(([least]) => amount >= least)?.[1];
  const factor = unit === undefined ? undefined : ratioOfUnits(units[dimension], unit);
  return unit === undefined || factor === undefined ? own : { factor: numberOf(factor), unit };
}

/** `mm^2/s` as print has it: `mm²/s`. */
export const printedUnit = (unit: string): string =>
  unit.replace(/\^(-?\d+)/g, (_, power) => raise(Number(power)));

/**
 * A quantity of the case as text with its unit; what this prints, `parseQuantity` reads back.
 *
 * @param value in the case's units (a fraction 0 to 1, an angle in degrees)
 */
export function formatQuantity(
  value: number,
  dimension: Dimension,
  units: CaseUnits,
  options: FormatOptions = {},
): string {
  const { digits = 4, unit = readableUnit(value, dimension, units) } = options;
  const number = formatNumber(value * unit.factor, digits);
  return unit.unit === '' ? number : `${number} ${unit.unit}`;
}
