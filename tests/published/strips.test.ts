import { describe } from 'vitest';
import { check, evenIn, everywhere, mean, pin, point, share } from './check.ts';
import type { Setting } from './setting.ts';

/** The strip 0 < x < 1 as a rectangle of height 1/4 whose long sides reflect, so that nothing depends on y. */
function strip(kinds: Setting['kinds'], regions: object = {}): Setting {
  return {
    drawing: { outline: { rectangle: [0, 0, 1, 0.25] }, regions },
    walls: { left: { on: 'outline', where: 'x == 0' }, right: { on: 'outline', where: 'x == 1' } },
    kinds,
  };
}

describe('strips', () => {
  check(
    'strip-AA',
    'both ends absorbing, u = x(1−x)/2 [Redner 2001 ch. 2; Gardiner § 5.2]',
    strip({ left: 'absorbing', right: 'absorbing' }),
    {
      'u(1/2)': mean(point(0.5, 0.1), 1 / 8),
      'u(1/4)': mean(pin(0.25, 0.2), 3 / 32),
      average: mean(everywhere, 1 / 12),
      'share of the left end from x = 1/4': share('left', point(0.25, 0.05), 3 / 4),
    },
  );

  check(
    'strip-RA',
    'left end reflecting, right end absorbing, u = (1−x²)/2 [Redner 2001 ch. 2; Berg 1983]',
    strip(
      { right: 'absorbing' },
      {
        'left half': { rectangle: [0, 0, 0.5, 0.25] },
        far: {
          polygon: [
            [0.5, -1],
            [2, -1],
            [2, 1],
            [0.5, 1],
          ],
        },
      },
    ),
    {
      'u(0), on the wall itself': mean(point(0, 0.1), 1 / 2),
      'u(1/2)': mean(pin(0.5, 0.25), 3 / 8),
      average: mean(everywhere, 1 / 3),
      'average over the left half: 1/2 − (1/2)²/6': mean(evenIn('left half'), 1 / 2 - 1 / 24),
      'average over the right half, a region that reaches beyond the outline': mean(evenIn('far'), 5 / 24),
    },
  );

  check(
    'strip-RA',
    'a region line at x = 0.3 with the same D on both sides changes nothing',
    strip({ right: 'absorbing' }, { line: { rectangle: [0, 0, 0.3, 0.25] } }),
    { 'u(0)': mean(point(0, 0.1), 1 / 2), 'u(0.3), on the line': mean(point(0.3, 0.1), (1 - 0.09) / 2) },
  );
});
