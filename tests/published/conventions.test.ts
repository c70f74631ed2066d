import { describe } from 'vitest';
import { check, everywhere, mean, pin, point, type Reading, share, slowestRate } from './check.ts';
import { listed } from './listed.ts';
import type { Setting } from './setting.ts';

const conventions = [
  { noise: 'ito', label: 'Ito', short: 'Ito' },
  { noise: 'stratonovich', label: 'Stratonovich', short: 'Strat' },
  { noise: 'isothermal', label: 'isothermal', short: 'isothermal' },
] as const;
type Noise = (typeof conventions)[number]['noise'];

/** The strip 0 < x < 1 of height 1/4 with reflecting long sides. */
function strip(particle: object, kinds: Setting['kinds'], regions: object = {}): Setting {
  return {
    drawing: { outline: { rectangle: [0, 0, 1, 0.25] }, regions },
    walls: { left: { on: 'outline', where: 'x == 0' }, right: { on: 'outline', where: 'x == 1' } },
    kinds,
    particle,
  };
}

/** The unit disc with absorbing rim. */
function disc(particle: object, regions: object = {}): Setting {
  return {
    drawing: { outline: { circle: [0, 0], radius: 1 }, regions },
    walls: { rim: { on: 'outline' } },
    kinds: { rim: 'absorbing' },
    particle,
  };
}

const varying = (expression: string) => ({ expression, unit: '1' });

/** u(0) of the strip with D = (1+x)², left end reflecting. */
const stripTimes: Readonly<Record<Noise, number>> = {
  ito: 1 - Math.LN2,
  stratonovich: Math.LN2 ** 2 / 2,
  isothermal: Math.LN2 - 1 / 2,
};
/** u(0) of the disc with D = 1+r². */
const discTimes: Readonly<Record<Noise, number>> = {
  ito: Math.PI ** 2 / 48,
  stratonovich: Math.log((1 + Math.SQRT2) / 2),
  isothermal: Math.LN2 / 4,
};
/** Chance to leave by the right end from x = 1/2: ∫ D^(−α) up to 1/2 ÷ the whole, D = (1+x)². */
const rightShares: Readonly<Record<Noise, number>> = {
  ito: 1 / 2,
  stratonovich: Math.log(1.5) / Math.LN2,
  isothermal: 2 / 3,
};

for (const { noise, label, short } of conventions) {
  describe(`noise convention ${noise}`, () => {
    const inStrip = { diffusion: varying('(1+x)^2'), noise };
    check(
      'strip-RA-varD',
      'D = (1+x)², left end reflecting; the three answers differ by 59 % [Gardiner ch. 4; van Kampen 1987; Lau & Lubensky 2007]',
      strip(inStrip, { right: 'absorbing' }),
      {
        'u(0)': mean(point(0, 0.1), stripTimes[noise]),
        average: mean(everywhere, listed('strip-RA-varD', `avg ${label}`)),
      },
    );
    check(
      'strip-AA-varD',
      'D = (1+x)², both ends absorbing [Gardiner ch. 4; van Kampen 1987; Lau & Lubensky 2007]',
      strip(inStrip, { left: 'absorbing', right: 'absorbing' }),
      {
        'u(1/2)': mean(point(0.5, 0.1), listed('strip-AA-varD', `u(0.5) ${label}`)),
        average: mean(everywhere, listed('strip-AA-varD', `avg ${label}`)),
      },
    );
    check(
      'strip-varD-hit',
      'D = (1+x)², share of the right end from x = 1/2 [Gardiner ch. 4; Lau & Lubensky 2007]',
      strip(inStrip, { left: 'absorbing', right: 'absorbing' }),
      {
        right: share('right', point(0.5, 0.1), rightShares[noise]),
        'right, as listed': share('right', pin(0.5, 0.2), listed('strip-varD-hit', `p ${short}(0.5)`)),
        left: share('left', point(0.5, 0.1), 1 - rightShares[noise]),
      },
    );
    const jump: Record<string, Reading> = {
      'u(0)': mean(point(0, 0.1), listed('strip-2media', `u(0) ${label}`)),
      average: mean(everywhere, listed('strip-2media', `avg ${label}`)),
    };
    check(
      'strip-2media',
      'D = 2 left of x = 0.3, 0.5 right of it [Ovaskainen & Cornell 2003; Lejay 2006]',
      strip(
        { diffusion: 0.5, diffusionIn: { fast: 2 }, noise },
        { right: 'absorbing' },
        { fast: { rectangle: [0, 0, 0.3, 0.25] } },
      ),
      jump,
    );
    check(
      'strip-2media',
      'the same with the region drawn beyond the outline and D given as an expression there',
      strip(
        { diffusion: 0.5, diffusionIn: { fast: varying('4/2 + 0*x') }, noise },
        { right: 'absorbing' },
        {
          fast: {
            polygon: [
              [-1, -1],
              [0.3, -1],
              [0.3, 2],
              [-1, 2],
            ],
          },
        },
      ),
      jump,
    );
    check(
      noise === 'stratonovich' ? 'disk-A-varD and conv-stratonovich-2d' : 'disk-A-varD',
      'disc with D = 1+r², rim absorbing [Gardiner ch. 4; Lau & Lubensky 2007; Hänggi & Thomas 1982]',
      disc({ diffusion: varying('1 + x^2 + y^2'), noise }),
      { 'u(0)': mean(point(0, 0), discTimes[noise]) },
    );
    check(
      'disk-2media',
      'D = 1 for r < 1/2, 4 outside [Ovaskainen & Cornell 2003; Carslaw & Jaeger § 13.8]',
      disc({ diffusion: 4, diffusionIn: { core: 1 }, noise }, { core: { circle: [0, 0], radius: 0.5 } }),
      {
        'u(0)': mean(point(0, 0), listed('disk-2media', `u(0) ${label}`)),
        ...(noise === 'isothermal' && {
          average: mean(everywhere, listed('disk-2media', 'avg isothermal')),
          'slowest rate': slowestRate(listed('disk-2media', 'rate isothermal')),
        }),
      },
    );
  });
}
