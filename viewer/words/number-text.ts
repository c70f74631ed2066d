/** Numbers as the page prints them: thousands by U+202F, minus by U+2212, three figures unless asked otherwise. */

export const THIN_SPACE = '\u202f';
export const MINUS = '\u2212';

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹';

function grouped(digits: string): string {
  return digits.replace(/\B(?=(\d{3})+$)/g, THIN_SPACE);
}

/** A number with a fixed count of decimals. A value that rounds to zero carries no sign. */
export function fixedText(value: number, decimals: number): string {
  if (!Number.isFinite(value)) return value > 0 ? 'endless' : '—';
  const [whole = '0', part] = Math.abs(value).toFixed(decimals).split('.');
  const digits = part === undefined ? grouped(whole) : `${grouped(whole)}.${part}`;
  return value < 0 && /[1-9]/.test(digits) ? MINUS + digits : digits;
}

/** Decimals that show `figures` significant figures of the largest of some values, for a column of them. */
export function decimalsFor(largest: number, figures = 3): number {
  const size = Math.abs(largest);
  if (!Number.isFinite(size) || size === 0) return 0;
  // Rounding may carry into one more digit: 9.996 has two decimals, not three.
  const rounded = Number(size.toPrecision(figures));
  return Math.min(12, Math.max(0, figures - 1 - Math.floor(Math.log10(rounded))));
}

function powerText(value: number, figures: number): string {
  const [mantissa = '0', exponent = '0'] = Math.abs(value)
    .toExponential(figures - 1)
    .split('e');
  const power = Number(exponent);
  const raised = String(Math.abs(power)).replace(/\d/g, (digit) => SUPERSCRIPTS[Number(digit)] ?? digit);
  return `${value < 0 ? MINUS : ''}${mantissa} × 10${power < 0 ? '⁻' : ''}${raised}`;
}

/** A number to `figures` significant figures; as a power of ten below 0.001 and from ten million on. */
export function numberText(value: number, figures = 3): string {
  const size = Math.abs(value);
  if (size !== 0 && Number.isFinite(size) && (size < 1e-3 || size >= 1e7)) return powerText(value, figures);
  return fixedText(value, decimalsFor(value, figures));
}

/** A number somebody typed, as short as it is: 80 and not 80.0. */
export function givenText(value: number): string {
  const short = Number(value.toPrecision(6));
  const [, decimals = ''] = String(Math.abs(short)).split('.');
  const size = Math.abs(short);
  const asPower = size !== 0 && (size < 1e-3 || size >= 1e7);
  return asPower ? numberText(short) : fixedText(short, decimals.length);
}

/** A number with its unit; the unit is left out where the case has none. */
export function withUnit(text: string, unit: string): string {
  return unit === '' ? text : `${text}\u00a0${unit}`;
}

/** A point of the drawing: '(0.866, 0.791) mm', to a thousandth of the drawing's size. */
export function pointText(at: readonly [number, number], size: number, unit: string): string {
  const decimals = Math.min(12, Math.max(0, 3 - Math.floor(Math.log10(size > 0 ? size : 1))));
  return withUnit(`(${fixedText(at[0], decimals)}, ${fixedText(at[1], decimals)})`, unit);
}
