import { expect, it } from 'vitest';
import { chainLength, enclosedArea } from '../../mesher/index.ts';
import { chainOf } from '../../src/case/loop-of-shape.ts';
import { readShape } from '../../src/case/shapes.ts';
import { drawingContext, refusalOf } from '../support/drawing-context.ts';

const ctx = drawingContext();
const read = (raw: unknown, y?: 'up' | 'down') => readShape(raw, 'drawing.outline', y, ctx);
const chain = (raw: unknown, y?: 'up' | 'down') => chainOf('', read(raw, y).curves);

it.each([
  [{ circle: [1, 2], radius: 0.5 }, Math.PI / 4, Math.PI],
  [{ circle: ['1000 um', 2], radius: '500 um' }, Math.PI / 4, Math.PI],
  [{ rectangle: [0, 0, 3, 2] }, 6, 10],
  [{ rectangle: [3, 2, 0, 0] }, 6, 10],
  [
    {
      polygon: [
        [0, 0],
        [4, 0],
        [0, 3],
      ],
    },
    6,
    12,
  ],
  [{ ellipse: [1, 1], radii: [0.5, 0.5], turned: '30 deg' }, Math.PI / 4, Math.PI],
])('draws %j with its area and length', (raw, area, length) => {
  expect(enclosedArea(chain(raw))).toBeCloseTo(area, 13);
  expect(chainLength(chain(raw))).toBeCloseTo(length, 13);
});

it('measures an ellipse as its perimeter series says [Bessel 1825; h = ((a−b)/(a+b))²]', () => {
  const [a, b] = [2, 0.5];
  const h = ((a - b) / (a + b)) ** 2;
  // L = π(a+b) Σ (binomial(½, n))² hⁿ
  let sum = 1;
  let binomial = 1;
  for (let n = 1; n < 200; n++) {
    binomial *= (0.5 - (n - 1)) / n;
    sum += binomial * binomial * h ** n;
  }
  const length = chainLength(chain({ ellipse: [0, 0], radii: [a, b], turned: 20 }));
  expect(length).toBeCloseTo(Math.PI * (a + b) * sum, 12);
});

it('begins at the mark of each shape: +x point, lower left corner, first point, end of the first half axis', () => {
  const start = (raw: unknown, y?: 'up' | 'down') => read(raw, y).curves[0]?.from;
  expect(start({ circle: [1, 2], radius: 0.5 })).toEqual([1.5, 2]);
  expect(start({ rectangle: [3, 2, 0, 0] })).toEqual([0, 0]);
  expect(
    start({
      polygon: [
        [5, 6],
        [7, 6],
        [7, 8],
      ],
    }),
  ).toEqual([5, 6]);
  expect(start({ path: 'm 3 4 h 1 v 1 z' }, 'up')).toEqual([3, 4]);
  expect(start({ ellipse: [0, 0], radii: [2, 1], turned: 90 })).toEqual([expect.closeTo(0, 15), 2]);
});

it('turns everything written with y downwards so that it looks as drawn', () => {
  const path = chain({ path: 'M 0 0 H 2 A 1 1 0 0 1 2 2 H 0 Z' }, 'down');
  // As SVG paints it: the arc bulges to the right; clockwise on the screen.
  expect(enclosedArea(path)).toBeCloseTo(-(4 + Math.PI / 2), 14);
  expect(path.pieces[1]?.curve).toMatchObject({ from: [2, 0], to: [2, -2], centre: [2, -1] });
  expect(read({ rectangle: [0, 0, 3, 2] }, 'down').curves[0]).toMatchObject({ from: [0, -2], to: [3, -2] });
  expect(read({ circle: [1, 2], radius: 0.5 }, 'down').curves[0]).toMatchObject({
    from: [1.5, -2],
    to: [1, -1.5],
  });
});

it('asks which way y grows when a path is given, and only then', () => {
  const refused = refusalOf(() => read({ path: 'M 0 0 H 1 V 1 Z' }));
  expect(refused).toMatchObject({ code: 'CASE_KEY_MISSING', where: { key: 'drawing.y' } });
  expect(read({ circle: [0, 0], radius: 1 }).closed).toBe(true);
});

it.each([
  [{}, 'no form'],
  [
    {
      circle: [0, 0],
      radius: 1,
      line: [
        [0, 0],
        [1, 1],
      ],
    },
    'not both',
  ],
  [{ circle: [0, 0] }, 'missing'],
  [{ circle: [0, 0], radius: 0 }, 'no size'],
  [{ circle: [0], radius: 1 }, 'two lengths'],
  [
    {
      polygon: [
        [0, 0],
        [1, 1],
      ],
    },
    'at least 3',
  ],
  [{ line: [[0, 0]] }, 'at least 2'],
  [{ rectangle: [0, 0, 0, 1] }, 'no area'],
  [{ ellipse: [0, 0], radii: 3 }, 'two radii'],
  [{ path: 'M 0 0 L 1 1 ?' }, 'character'],
  [{ path: 'M 0 0 H 1 V 1 Z M 3 3 H 4 V 4 Z' }, 'draws 2 lines'],
  [{ path: 'M 0 0' }, 'draws nothing'],
  ['square', 'not a shape'],
])('refuses %j in words', (raw, words) => {
  expect(refusalOf(() => read(raw, 'up')).what).toContain(words);
});
