import { describe, expect, it } from 'vitest';
import { asked, check, everywhere, point, slowestRate } from './check.ts';
import { listed } from './listed.ts';
import { type Setting, solved } from './setting.ts';

const rim = { walls: { rim: { on: 'outline' } }, kinds: { rim: 'absorbing' } };
const disc: Setting = { drawing: { outline: { circle: [0, 0], radius: 1 } }, ...rim };
const square: Setting = { drawing: { outline: { rectangle: [0, 0, 1, 1] } }, ...rim };
const strip: Setting = {
  drawing: { outline: { rectangle: [0, 0, 1, 0.25] } },
  walls: { left: { on: 'outline', where: 'x == 0' }, right: { on: 'outline', where: 'x == 1' } },
  kinds: { left: 'absorbing', right: 'absorbing' },
};

type Start = Parameters<typeof asked>[1];

/** What is still inside at times of a check, as listed under the labels given. */
const insideAt = (id: string, from: Start, labels: Readonly<Record<string, number>>) =>
  Object.fromEntries(
    Object.entries(labels).map(([label, t]) => [
      label,
      asked(`still inside at ${t}`, from, listed(id, label)),
    ]),
  );

describe('survival, and the times that follow from it', () => {
  const middle = point(0.5, 0.1);
  check('strip-AA-surv', 'strip from its middle [Carslaw & Jaeger 1959 § 3.3; Feller vol. 2 ch. X]', strip, {
    ...insideAt('strip-AA-surv', middle, { 't=0.01': 0.01, 't=0.05': 0.05, 't=0.2': 0.2, 't=0.5': 0.5 }),
    median: asked('median', middle, listed('strip-AA-surv', 'median')),
    t95: asked('time to 95 %', middle, listed('strip-AA-surv', 't95')),
    'rate π²': slowestRate(Math.PI ** 2),
    'left by the left end by 0.1: half of what has gone': asked(
      'share of left by 0.1',
      middle,
      (1 - listed('strip-AA-surv', 't=0.1')) / 2,
    ),
    'time for a quarter to leave by the left end: the median': asked(
      'time for 25 % to leave by left',
      middle,
      listed('strip-AA-surv', 'median'),
    ),
  });

  const centre = point(0, 0);
  check(
    'disk-A-surv',
    'disc from its centre [Carslaw & Jaeger 1959 § 7.6; Abramowitz & Stegun table 9.5]',
    disc,
    {
      ...insideAt('disk-A-surv', centre, { 'S(0.05)': 0.05, 'S(0.2)': 0.2, 'S(0.5)': 0.5, 'S(1.0)': 1 }),
      median: asked('median', centre, listed('disk-A-surv', 'median')),
      t95: asked('time to 95 %', centre, listed('disk-A-surv', 't95')),
      t99: asked('time to 99 %', centre, listed('disk-A-surv', 't99')),
      'slowest rate j₀₁², the first of disk-eigs': slowestRate(listed('disk-eigs', 'j01^2')),
    },
  );

  check('square-A-surv', 'square from its centre: the product of two strips [Newman 1931]', square, {
    ...insideAt('square-A-surv', point(0.5, 0.5), { 'S(0.02)': 0.02, 'S(0.05)': 0.05, 'S(0.2)': 0.2 }),
    median: asked('median', point(0.5, 0.5), listed('square-A-surv', 'median')),
    t95: asked('time to 95 %', point(0.5, 0.5), listed('square-A-surv', 't95')),
    'rate 2π², rect-eigs all absorbing': slowestRate(listed('rect-eigs', 'all absorb')),
    ...Object.fromEntries(
      Object.entries({ 'S(0.01)': 0.01, 'S(0.05)': 0.05, 'S(0.1)': 0.1 }).map(([label, t]) => [
        `square-A-surv-uniform ${label} [Crank 1975 § 4.3]`,
        asked(`still inside at ${t}`, everywhere, listed('square-A-surv-uniform', label)),
      ]),
    ),
  });
});

it('rel-survival: ∫S dt is the mean, 2∫tS dt the second moment, and −ln S/t tends to the slowest rate [Khasminskii 1959]', () => {
  // Equal steps from t = 0 with the error of the trapezoidal rule, −step²/12·S′, at the start alone; S′(0) = 0 in the middle.
  const step = 0.004;
  const survivalAt = Array.from({ length: 750 }, (_, k) => (k + 1) * step);
  const [answers] = solved({ ...strip, report: { survivalAt } }, { middle: point(0.5, 0.1).start }).answers;
  const curve = answers?.survival ?? [];
  const sum = curve.reduce((total, { value }) => total + step * value, step / 2);
  const second = curve.reduce((total, { t, value }) => total + 2 * step * t * value, 0);
  expect(Math.abs(sum / (answers?.mean.value ?? Number.NaN) - 1)).toBeLessThan(1e-4);
  // The trapezoidal rule errs by −step²/12·(2tS)′ = −step²/6 at the start.
  const corrected = second + step ** 2 / 6;
  expect(Math.abs(corrected / (answers?.moments[1]?.value ?? Number.NaN) - 1)).toBeLessThan(1e-4);
  const [before, last] = curve.slice(-2);
  const rate = Math.log((before?.value ?? 0) / (last?.value ?? 1)) / step;
  expect(Math.abs(rate * (answers?.decayTime?.value ?? 0) - 1)).toBeLessThan(1e-6);
});
