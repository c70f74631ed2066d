/**
 * Exact arithmetic for unit conversion: a decimal text times a ratio of units, rounded once to the nearest double.
 * So 0.7 µm in a case in mm is the same double as 7e-4, which 0.7 * 1e-3 is not sure to be.
 */

/** A rational number; the denominator is positive. */
export interface Ratio {
  readonly over: bigint;
  readonly under: bigint;
}

export const one: Ratio = { over: 1n, under: 1n };

/** A decimal text such as `-1.25e-4` as a ratio, or undefined when it is none or its exponent is beyond ±400. */
export function ratioOfDecimal(text: string): Ratio | undefined {
  const found = /^([+-]?)(\d*)(?:\.(\d*))?(?:[eE]([+-]?\d{1,6}))?$/.exec(text);
  const [, sign, whole = '', part = '', exponent = '0'] = found ?? [];
  if (found === null || whole + part === '' || text.length > 400) return undefined;
  const power = Number(exponent) - part.length;
  if (Math.abs(power) > 800) return undefined;
  const digits = BigInt(whole + part) * (sign === '-' ? -1n : 1n);
  return power >= 0
    ? { over: digits * 10n ** BigInt(power), under: 1n }
    : { over: digits, under: 10n ** BigInt(-power) };
}

export const times = (a: Ratio, b: Ratio): Ratio => ({ over: a.over * b.over, under: a.under * b.under });

/** a to an integer power; a must not be zero when the power is negative. */
export function powerOf(a: Ratio, power: number): Ratio {
  const n = BigInt(Math.abs(power));
  return power >= 0 ? { over: a.over ** n, under: a.under ** n } : { over: a.under ** n, under: a.over ** n };
}

/** The nearest double: 30 digits of the quotient and a last digit that says whether anything follows. */
export function numberOf(a: Ratio): number {
  if (a.over === 0n) return 0;
  const over = a.over < 0n ? -a.over : a.over;
  const shift = 30 - (over.toString().length - a.under.toString().length);
  const top = shift >= 0 ? over * 10n ** BigInt(shift) : over;
  const bottom = shift >= 0 ? a.under : a.under * 10n ** BigInt(-shift);
  const sticky = top % bottom === 0n ? '0' : '1';
  return Number(`${a.over < 0n ? '-' : ''}${top / bottom}${sticky}e${-shift - 1}`);
}
