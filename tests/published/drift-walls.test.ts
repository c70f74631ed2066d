import { describe } from 'vitest';
import { check, mean, pin, point, share } from './check.ts';

const within = 0.001;

describe('the wall condition does not know the drift', () => {
  // u = x/v + A + B e^(−vx), the left end reflecting: u′(0) = 0, the right one −u′(1) = κu(1) (METHODS 2).
  const [kappa, v] = [3, 2];
  const slope = (1 - Math.exp(-v)) / v;
  const atWall = slope / kappa;
  const u = (x: number): number => atWall + (1 - x) / v - (Math.exp(-v * x) - Math.exp(-v)) / v ** 2;
  check(
    'strip-RA-drift2',
    'κ = 3, v = 2: u(1) = (1 − e⁻²)/6 = 0.1441; with the drift in the condition it would be 0.4323 [METHODS 2; Gardiner § 5.2]',
    {
      drawing: { outline: { rectangle: [0, 0, 1, 0.25] } },
      walls: { right: { on: 'outline', where: 'x == 1' } },
      kinds: { right: { partlyAbsorbing: kappa } },
      particle: { diffusion: 1, drift: { x: v, y: 0 } },
    },
    {
      'u(1), on the wall': mean(point(1, 0.1), 0.14411),
      'u(1), by the formula': mean(pin(1, 0.2), atWall),
      'u(0)': mean(pin(0, 0.2), u(0)),
    },
    within,
  );
  check(
    'strip-AA-drift1',
    'two media with drift 1 in the right half only: u′ and u continuous at x = ½, D = 1 in both [piecewise solution]',
    {
      drawing: {
        outline: { rectangle: [0, 0, 1, 0.25] },
        regions: { stream: { rectangle: [0.5, -1, 2, 1] } },
      },
      walls: { left: { on: 'outline', where: 'x == 0' }, right: { on: 'outline', where: 'x == 1' } },
      kinds: { left: 'absorbing', right: 'absorbing' },
      particle: { diffusion: 1, driftIn: { stream: { x: 1, y: 0 } } },
    },
    { 'right from ½': share('right', point(0.5, 0.1), 1 / (1 + 2 * (1 - Math.exp(-0.5)))) },
    within,
  );
});
