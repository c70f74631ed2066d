import { expect, it } from 'vitest';
import { readShape } from '../../src/case/shapes.ts';
import { smallestGap } from '../../src/case/smallest-gap.ts';
import { drawingContext } from '../support/drawing-context.ts';

const line = (name: string, raw: unknown) => ({ name, shape: readShape(raw, name, 'up', drawingContext()) });

it('finds the narrowest place among all pairs, between curves to many digits', () => {
  const found = smallestGap([
    line('frame', { rectangle: [-9, -9, 9, 9] }),
    line('a', { circle: [0, 0], radius: 1 }),
    line('b', { circle: [3, 4], radius: 2.5 }),
    line('c', { circle: [-3, -4], radius: 1 }),
  ]);
  // Centres 5 apart: 5 − 1 − 2.5.
  expect(found).toEqual({ gap: expect.closeTo(1.5, 9), between: ['a', 'b'] });
});

it('finds the corner of one line near the middle of another, and 0 where lines meet', () => {
  const wall = line('wall', {
    line: [
      [0, 0],
      [10, 0],
    ],
  });
  expect(
    smallestGap([
      wall,
      line('tip', {
        line: [
          [3.3, 5],
          [3.3, 0.25],
        ],
      }),
    ])?.gap,
  ).toBeCloseTo(0.25, 12);
  expect(
    smallestGap([
      wall,
      line('fin', {
        line: [
          [4, 0],
          [4, 2],
        ],
      }),
    ])?.gap,
  ).toBe(0);
  expect(smallestGap([wall])).toBeUndefined();
});
