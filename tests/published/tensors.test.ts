import { describe } from 'vitest';
import { check, everywhere, mean, pin, point, slowestRate } from './check.ts';
import { listed } from './listed.ts';
import { rectangleAverage, rectangleExitTime } from './rectangle-exit-time.ts';

/** Tensors are held to a tenth of a per cent (issue 4). */
const within = 0.001;

const rim = { walls: { rim: { on: 'outline' } }, kinds: { rim: 'absorbing' } };

describe('diffusion that depends on direction', () => {
  const [d11, d12, d22] = ['d11', 'd12', 'd22'].map((label) => listed('ellipse-aniso-30', label)) as [
    number,
    number,
    number,
  ];
  const tensors = {
    'given by its entries': {
      tensor: [
        [d11, d12],
        [d12, d22],
      ],
    },
    'given by its principal values': { principal: [1, 0.1], turned: '30 deg' },
  };
  for (const [words, diffusion] of Object.entries(tensors)) {
    check(
      'ellipse-aniso-30',
      `ellipse 2 × 1, principal values 1 and 0.1 turned by 30°, ${words}: u = w/(2(d₁₁/a² + d₂₂/b²)), w = 1 − x²/a² − y²/b² [substitution]`,
      { drawing: { outline: { ellipse: [0, 0], radii: [2, 1] } }, ...rim, particle: { diffusion } },
      {
        'u(0)': mean(point(0, 0), 1 / (2 * (d11 / 4 + d22))),
        'u(a/2, 0)': mean(pin(1, 0), listed('ellipse-aniso-30', 'u(a/2,0)')),
        average: mean(everywhere, listed('ellipse-aniso-30', 'avg')),
      },
      within,
    );
  }
  check(
    'rect-aniso',
    'unit square with D = diag(4, 1): the rectangle ½ × 1 with D = 1 [Carslaw & Jaeger § 1.20]',
    {
      drawing: { outline: { rectangle: [0, 0, 1, 1] } },
      ...rim,
      particle: {
        diffusion: {
          tensor: [
            [4, 0],
            [0, 1],
          ],
        },
      },
    },
    {
      'u(centre)': mean(point(0.5, 0.5), rectangleExitTime(0.5, 1, 0.25, 0.5)),
      'u(centre), as listed': mean(pin(0.5, 0.5), listed('rect-aniso', 'u(centre)')),
      average: mean(everywhere, rectangleAverage(0.5, 1)),
      'slowest rate 5π²': slowestRate(5 * Math.PI ** 2),
      'average, as listed': mean(everywhere, listed('rect-aniso', 'avg')),
    },
    within,
  );

  // With D = diag((1+x)², 1) nothing depends on y: the strip with D = (1+x)² (METHODS 1).
  for (const [noise, time] of [
    ['ito', 1 - Math.LN2],
    ['isothermal', Math.LN2 - 1 / 2],
  ] as const) {
    check(
      'strip-RA-varD',
      `a tensor that varies along the strip only, ${noise} noise: as D = (1+x)² [Gardiner ch. 4; Lau & Lubensky 2007]`,
      {
        drawing: { outline: { rectangle: [0, 0, 1, 0.25] } },
        walls: { right: { on: 'outline', where: 'x == 1' } },
        kinds: { right: 'absorbing' },
        particle: {
          diffusion: {
            tensor: [
              [{ expression: '(1+x)^2', unit: '1' }, 0],
              [0, 1],
            ],
          },
          noise,
        },
      },
      { 'u(0)': mean(point(0, 0.1), time) },
      within,
    );
  }
});
