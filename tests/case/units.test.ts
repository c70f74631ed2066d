import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Dimension } from '../../src/case/dimensions.ts';
import { numberOf, ratioOfDecimal, times } from '../../src/case/exact-ratio.ts';
import { parseQuantity, type Refuse, readUnits } from '../../src/case/units.ts';

const refuse: Refuse = (code, what, remedy) => {
  throw new Error(`${code}: ${what}. ${remedy}`);
};
const mm = { length: 'mm', time: 's' };
const none = { length: '', time: '' };
const read = (text: string, dimension: Dimension, units = mm) =>
  parseQuantity(text, dimension, units, refuse);

describe('units as people write them', () => {
  it.each([
    ['1e-4 mm^2/s', 'diffusion', 1e-4],
    ['1e-4 mm²/s', 'diffusion', 1e-4],
    ['100 µm²/s', 'diffusion', 1e-4],
    ['100 um^2/s', 'diffusion', 1e-4],
    ['1e-10 m2 s-1', 'diffusion', 1e-4],
    ['1e-6 cm²·s⁻¹', 'diffusion', 1e-4],
    ['6e-3 mm^2/min', 'diffusion', 1e-4],
    ['0.5 um', 'length', 5e-4],
    ['0.5 μm', 'length', 5e-4],
    ['2 microns', 'length', 2e-3],
    ['5 Å', 'length', 5e-7],
    ['1 in', 'length', 25.4],
    ['2e-3 mm/s', 'reactivity', 2e-3],
    ['0.01 1/s', 'rate', 0.01],
    ['0.01/s', 'rate', 0.01],
    ['1 s^-1', 'rate', 1],
    ['20 min', 'time', 1200],
    ['2 h', 'time', 7200],
    ['1.5 d', 'time', 129600],
    ['250 ms', 'time', 0.25],
    ['10 %', 'fraction', 0.1],
    ['0.1', 'fraction', 0.1],
    ['30 deg', 'angle', 30],
    ['30°', 'angle', 30],
    ['−3 mm', 'length', -3],
    ['1.2×10⁻⁴ mm²/s', 'diffusion', 1.2e-4],
    ['1.2 x 10^-4 mm^2/s', 'diffusion', 1.2e-4],
    ['12\u202f345 s', 'time', 12345],
    ['.5mm', 'length', 0.5],
  ] as const)('reads %s as a %s', (text, dimension, expected) => {
    expect(read(text, dimension)).toBe(expected);
  });

  it('converts exactly: the double nearest to the true value, for every decimal and prefix', () => {
    // Law: n·10^e µm is n·10^(e−3) mm, and that decimal text's own double is by definition the nearest one.
    const whole = fc.integer({ min: -1e9, max: 1e9 });
    const power = fc.integer({ min: -30, max: 20 });
    fc.assert(
      fc.property(whole, power, (n, e) => {
        expect(read(`${n}e${e} um`, 'length')).toBe(n === 0 ? 0 : Number(`${n}e${e - 3}`));
        expect(read(`${n}e${e} mm^2/ms`, 'diffusion')).toBe(n === 0 ? 0 : Number(`${n}e${e + 3}`));
      }),
      { seed: 11 },
    );
  });

  it('divides by numbers that no double holds, rounding once', () => {
    // 1 min = 60 s: 7 mm/min is 7/60 mm/s, which division of two doubles also rounds once.
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 2 ** 40 }), (n) => {
        expect(read(`${n} mm/min`, 'reactivity')).toBe(n / 60);
      }),
      { seed: 12 },
    );
  });

  it('keeps any double written out in full', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        const ratio = ratioOfDecimal(String(value));
        expect(ratio && numberOf(ratio)).toBe(value === 0 ? 0 : value);
      }),
      { seed: 13 },
    );
    expect(numberOf(times({ over: 1n, under: 3n }, { over: 3n, under: 1n }))).toBe(1);
  });
});

describe('values that are refused', () => {
  it('refuses a decimal comma with the point form', () => {
    expect(() => read('0,5 mm', 'length')).toThrow('Write "0.5 mm"');
    expect(() => read('1,5e-4 mm^2/s', 'diffusion')).toThrow('Write "1.5e-4 mm^2/s"');
    expect(() => read('1,000 mm', 'length')).toThrow('"1000 mm" if thousands are meant');
    expect(() => read('1.234,5 mm', 'length')).toThrow('Write "1234.5 mm"');
  });

  it('refuses another dimension, saying what was expected with an example', () => {
    expect(() => read('2e-3 mm^2/s', 'reactivity')).toThrow(
      'UNIT_WRONG: "mm^2/s" is length^2/time, but a reactivity is length/time. Give one such as "2e-3 mm/s"',
    );
    expect(() => read('5 s', 'length')).toThrow('Give one such as "0.5 mm"');
    expect(() => read('5 kg', 'length')).toThrow('not known as a unit of length and time');
    expect(() => read('30 deg', 'length')).toThrow('UNIT_WRONG');
    expect(() => read('5 m', 'angle')).toThrow('no unit of angle');
  });

  it('refuses a text without a unit, and tells both ways out', () => {
    expect(() => read('0.5', 'length')).toThrow(/has no unit.*a number without quotes, which is in mm/);
  });

  it.each([
    '',
    'mm',
    'fast',
    '1 furlongs',
    '1.2.3 mm',
    '1e999999 mm',
    '--1 mm',
    '1 mm mm mm mm',
    '5 mm^0.5',
    '1 mm; 2',
  ])('refuses %j as a length', (text) => {
    expect(() => read(text, 'length')).toThrow(/UNIT_WRONG|CASE_VALUE_WRONG|VALUE_OUT_OF_RANGE/);
  });

  it('never reads a text as something that is not finite', () => {
    fc.assert(
      fc.property(
        fc.string({ maxLength: 30 }),
        fc.constantFrom('length', 'time', 'fraction', 'rate'),
        (text, of) => {
          let value = 0;
          try {
            value = read(text, of as Dimension);
          } catch (error) {
            expect(String(error)).toMatch(/UNIT_WRONG|CASE_VALUE_WRONG|VALUE_OUT_OF_RANGE/);
          }
          expect(Number.isFinite(value)).toBe(true);
        },
      ),
      { seed: 14 },
    );
  });
});

describe('units of a case', () => {
  const refuseUnit = (of: string, what: string, remedy: string): never => {
    throw new Error(`${of}: ${what}. ${remedy}`);
  };

  it('prints µ however it was typed', () => {
    expect(readUnits({ length: 'um', time: 'min' }, refuseUnit)).toEqual({ length: 'µm', time: 'min' });
  });

  it('refuses a time as the unit of length', () => {
    expect(() => readUnits({ length: 's', time: 's' }, refuseUnit)).toThrow(
      'length: "s" is no unit of length',
    );
    expect(() => readUnits({ length: 'mm', time: 'parsecs per hour' }, refuseUnit)).toThrow(
      'no unit of time',
    );
  });

  it('knows no units under "none", but takes plain numbers, per cent and degrees', () => {
    expect(readUnits('none', refuseUnit)).toEqual(none);
    expect(read('0.5', 'length', none)).toBe(0.5);
    expect(read('2 1', 'diffusion', none)).toBe(2);
    expect(read('10 %', 'fraction', none)).toBe(0.1);
    expect(() => read('0.5 mm', 'length', none)).toThrow('this case is without units');
  });
});
