import { describe, expect, it } from 'vitest';
import { listed } from './listed.ts';
import { nodeLimit, type Setting, solved } from './setting.ts';

/** Relative error allowed. */
const within = 0.001;

/** Conduction shape factor per length between two loops, D = 1: the conductance of the exit `inner`. */
function shapeFactor(setting: Setting): number {
  const answers = solved(setting, { anywhere: { evenIn: 'everywhere' } }, {}).answers[0];
  expect(answers?.mesh.nodes).toBeLessThanOrEqual(nodeLimit);
  return answers?.conductance?.['inner']?.value ?? Number.NaN;
}

const around = (outline: object, hole: object): Setting => ({
  drawing: { outline, holes: { core: hole } },
  walls: { outer: { on: 'outline' }, inner: { on: 'core' } },
  kinds: { outer: 'absorbing', inner: 'absorbing' },
});

describe('conduction shape factors', () => {
  it('ecc-0.4: eccentric cylinders, S = 2π/acosh((D² + d² − 4z²)/2Dd) [Incropera et al. table 4.1 case 7; Möbius map]', () => {
    const found = shapeFactor(around({ circle: [0, 0], radius: 1 }, { circle: [0.4, 0], radius: 0.3 }));
    const formula = (2 * Math.PI) / Math.acosh((4 + 0.36 - 4 * 0.16) / (2 * 2 * 0.6));
    expect(formula).toBeCloseTo(listed('ecc-0.4', 'S per length'), 12);
    expect(Math.abs(found / formula - 1)).toBeLessThan(within);
  });

  for (const ratio of [0.1, 0.25, 0.5, 0.75]) {
    it(`circle-in-square: D/w = ${ratio} [recomputed; Incropera et al. table 4.1 case 6 prints 2π/ln(1.08 w/D)]`, () => {
      const found = shapeFactor(around({ rectangle: [-1, -1, 1, 1] }, { circle: [0, 0], radius: ratio }));
      expect(Math.abs(found / listed('circle-in-square', `S exact (D/w=${ratio})`) - 1)).toBeLessThan(within);
      // The handbook's formula is for thin cores: 1.08 is a rounded conformal radius, up to 1 % off at D/w = 0.75.
      expect(Math.abs(found / ((2 * Math.PI) / Math.log(1.08 / ratio)) - 1)).toBeLessThan(0.012);
    });
  }
});
