import { describe } from 'vitest';
import { asked, check, evenIn, everywhere, mean, pin, point, share, slowestRate, spot } from './check.ts';
import { listed } from './listed.ts';
import type { Setting } from './setting.ts';

const rim = { on: 'outline' };
const unitDisc: Setting = {
  drawing: { outline: { circle: [0, 0], radius: 1 } },
  walls: { rim },
  kinds: { rim: 'absorbing' },
};

describe('discs and ellipses', () => {
  check(
    'disk-A',
    'rim absorbing, u = (1−r²)/4 [Redner 2001; Berg 1983; Hagen–Poiseuille profile]',
    { ...unitDisc, drawing: { ...unitDisc.drawing, regions: { core: { circle: [0, 0], radius: 0.5 } } } },
    {
      'u(0)': mean(point(0, 0), 1 / 4),
      'u(1/2)': mean(pin(0.5, 0), 3 / 16),
      'u(1/2) elsewhere': mean(pin(-0.3, 0.4), 3 / 16),
      average: mean(everywhere, 1 / 8),
      'average over r < 1/2: (1 − (1/2)²/2)/4': mean(evenIn('core'), 7 / 32),
      'average over a spot of radius 0.1 at r = 0.6: (1 − 0.6² − 0.1²/2)/4': mean(
        spot(0, 0.6, 0.1),
        (1 - 0.36 - 0.005) / 4,
      ),
      'share of the only exit': share('rim', point(0.2, 0.1), 1),
    },
  );

  check(
    'disk-scale',
    'R = 50 um, D = 400 um²/s: R²/4D in seconds, R²/8D on average [dimensional analysis]',
    {
      ...unitDisc,
      units: { length: 'um', time: 's' },
      drawing: { outline: { circle: [0, 0], radius: 50 } },
      particle: { diffusion: '400 um^2/s' },
    },
    {
      'u(0)': mean(point(0, 0), 1.5625),
      average: mean(everywhere, 0.78125),
      median: asked('median', point(0, 0), listed('disk-scale', 'median [s]')),
      'slowest rate': slowestRate(listed('disk-scale', 'rate [1/s]')),
    },
  );

  check(
    'disk-scale',
    'the same with radius in millimetres, D in cm²/h and times in minutes',
    {
      ...unitDisc,
      units: { length: 'mm', time: 'min' },
      drawing: { outline: { circle: [0, 0], radius: '50 um' } },
      particle: { diffusion: '1.44e-2 cm^2/h' },
    },
    { 'u(0)': mean(point(0, 0), 1.5625 / 60), average: mean(everywhere, 0.78125 / 60) },
  );

  check(
    'conv-generator',
    'dX = √(2D) dW with D = 1 gives R²/4, the reading of the probability texts (σ = 1, D = 1/2) R²/2 [Gardiner; Øksendal]',
    { ...unitDisc, particle: { diffusion: 0.5 } },
    { 'u(0) with σ = 1': mean(point(0, 0), 1 / 2) },
  );

  check(
    'ellipse-A-2.0x1.0',
    'rim absorbing, u = a²b²/(2(a²+b²)) (1 − x²/a² − y²/b²), average half of it [Saint-Venant 1855, Timoshenko & Goodier § 106]',
    {
      drawing: { outline: { ellipse: [0, 0], radii: [2, 1] } },
      walls: { rim },
      kinds: { rim: 'absorbing' },
    },
    {
      'u(0)': mean(point(0, 0), 0.4),
      'u(1, 1/2)': mean(pin(1, 0.5), 0.4 * (1 - 1 / 4 - 1 / 4)),
      average: mean(everywhere, 0.2),
      'torsion J = 4 ∫u = π a³b³/(a²+b²)': mean(everywhere, (8 * Math.PI) / 5, (u) => 4 * 2 * Math.PI * u),
    },
  );

  check(
    'ellipse-A-2.0x1.0',
    'turned by 30 degrees and moved it has the same times',
    {
      drawing: { outline: { ellipse: [7, -3], radii: [2, 1], turned: '30 deg' } },
      walls: { rim },
      kinds: { rim: 'absorbing' },
    },
    {
      'u(0)': mean(point(7, -3), 0.4),
      'u(1, 0) of the ellipse': mean(point(7 + Math.cos(Math.PI / 6), -3 + 0.5), 0.3),
      average: mean(everywhere, 0.2),
    },
  );
});
