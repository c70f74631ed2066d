import fc from 'fast-check';
import { expect, it } from 'vitest';
import { type Curve, pointAt } from '../../mesher/index.ts';
import { composed, type Matrix, mapCurve, mapPoint, readTransform } from '../../src/importers/affine.ts';
import { circleCurves, ellipseCurves, rectangleCurves } from '../../src/importers/basic-shapes.ts';

const number = fc.double({ min: -4, max: 4, noNaN: true });
const matrix = fc
  .tuple(number, number, number, number, number, number)
  .filter(([a, b, c, d]) => Math.abs(a * d - b * c) > 0.05);

it('maps an arc onto the images of its points, whatever the affine map', () => {
  fc.assert(
    fc.property(matrix, number, fc.double({ min: 0.2, max: 3, noNaN: true }), (m, turned, b) => {
      for (const curve of ellipseCurves([0.5, -1], [1.5, b], turned)) {
        const image = mapCurve(m as Matrix, curve);
        for (const t of [0.2, 0.5, 0.9]) {
          const [x, y] = mapPoint(m as Matrix, pointAt(curve, t));
          const [u, v] = pointAt(image, t);
          expect(Math.hypot(x - u, y - v)).toBeLessThan(1e-12);
        }
      }
    }),
    { seed: 3, numRuns: 200 },
  );
});

it('keeps a circle a circle to the digit when it is moved, turned, mirrored and scaled', () => {
  for (let degrees = 1; degrees < 90; degrees += 7) {
    const turned = readTransform(`translate(4 5) rotate(${degrees}) scale(1.7)`) ?? [1, 0, 0, 1, 0, 0];
    const similar = composed([0, -3, -3, 0, 7, 1], turned);
    for (const curve of circleCurves([0.3, 0.4], 0.1)) {
      // Twice, so that the second map meets axes that are turned and rounded.
      const image = mapCurve(turned, mapCurve(similar, curve)) as Curve & { kind: 'arc' };
      expect(image.radii[0]).toBe(image.radii[1]);
      expect(image.radii[0]).toBeCloseTo(0.1 * 3 * 1.7 ** 2, 14);
    }
  }
});

it('applies a list of transforms from right to left [SVG 1.1, 7.6]', () => {
  const m = readTransform('translate(10, 20) rotate(90) scale(2 3)');
  // (1, 1) → scale (2, 3) → turn (−3, 2) → move (7, 22)
  expect(m && mapPoint(m, [1, 1])).toEqual([7, 22]);
});

it.each([
  ['rotate(90 1 2)', [2, 2], [1, 3]],
  ['skewX(45)', [1, 2], [3, 2]],
  ['skewY(45)', [2, 1], [2, 3]],
  ['matrix(1 2 3 4 5 6)', [1, 1], [9, 12]],
  ['scale(-1 1),translate(3)', [1, 1], [-4, 1]],
] as const)('reads %s', (text, from, to) => {
  const m = readTransform(text);
  const [x, y] = m ? mapPoint(m, from) : [];
  expect(x).toBeCloseTo(to[0], 14);
  expect(y).toBeCloseTo(to[1], 14);
});

it.each(['rotate(', 'turn(3)', 'matrix(1 2 3)', 'translate(a)', 'scale(1 2 3)', '10 20'])(
  'does not guess what %j means',
  (text) => {
    expect(readTransform(text)).toBeUndefined();
  },
);

it('rounds the corners of a rectangle without moving its sides', () => {
  const curves = rectangleCurves([0, 0], [4, 2], [0.5, 0.5]);
  expect(curves.map(({ kind }) => kind)).toEqual([
    'line',
    'arc',
    'line',
    'arc',
    'line',
    'arc',
    'line',
    'arc',
  ]);
  expect(curves[0]).toEqual({ kind: 'line', from: [0.5, 0], to: [3.5, 0] });
  const corner = curves[1];
  expect(corner && pointAt(corner, 0.5)).toEqual([
    expect.closeTo(3.5 + Math.SQRT1_2 / 2, 14),
    expect.closeTo(0.5 - Math.SQRT1_2 / 2, 14),
  ]);
});
