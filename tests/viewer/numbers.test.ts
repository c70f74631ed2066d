import fc from 'fast-check';
import { expect, it } from 'vitest';
import { timeUnitFor } from '../../viewer/words/display-unit.ts';
import { bandsFor, niceStep, stepDecimals, ticksTo } from '../../viewer/words/nice-steps.ts';
import {
  decimalsFor,
  fixedText,
  givenText,
  numberText,
  pointText,
  withUnit,
} from '../../viewer/words/number-text.ts';
import { percentText, wholePercents } from '../../viewer/words/shares.ts';

it('thousands stand apart by U+202F and minus is U+2212 (LOOK, type)', () => {
  expect(fixedText(17400, 0)).toBe('17\u202f400');
  expect(fixedText(1234567.89, 1)).toBe('1\u202f234\u202f567.9');
  expect(fixedText(-58.31, 1)).toBe('\u221258.3');
  expect(fixedText(-0.001, 1)).toBe('0.0');
});

it('three significant figures, also where rounding carries into a new digit', () => {
  expect(numberText(28.64)).toBe('28.6');
  expect(numberText(812.4)).toBe('812');
  expect(numberText(9.996)).toBe('10.0');
  expect(numberText(0.01234)).toBe('0.0123');
  expect(numberText(0)).toBe('0');
  expect(decimalsFor(30.1)).toBe(1);
});

it('very small and very large values are powers of ten', () => {
  expect(numberText(-1.2e-4, 2)).toBe('\u22121.2 × 10⁻⁴');
  expect(numberText(3.2e12)).toBe('3.20 × 10¹²');
});

it('a typed limit keeps no digits it was not given', () => {
  expect(givenText(80)).toBe('80');
  expect(givenText(0.866)).toBe('0.866');
  expect(givenText(4799.999999999999 / 60)).toBe('80');
});

it('a value without a unit is printed without a space after it', () => {
  expect(withUnit('3', '')).toBe('3');
  expect(withUnit('3', 'mm')).toBe('3\u00a0mm');
  expect(pointText([0.8664, -0.5], 1.2, 'mm')).toBe('(0.866, \u22120.500)\u00a0mm');
});

it('times read in the largest unit that still gives three or more', () => {
  expect(timeUnitFor(1900, 's')).toEqual({ name: 'min', factor: 1 / 60 });
  expect(timeUnitFor(100, 's').name).toBe('s');
  expect(timeUnitFor(2, 'h').name).toBe('min');
  expect(timeUnitFor(80, 'h').name).toBe('d');
  expect(timeUnitFor(0.02, 's').name).toBe('ms');
});

it('an unknown or missing time unit is kept as it is', () => {
  expect(timeUnitFor(5000, '')).toEqual({ name: '', factor: 1 });
  expect(timeUnitFor(5000, 'fortnight')).toEqual({ name: 'fortnight', factor: 1 });
});

it('a nice step leads with 1, 2, 2.5 or 5 and fits at most as often as asked', () => {
  fc.assert(
    fc.property(
      fc.double({ min: 1e-9, max: 1e9, noNaN: true }),
      fc.integer({ min: 2, max: 50 }),
      (range, most) => {
        const step = niceStep(range, most);
        const lead = step / 10 ** Math.floor(Math.log10(step) + 1e-9);
        expect([1, 2, 2.5, 5].some((nice) => Math.abs(lead - nice) < 1e-6 * nice)).toBe(true);
        expect(range / step).toBeLessThanOrEqual(most * (1 + 1e-6));
      },
    ),
  );
});

it('bands reach over the longest time, are neither few nor crowded, and end on a heavy edge', () => {
  fc.assert(
    fc.property(fc.double({ min: 1e-6, max: 1e6, noNaN: true }), (longest) => {
      const { step, count } = bandsFor(longest);
      expect(step * count).toBeGreaterThanOrEqual(longest * (1 - 1e-9));
      // Neighbouring nice steps differ by at most 2, so at least 22 bands lie below the longest time; 3 may be added.
      expect(longest / step).toBeGreaterThanOrEqual(21.9);
      expect(count).toBeLessThanOrEqual(44);
      expect(count % 4).toBe(0);
    }),
  );
});

it('a layout in which every time is zero still has a scale', () => {
  expect(bandsFor(0)).toEqual({ step: 1, count: 4 });
});

it('ticks carry no rounding dust and show the decimals of their step', () => {
  expect(ticksTo(0.7, 0.1)).toEqual([0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7]);
  expect([stepDecimals(2.5), stepDecimals(0.1), stepDecimals(20)]).toEqual([1, 1, 0]);
});

it('whole percents of complete shares add up to 100 and lie within one of the exact ones', () => {
  fc.assert(
    fc.property(
      fc.array(fc.double({ min: 1e-3, max: 1, noNaN: true }), { minLength: 1, maxLength: 12 }),
      (parts) => {
        const total = parts.reduce((sum, part) => sum + part, 0);
        const shares = parts.map((part) => part / total);
        const percents = wholePercents(shares);
        expect(percents.reduce((sum, percent) => sum + percent, 0)).toBe(100);
        percents.forEach((percent, i) => {
          expect(Math.abs(percent - 100 * (shares[i] ?? 0))).toBeLessThan(1);
        });
      },
    ),
  );
});

it('three equal shares are 34, 33, 33', () => {
  expect(wholePercents([1 / 3, 1 / 3, 1 / 3])).toEqual([34, 33, 33]);
});

it('a share that is there but rounds to nothing is said to be less than one', () => {
  expect(percentText(0, 0.002)).toBe('<1');
  expect(percentText(0, 0)).toBe('0');
});
