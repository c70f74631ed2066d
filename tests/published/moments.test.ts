import { describe, expect, it } from 'vitest';
import { asked, check, everywhere, point, readOff } from './check.ts';
import { listed } from './listed.ts';
import { type Setting, solved } from './setting.ts';

const disc: Setting = {
  drawing: { outline: { circle: [0, 0], radius: 1 } },
  walls: { rim: { on: 'outline' } },
  kinds: { rim: 'absorbing' },
  report: { moments: 3 },
};

describe('moments', () => {
  const moment = (n: number) => (given: { moments?: readonly { value: number }[] }) =>
    given.moments?.[n - 1]?.value;
  check('disk-A-moments', 'disc, E[τ²] = (3 − 4r² + r⁴)/32 [Darling & Siegert 1953]', disc, {
    'm₂(0)': readOff(point(0, 0), listed('disk-A-moments', 'm2(0)'), moment(2)),
    'm₃(0)': readOff(point(0, 0), listed('disk-A-moments', 'm3(0)'), moment(3)),
    'm₂(½)': readOff(point(0.5, 0), listed('disk-A-moments', 'm2(0.5)'), moment(2)),
    'm₂, even start': readOff(everywhere, listed('disk-A-moments', 'm2 uniform'), moment(2)),
    'variance at 0': asked(
      'standard deviation',
      point(0, 0),
      listed('disk-A-moments', 'var(0)'),
      (sd) => sd * sd,
    ),
    // Variance over an even start, not the mean of the field's: 1/24 − (1/8)².
    'standard deviation, even start': asked('standard deviation', everywhere, Math.sqrt(1 / 24 - 1 / 64)),
  });
});

it('rel-cond: the mean is Σ share × mean time of those that leave there, at starts and pins [Redner 2001 ch. 1]', () => {
  const [answers] = solved(
    {
      drawing: { outline: { rectangle: [0, 0, 2, 1] }, holes: { post: { circle: [1.2, 0.4], radius: 0.2 } } },
      walls: {
        left: { on: 'outline', where: 'x == 0' },
        top: { on: 'outline', where: 'y == 1 and x > 1.5' },
        coat: { on: 'post' },
      },
      kinds: { left: 'absorbing', top: 'absorbing', coat: { partlyAbsorbing: 0.5 } },
      particle: { diffusion: 1, loss: 0.3 },
    },
    { anywhere: everywhere.start },
    { corner: [1.9, 0.1] },
  ).answers;
  const readings = [answers, answers?.pins['corner']];
  expect(readings).toHaveLength(2);
  for (const reading of readings) {
    const shares = Object.values(reading?.shares ?? {});
    expect(shares).toHaveLength(4);
    const sum = shares.reduce((total, { value, meanTime = 0 }) => total + value * meanTime, 0);
    expect(Math.abs(sum / (reading?.mean.value ?? Number.NaN) - 1)).toBeLessThan(1e-9);
  }
});
