import fc from 'fast-check';
import { expect, it } from 'vitest';
import { LabelRoom, placesAround } from '../../viewer/plan/labels.ts';
import { catchingStretches, loopsByUse, plainRuns } from '../../viewer/plan/stretches.ts';
import { fluxCurve, fluxTop, spansOf, stripRows } from '../../viewer/strip/strip-scale.ts';
import { fakeLayout } from './support/fake-case.ts';

const loop = (name: string, length: number) => ({
  name,
  role: 'hole' as const,
  length,
  mark: [0, 0] as [number, number],
  outward: [1, 0] as [number, number],
});
const wall = (from: number, to: number) => ({
  loop: 'outline',
  kind: 'absorbing' as const,
  from,
  to,
  points: [
    [0, 0],
    [1, 0],
    [3, 0],
  ] as [number, number][],
  flux: [0.2, 0.4],
});

it('loops share one scale, and rows as long as they fit', () => {
  const { rows, scale } = stripRows([loop('outline', 10), loop('a', 3), loop('b', 3), loop('c', 5)], 500, 20);
  expect(scale).toBe(50);
  expect(rows.map((row) => row.loops.map((one) => [one.loop.name, one.left]))).toEqual([
    [['outline', 0]],
    [
      ['a', 0],
      ['b', 170],
    ],
    [['c', 0]],
  ]);
});

it('a stretch over the mark is two pieces', () => {
  expect(spansOf(wall(9, 1), 10)).toEqual([
    [9, 10],
    [0, 1],
  ]);
  expect(spansOf(wall(2, 5), 10)).toEqual([[2, 5]]);
  expect(spansOf(wall(9, 0), 10)).toEqual([[9, 10]]);
});

it('the share per length stands at the middles of the chords', () => {
  expect(fluxCurve(wall(0, 3))).toEqual([
    [0.5, 0.2],
    [2, 0.4],
  ]);
});

/** A pad of length 1 with the flux of a narrow opening, c ÷ √(t (1 − t)): no bound at its ends [Crank 1975, recalled]. */
function singular(n: number) {
  const points = Array.from({ length: n + 1 }, (_, i): [number, number] => [i / n, 0]);
  const flux = Array.from(
    { length: n },
    (_, i) => 1 / (Math.PI * Math.sqrt(((i + 0.5) / n) * (1 - (i + 0.5) / n))),
  );
  return { ...wall(0, 1), points, flux };
}

it('peaks at pad ends are cut and said to be cut, and the scale does not depend on how fine the mesh is', () => {
  const [coarse, fine] = [fluxTop([singular(60)]), fluxTop([singular(3000)])];
  expect(coarse).toEqual({ top: fine.top, cut: true });
  // The middle of the pad, 2 ÷ π, must stay readable.
  expect(2 / Math.PI / fine.top).toBeGreaterThan(0.2);
});

it('a flux without peaks is shown whole, also where one part of the stretch catches most', () => {
  expect(fluxTop([wall(0, 3)])).toEqual({ top: expect.any(Number), cut: false });
  expect(fluxTop([wall(0, 3)]).top).toBeGreaterThanOrEqual(0.4);
  expect(fluxTop([])).toEqual({ top: 0, cut: false });
});

it('stretches and runs cover each loop once; only what catches is a stretch', () => {
  const layout = fakeLayout('four short pads', 'anywhere');
  expect(catchingStretches(layout).map((one) => one.wall.name)).toHaveLength(4);
  const { used, idle } = loopsByUse(layout);
  expect([used.length, idle.length]).toEqual([1, 5]);
  const runs = plainRuns(layout);
  expect(runs.filter((run) => run.closed)).toHaveLength(5);
  // Four pads cut the outline into four runs; the one over s = 0 is in one piece.
  expect(runs.filter((run) => !run.closed)).toHaveLength(4);
});

it('a coated post is a whole stretch', () => {
  const stretches = catchingStretches(fakeLayout('coated posts', 'anywhere'));
  expect(stretches).toHaveLength(5);
  expect(stretches.every((one) => one.whole && one.post)).toBe(true);
});

it('labels that were given room never overlap and stay in the area', () => {
  const point = fc.tuple(fc.integer({ min: 0, max: 400 }), fc.integer({ min: 0, max: 300 }));
  fc.assert(
    fc.property(fc.array(point, { minLength: 2, maxLength: 12 }), (pins) => {
      const room = new LabelRoom({ left: 0, right: 600, top: 0, bottom: 400 });
      const around = { left: 150, right: 450, top: 100, bottom: 350 };
      const placed = pins.flatMap((pin) => {
        const at = room.place(placesAround(pin, around, [80, 36]), [80, 36]);
        return at === undefined ? [] : [at];
      });
      expect(placed.length).toBeGreaterThan(0);
      placed.forEach(([x, y], i) => {
        expect(x - 40).toBeGreaterThanOrEqual(0);
        expect(y + 18).toBeLessThanOrEqual(400);
        for (const [ox, oy] of placed.slice(0, i)) {
          expect(Math.abs(x - ox) >= 80 || Math.abs(y - oy) >= 36).toBe(true);
        }
      });
    }),
  );
});
