import fc from 'fast-check';
import { expect, it } from 'vitest';
import { fromHex, fromOklab, toHex, toOklab } from '../../viewer/colour/oklab.ts';
import { bandColours, WASH, wantsLightInk, washAt } from '../../viewer/colour/ramp.ts';

it('OKLab of the primaries is as published [Ottosson 2020, table of XYZ pairs recalled; sRGB red by its formula]', () => {
  const [l, a, b] = toOklab([1, 0, 0]);
  expect(l).toBeCloseTo(0.628, 3);
  expect(a).toBeCloseTo(0.2249, 3);
  expect(b).toBeCloseTo(0.1258, 3);
  expect(toOklab([1, 1, 1])[0]).toBeCloseTo(1, 6);
});

it('every sRGB colour comes back from OKLab', () => {
  const channel = fc.integer({ min: 0, max: 255 });
  fc.assert(
    fc.property(channel, channel, channel, (r, g, b) => {
      const hex = toHex([r / 255, g / 255, b / 255]);
      expect(toHex(fromOklab(toOklab(fromHex(hex))))).toBe(hex);
    }),
  );
});

it('the light wash falls in lightness in equal steps of .085 from .963 to .283 (LOOK, ramps)', () => {
  const lightness = WASH.light.map((hex) => toOklab(fromHex(hex))[0]);
  expect(lightness[0]).toBeCloseTo(0.963, 2);
  expect(lightness.at(-1)).toBeCloseTo(0.283, 2);
  lightness.slice(1).forEach((value, i) => {
    // Stops are rounded to 8 bits per channel: about .003 in lightness.
    expect(Math.abs((lightness[i] ?? 0) - value - 0.085)).toBeLessThan(0.004);
  });
});

it('the wash passes through its stops and keeps its order of lightness in both schemes', () => {
  for (const scheme of ['light', 'dark'] as const) {
    WASH[scheme].forEach((hex, i) => {
      expect(toHex(washAt(scheme, i / 8)).toUpperCase()).toBe(hex);
    });
    const sign = scheme === 'light' ? -1 : 1;
    const fine = Array.from({ length: 81 }, (_, i) => toOklab(washAt(scheme, i / 80))[0]);
    fine.slice(1).forEach((value, i) => {
      expect(sign * (value - (fine[i] ?? 0))).toBeGreaterThan(0);
    });
  }
});

it('between two stops it is straight in OKLab, not in sRGB', () => {
  const [from, to] = [0, 1].map((i) => toOklab(fromHex(WASH.light[i] ?? '')));
  const middle = toOklab(washAt('light', 1 / 16));
  middle.forEach((value, i) => {
    expect(value).toBeCloseTo(((from?.[i] ?? 0) + (to?.[i] ?? 0)) / 2, 4);
  });
});

it('bands take the colour of their middle, and ink turns light on dark bands', () => {
  expect(bandColours('light', 8)[0]).toEqual(washAt('light', 1 / 16));
  expect(wantsLightInk(washAt('light', 1))).toBe(true);
  expect(wantsLightInk(washAt('light', 0))).toBe(false);
  expect(wantsLightInk(washAt('dark', 0))).toBe(true);
});
