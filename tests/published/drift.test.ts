import { describe } from 'vitest';
import { check, everywhere, mean, pin, point, type Reading, share } from './check.ts';
import { listed } from './listed.ts';
import type { Setting } from './setting.ts';

/** Drift is held to a tenth of a per cent (issue 4). */
const within = 0.001;

/** A strip low < x < high of height 1/4 with reflecting long sides, so that nothing depends on y. */
function strip(particle: object, kinds: Setting['kinds'], low = 0, high = 1): Setting {
  return {
    drawing: { outline: { rectangle: [low, 0, high, 0.25] } },
    walls: { left: { on: 'outline', where: `x == ${low}` }, right: { on: 'outline', where: `x == ${high}` } },
    kinds,
    particle: { diffusion: 1, ...particle },
  };
}

const both = { left: 'absorbing', right: 'absorbing' };
const flow = (v: number) => ({ drift: { x: v, y: 0 } });

/** u(x) with both ends absorbing: x/v less the whole way's time by the chance to end on the right. */
const toRight = (v: number, x: number): number => Math.expm1(-v * x) / Math.expm1(-v);
const timeBoth = (v: number, x: number): number => (toRight(v, x) - x) / v;
/** u(x) with the left end reflecting: (1−x)/v − (e^(−vx) − e^(−v))/v². */
const timeRight = (v: number, x: number): number => (1 - x) / v - (Math.exp(-v * x) - Math.exp(-v)) / v ** 2;

describe('constant drift along a strip', () => {
  const ids = { 1: 'strip-AA-drift1', 20: 'strip-AA-drift20', [-5]: 'strip-AA-drift-5' };
  for (const [v, id] of Object.entries(ids).map(([key, name]) => [Number(key), name] as const)) {
    const places = [0.1, 0.5, 0.9];
    const readings = places.flatMap((x): [string, Reading][] => [
      [`u(${x})`, mean(point(x, 0.1), timeBoth(v, x))],
      [`u(${x}), as listed`, mean(pin(x, 0.2), listed(id, `u(${x})`))],
      [`right(${x})`, share('right', pin(x, 0.1), toRight(v, x))],
      [`right(${x}), as listed`, share('right', pin(x, 0.2), listed(id, `pRight(${x})`))],
    ]);
    check(
      id,
      `both ends absorbing, drift ${v}: u = (p − x)/v, p = (1 − e^(−vx))/(1 − e^(−v)) [Redner 2001 § 2.2.2; Gardiner § 5.2]`,
      strip(flow(v), both),
      { ...Object.fromEntries(readings), average: mean(everywhere, listed(id, 'avg')) },
      within,
    );
  }
  for (const [v, id] of [
    [2, 'strip-RA-drift2'],
    [-2, 'strip-RA-drift-2'],
  ] as const) {
    check(
      id,
      `left end reflecting, drift ${v}: u = (1−x)/v − (e^(−vx) − e^(−v))/v² [Gardiner § 5.2.2]`,
      strip(flow(v), { right: 'absorbing' }),
      {
        'u(0), on the reflecting wall': mean(point(0, 0.1), timeRight(v, 0)),
        'u(1/2)': mean(pin(0.5, 0.2), timeRight(v, 0.5)),
        'u(0), as listed': mean(pin(0, 0.2), listed(id, 'u(0)')),
        average: mean(everywhere, listed(id, 'avg')),
      },
      within,
    );
  }
  for (const v of [100, -100]) {
    check(
      'strip-RA-drift2',
      `the same formula at a Péclet number of 100, drift ${v} [Gardiner § 5.2.2]`,
      strip(flow(v), { right: 'absorbing' }),
      {
        'u(0)': mean(point(0, 0.1), timeRight(v, 0)),
        'u(1/2)': mean(pin(0.5, 0.2), timeRight(v, 0.5)),
        'u(0.9)': mean(pin(0.9, 0.2), timeRight(v, 0.9)),
      },
      within,
    );
  }
});

describe('constant drift in the plane', () => {
  for (const [v, id] of [
    [1, 'disk-A-drift1'],
    [4, 'disk-A-drift4'],
  ] as const) {
    check(
      id,
      `unit disc, rim absorbing, drift ${v}: Bessel series, exit angle by von Mises [Wendel 1980; Kent 1978]`,
      {
        drawing: { outline: { circle: [0, 0], radius: 1 } },
        walls: {
          right: { on: 'outline', angles: [-45, 45] },
          sides: { on: 'outline', where: 'x > 0 and abs(y) > x' },
          left: { on: 'outline', where: 'x < 0' },
        },
        kinds: { right: 'absorbing', sides: 'absorbing', left: 'absorbing' },
        particle: { diffusion: 1, ...flow(v) },
      },
      {
        'u(0, 0)': mean(point(0, 0), listed(id, 'u(0,0)')),
        'u(0.5, 0)': mean(pin(0.5, 0), listed(id, 'u(0.5,0)')),
        'u(−0.5, 0)': mean(pin(-0.5, 0), listed(id, 'u(-0.5,0)')),
        'u(0, 0.5)': mean(pin(0, 0.5), listed(id, 'u(0,0.5)')),
        'share within 45°': share('right', point(0, 0), listed(id, 'P(exit |theta|<pi/4)')),
        'share beyond 90°': share('left', pin(0, 0), 1 - listed(id, 'P(exit |theta|<pi/2)')),
      },
      within,
    );
  }
  check(
    'square-A-drift-3_4',
    'unit square, all sides absorbing, drift (3, 4) [gauge transform; Carslaw & Jaeger § 1.7]',
    {
      drawing: { outline: { rectangle: [0, 0, 1, 1] } },
      walls: { rim: { on: 'outline' } },
      kinds: { rim: 'absorbing' },
      particle: { diffusion: 1, drift: { x: 3, y: 4 } },
    },
    {
      'u(0.5, 0.5)': mean(point(0.5, 0.5), listed('square-A-drift-3_4', 'u(0.5, 0.5)')),
      'u(0.25, 0.25)': mean(pin(0.25, 0.25), listed('square-A-drift-3_4', 'u(0.25, 0.25)')),
      'u(0.75, 0.25)': mean(pin(0.75, 0.25), listed('square-A-drift-3_4', 'u(0.75, 0.25)')),
    },
    within,
  );
});

describe('a drift that is no slope', () => {
  check(
    'disk-A',
    'turning about the middle changes no time of a disc: u = (1 − r²)/4, solved as irreversible [b·∇u = 0]',
    {
      drawing: { outline: { circle: [0, 0], radius: 1 } },
      walls: { rim: { on: 'outline' } },
      kinds: { rim: 'absorbing' },
      particle: {
        diffusion: 1,
        drift: { x: { expression: '-10*y', unit: '1' }, y: { expression: '10*x', unit: '1' } },
      },
    },
    {
      'u(0)': mean(point(0, 0), 1 / 4),
      'u(1/2)': mean(pin(0.3, 0.4), 3 / 16),
      average: mean(everywhere, 1 / 8),
    },
    within,
  );
});

describe('a pull towards the middle (Ornstein–Uhlenbeck)', () => {
  const pulls = {
    'strip-OU-k1': { words: 'by its component −x', drift: { x: { expression: '-x', unit: '1' }, y: 0 } },
    'strip-OU-k4': { words: 'by its potential 2x²', drift: { potential: { expression: '2*x^2' } } },
  };
  for (const [id, { words, drift }] of Object.entries(pulls)) {
    check(
      id,
      `both ends of −1 < x < 1 absorbing, ${words} [Siegert 1951; Darling & Siegert 1953]`,
      strip({ drift }, both, -1, 1),
      {
        'u(0)': mean(point(0, 0.1), listed(id, 'u(0)')),
        'u(1/2)': mean(pin(0.5, 0.2), listed(id, 'u(0.5)')),
      },
      within,
    );
  }
  const ways = {
    'by its components': {
      drift: { x: { expression: '-x', unit: '1' }, y: { expression: '-y', unit: '1' } },
    },
    'by its potential': { drift: { potential: { expression: '(x^2 + y^2)/2' } } },
  };
  for (const [words, particle] of Object.entries(ways)) {
    check(
      'disk-A-OU1',
      `unit disc, rim absorbing, ${words}: u(0) = (Ei(z) − ln z − γ)/(2k), z = kR²/2D [Wang & Uhlenbeck 1945; Gardiner § 5.2]`,
      {
        drawing: { outline: { circle: [0, 0], radius: 1 } },
        walls: { rim: { on: 'outline' } },
        kinds: { rim: 'absorbing' },
        particle: { diffusion: 1, ...particle },
      },
      {
        'u(0)': mean(point(0, 0), listed('disk-A-OU1', 'u(0)')),
        'u(1/2)': mean(pin(0.3, 0.4), listed('disk-A-OU1', 'u(0.5)')),
      },
      within,
    );
  }
});
