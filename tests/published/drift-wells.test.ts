import { describe } from 'vitest';
import { check, mean, pin, point } from './check.ts';
import { listed } from './listed.ts';

/** Escape from wells is held to half a per cent (issue 4). */
const within = 0.005;

const D = 0.1;

describe('escape over a barrier', () => {
  const separable = [
    {
      end: 1,
      words: 'by components',
      drift: { x: { expression: 'x - x^3', unit: '1' }, y: { expression: '-y', unit: '1' } },
    },
    {
      end: 0,
      words: 'by the potential',
      drift: { potential: { expression: '((x^2 - 1)^2/4 + y^2/2)/0.1' } },
    },
  ];
  for (const { end, words, drift } of separable) {
    check(
      'kramers-sep-0.1',
      `V = (x²−1)²/4 + y²/2, D = 0.1, ${words}, caught at x = ${end} [Kramers 1940; Gardiner § 5.2.7, by double quadrature]`,
      {
        drawing: { outline: { rectangle: [-2, -1, end, 1] } },
        walls: { right: { on: 'outline', where: `x == ${end}` } },
        kinds: { right: 'absorbing' },
        particle: { diffusion: D, drift },
      },
      { 'u(−1, 0)': mean(point(-1, 0), listed('kramers-sep-0.1', `u(-1,0) absorb x=${end}`)) },
      within,
    );
  }
  const coupled = {
    'by components': {
      x: { expression: 'x - x^3 - x*y^2', unit: '1' },
      y: { expression: '-(1 + x^2)*y', unit: '1' },
    },
    'by the potential': { potential: { expression: '((x^2 - 1)^2/4 + (1 + x^2)*y^2/2)/0.1' } },
  };
  for (const [words, drift] of Object.entries(coupled)) {
    check(
      'kramers-2d-0.1',
      `V = (x²−1)²/4 + (1+x²)y²/2, D = 0.1, ${words} [Langer 1969; Bovier et al. 2004, by collocation]`,
      {
        drawing: { outline: { rectangle: [-2, -1.2, 1, 1.2] } },
        walls: { right: { on: 'outline', where: 'x == 1' } },
        kinds: { right: 'absorbing' },
        particle: { diffusion: D, drift },
      },
      {
        'u(−1, 0)': mean(point(-1, 0), listed('kramers-2d-0.1', 'u(-1,0)')),
        'u(−0.5, 0)': mean(pin(-0.5, 0), listed('kramers-2d-0.1', 'u(-0.5,0)')),
      },
      within,
    );
  }
});
