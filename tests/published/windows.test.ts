import { describe } from 'vitest';
import { arcAverage, arcExitTime } from './arc-exit-time.ts';
import { check, everywhere, mean, pin, point } from './check.ts';
import { listed } from './listed.ts';
import type { Setting } from './setting.ts';

const degrees = (radians: number): number => (180 / Math.PI) * radians;

/** The unit disc with equally spaced absorbing arcs, the first about angle 0. */
function disc(halfAngle: number, arcs = 1): Setting {
  const half = degrees(halfAngle);
  const names = Array.from({ length: arcs }, (_, k) => `arc ${k}`);
  const angles = names.map((name, k) => {
    const middle = (360 / arcs) * k;
    return [name, { on: 'outline', angles: [middle - half, middle + half] }] as const;
  });
  return {
    drawing: { outline: { circle: [0, 0], radius: 1 } },
    walls: Object.fromEntries(angles),
    kinds: Object.fromEntries(names.map((name) => [name, 'absorbing'])),
  };
}

const halfAngles = {
  'disk-arc-0.05': 0.05,
  'disk-arc-0.1': 0.1,
  'disk-arc-pi_6': Math.PI / 6,
  'disk-arc-pi_2': Math.PI / 2,
};
const unitSquare = { outline: { rectangle: [0, 0, 1, 1] } };

describe('windows', () => {
  for (const [id, eps] of Object.entries(halfAngles)) {
    check(
      id,
      'disc with one absorbing arc of that half-angle [Caginalp & Chen 2012; Pillay, Ward, Peirce & Kolokolnikov 2010]',
      disc(eps),
      {
        'u(0, 0) = 1/4 − ln sin(ε/2)': mean(point(0, 0), arcExitTime(0, 0, eps)),
        average: mean(everywhere, arcAverage(eps)),
        'u(−1, 0), far side of the rim': mean(point(-1, 0), arcExitTime(-1, 0, eps)),
        'u(0.5, 0)': mean(pin(0.5, 0), arcExitTime(0.5, 0, eps)),
        'u(0, 0.5)': mean(pin(0, 0.5), arcExitTime(0, 0.5, eps)),
        'u(−0.5, 0)': mean(pin(-0.5, 0), arcExitTime(-0.5, 0, eps)),
      },
    );
  }
  check(
    'disk-2arcs-0.1',
    'disc with two absorbing arcs [Pillay, Ward, Peirce & Kolokolnikov 2010, exact by z → z²]',
    disc(0.1, 2),
    {
      'u(0, 0)': mean(point(0, 0), arcExitTime(0, 0, 0.1, 2)),
      average: mean(everywhere, arcAverage(0.1, 2)),
      'u on the rim midway': mean(point(0, 1), arcExitTime(0, 1, 0.1, 2)),
      'u(0.5, 0)': mean(pin(0.5, 0), arcExitTime(0.5, 0, 0.1, 2)),
      'share of either arc from the centre': { from: point(0, 0), shareOf: 'arc 1', expected: 1 / 2 },
    },
  );
  check(
    'disk-4arcs-pi_16',
    'disc with four absorbing arcs [Pillay, Ward, Peirce & Kolokolnikov 2010, exact by z → z⁴]',
    disc(Math.PI / 16, 4),
    {
      'u(0, 0)': mean(point(0, 0), arcExitTime(0, 0, Math.PI / 16, 4)),
      average: mean(everywhere, arcAverage(Math.PI / 16, 4)),
      'u on the rim midway': mean(
        point(Math.SQRT1_2, Math.SQRT1_2),
        arcExitTime(Math.SQRT1_2, Math.SQRT1_2, Math.PI / 16, 4),
      ),
      'u(0.5, 0)': mean(pin(0.5, 0), arcExitTime(0.5, 0, Math.PI / 16, 4)),
      'share of an arc from the centre': { from: point(0, 0), shareOf: 'arc 3', expected: 1 / 4 },
    },
  );
  check(
    'sq-window-mid-0.05',
    'square with a window of width 0.1 in the middle of a side [recomputed; leading term of Pillay, Ward, Peirce & Kolokolnikov 2010]',
    {
      drawing: unitSquare,
      walls: { window: { on: 'outline', near: [0.5, 0], width: 0.1 } },
      kinds: { window: 'absorbing' },
    },
    {
      average: mean(everywhere, listed('sq-window-mid-0.05', 'avg')),
      'u(0.5, 0.5)': mean(point(0.5, 0.5), listed('sq-window-mid-0.05', 'u(0.5,0.5)')),
      'u in the far corners': mean(pin(1, 1), listed('sq-window-mid-0.05', 'u(far corner)')),
    },
  );
  check(
    'sq-window-corner-0.1',
    'square with a window of width 0.1 at a corner [recomputed; corner factor of Pillay, Ward, Peirce & Kolokolnikov 2010]',
    {
      drawing: unitSquare,
      walls: { window: { on: 'outline', from: 0, to: 0.1 } },
      kinds: { window: 'absorbing' },
    },
    {
      average: mean(everywhere, listed('sq-window-corner-0.1', 'avg')),
      'u(0.5, 0.5)': mean(point(0.5, 0.5), listed('sq-window-corner-0.1', 'u(0.5,0.5)')),
      'u(1, 1)': mean(point(1, 1), listed('sq-window-corner-0.1', 'u(1,1)')),
    },
  );
  check(
    'rect-halfbottom',
    'half of the long side absorbing [geometry of Motz 1947, recomputed by the method of particular solutions]',
    {
      drawing: { outline: { rectangle: [-1, 0, 1, 1] } },
      walls: { bottom: { on: 'outline', where: 'y == 0 and x < 0' } },
      kinds: { bottom: 'absorbing' },
    },
    {
      average: mean(everywhere, listed('rect-halfbottom', 'avg')),
      'u(0, 0.5)': mean(point(0, 0.5), listed('rect-halfbottom', 'u(0,0.5)')),
      'u(1, 1)': mean(point(1, 1), listed('rect-halfbottom', 'u(1,1)')),
    },
  );
});
