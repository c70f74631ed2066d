import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Dimension } from '../../src/case/dimensions.ts';
import { formatNumber, formatQuantity, readableUnit } from '../../src/case/format-quantity.ts';
import { parseQuantity, type Refuse } from '../../src/case/units.ts';

const refuse: Refuse = (code, what, remedy) => {
  throw new Error(`${code}: ${what}. ${remedy}`);
};
const mm = { length: 'mm', time: 's' };

describe('printing', () => {
  it.each([
    [1860, 'time', '31.00 min'],
    [45, 'time', '45.00 s'],
    [-3498, 'time', '−58.30 min'],
    [3e-4, 'time', '300.0 µs'],
    [36000, 'time', '10.00 h'],
    [864000, 'time', '10.00 d'],
    [0.02, 'length', '20.00 µm'],
    [1.0334, 'length', '1.033 mm'],
    [5e-7, 'length', '0.5000 nm'],
    [1e-4, 'diffusion', '1.000×10⁻⁴ mm²/s'],
    [2e-3, 'reactivity', '0.002000 mm/s'],
    [0.01, 'rate', '0.01000 1/s'],
    [0.6123, 'fraction', '61.23 %'],
    [0, 'time', '0 s'],
  ] as const)('prints %s as a %s', (value, dimension, expected) => {
    expect(formatQuantity(value, dimension, mm)).toBe(expected);
  });

  it('puts a narrow no-break space between thousands and rounds to four digits', () => {
    expect(formatNumber(1234.56)).toBe('1\u202f235');
    expect(formatNumber(1234567)).toBe('1\u202f235\u202f000');
    expect(formatNumber(99995)).toBe('100\u202f000');
    expect(formatNumber(123.4567)).toBe('123.5');
    expect(formatNumber(Number.POSITIVE_INFINITY)).toBe('∞');
  });

  it('keeps one unit for a column', () => {
    const unit = readableUnit(4866, 'time', mm);
    expect(formatQuantity(60, 'time', mm, { unit, digits: 3 })).toBe('1.00 min');
  });

  it('prints plain numbers for a case without units', () => {
    expect(formatQuantity(0.5, 'length', { length: '', time: '' })).toBe('0.5000');
  });

  it('is read back, to the digits printed, for every quantity and unit', () => {
    const dimensions: Dimension[] = [
      'length',
      'time',
      'area',
      'diffusion',
      'reactivity',
      'rate',
      'fraction',
      'angle',
    ];
    fc.assert(
      fc.property(
        fc
          .double({ min: -1e15, max: 1e15, noNaN: true })
          .filter((value) => value === 0 || Math.abs(value) > 1e-25),
        fc.constantFrom(...dimensions),
        fc.constantFrom('mm', 'µm', 'nm', 'cm', 'm', 'in', ''),
        fc.constantFrom('s', 'min', 'h', 'ms', 'd'),
        (value, dimension, length, time) => {
          const units = { length, time: length === '' ? '' : time };
          const back = parseQuantity(formatQuantity(value, dimension, units), dimension, units, refuse);
          // Half a unit of the fourth digit is at most 5e-4 of the value; the rest is rounding of the factor.
          expect(Math.abs(back - value)).toBeLessThanOrEqual(5.000001e-4 * Math.abs(value));
        },
      ),
      { seed: 21, numRuns: 500 },
    );
  });
});
