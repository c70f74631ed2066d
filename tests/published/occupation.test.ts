import { describe } from 'vitest';
import { asked, check, point, readOff } from './check.ts';
import { listed } from './listed.ts';

describe('time spent in a region', () => {
  check(
    'disk-A-occ',
    'disc from its centre, time in r < ½: c²/4 + (c²/2) ln(1/c) [Green’s function ln(1/r)/2π]',
    {
      drawing: { outline: { circle: [0, 0], radius: 1 }, regions: { core: { circle: [0, 0], radius: 0.5 } } },
      walls: { rim: { on: 'outline' } },
      kinds: { rim: 'absorbing' },
      report: { occupationOf: ['core'] },
    },
    {
      'time in r < ½': asked('time in core', point(0, 0), listed('disk-A-occ', 'time in r<0.5')),
      'time outside: the rest of the mean': readOff(
        point(0, 0),
        listed('disk-A-occ', 'time outside'),
        ({ mean, occupation }) => mean.value - (occupation?.['core']?.value ?? Number.NaN),
      ),
      'part of the mean of 1/4': readOff(
        point(0, 0),
        4 * listed('disk-A-occ', 'time in r<0.5'),
        ({ occupation }) => occupation?.['core']?.fraction,
      ),
    },
  );
});
