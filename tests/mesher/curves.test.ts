import { describe, expect, it } from 'vitest';
import type { Chain, Curve } from '../../mesher/index.ts';
import {
  chainLength,
  chordSag,
  curveLength,
  enclosedArea,
  nearestParameter,
  parameterAtLength,
  partOf,
  pointAt,
  reversed,
} from '../../mesher/index.ts';

const ellipse = (a: number, b: number, turned = 0): Curve => ({
  kind: 'arc',
  from: [a * Math.cos(turned), a * Math.sin(turned)],
  to: [a * Math.cos(turned), a * Math.sin(turned)],
  centre: [0, 0],
  radii: [a, b],
  turned,
  start: 0,
  sweep: 2 * Math.PI,
});
const cubic: Curve = {
  kind: 'cubic',
  from: [0, 0],
  to: [3, 0],
  controls: [
    [1, 2],
    [2, -1],
  ],
};
/** Perimeter of an ellipse by the arithmetic–geometric mean (Abramowitz & Stegun 1964, 17.6). */
function ellipsePerimeter(a: number, b: number): number {
  let [x, y, c, power, sum] = [a, b, Math.sqrt(a * a - b * b), 0.5, 0];
  while (c > 1e-17 * a) {
    sum += power * c * c;
    [x, y, c] = [(x + y) / 2, Math.sqrt(x * y), (x - y) / 2];
    power *= 2;
  }
  return (2 * Math.PI * (a * a - sum)) / x;
}
const chain = (...curves: Curve[]): Chain => ({
  name: 'loop',
  pieces: curves.map((curve, tag) => ({ curve, tag })),
});

describe('curves', () => {
  it('an ellipse has the perimeter of the complete elliptic integral [Abramowitz & Stegun 1964, 17.6]', () => {
    expect(curveLength(ellipse(2, 1))).toBeCloseTo(ellipsePerimeter(2, 1), 12);
    expect(curveLength(ellipse(1, 0.01))).toBeCloseTo(ellipsePerimeter(1, 0.01), 9);
  });

  it('the point at a length is that length along the curve', () => {
    for (const curve of [ellipse(2, 1), cubic]) {
      for (const part of [0.1, 0.5, 0.93]) {
        const s = part * curveLength(curve);
        expect(curveLength(curve, 0, parameterAtLength(curve, s))).toBeCloseTo(s, 12);
      }
    }
  });

  it('a part runs through the same points as the whole, and lengths of parts add up', () => {
    for (const curve of [ellipse(2, 1, 0.4), cubic]) {
      const part = partOf(curve, 0.2, 0.7);
      for (const t of [0, 0.3, 1]) {
        const [x, y] = pointAt(part, t);
        const [ex, ey] = pointAt(curve, 0.2 + 0.5 * t);
        expect(Math.hypot(x - ex, y - ey)).toBeLessThan(1e-14);
      }
      expect(curveLength(part)).toBeCloseTo(curveLength(curve, 0.2, 0.7), 13);
    }
  });

  it('the same curve backwards runs through the same points', () => {
    for (const curve of [ellipse(2, 1, 0.4), cubic]) {
      const [x, y] = pointAt(reversed(curve), 0.3);
      const [ex, ey] = pointAt(curve, 0.7);
      expect(Math.hypot(x - ex, y - ey)).toBeLessThan(1e-14);
    }
  });

  it('the nearest point of an ellipse to a point on its long axis is the far vertex or where the evolute says', () => {
    // From (p, 0) with p < (a² − b²)/a the nearest point has cos θ = p·a/(a² − b²): derivative of the distance, by hand.
    const { t } = nearestParameter(ellipse(2, 1), [0.75, 0]);
    expect(Math.abs(Math.cos(2 * Math.PI * t))).toBeCloseTo((0.75 * 2) / 3, 10);
    expect(nearestParameter(ellipse(2, 1), [5, 0]).distance).toBeCloseTo(3, 12);
  });

  it('the sagitta of a circle is r(1 − cos(half angle)), that of a cubic the largest of many samples', () => {
    expect(chordSag(ellipse(1, 1), 0, 0.125)).toBeCloseTo(1 - Math.cos(Math.PI / 8), 14);
    let largest = 0;
    for (let i = 0; i <= 4000; i++) largest = Math.max(largest, Math.abs(pointAt(cubic, i / 4000)[1]));
    expect(chordSag(cubic, 0, 1)).toBeCloseTo(largest, 6);
  });

  it('areas are exact: ellipse πab, a Bézier lobe closed by its chord by the integral of y dx', () => {
    expect(enclosedArea(chain(ellipse(2, 1, 0.3)))).toBeCloseTo(2 * Math.PI, 13);
    const lobe: Curve = {
      kind: 'cubic',
      from: [0, 0],
      to: [1, 0],
      controls: [
        [0, 1],
        [1, 1],
      ],
    };
    // x = 3t² − 2t³, y = 3t − 3t²: ∫ y dx = ∫ 18 t²(1 − t)² dt = 18/30. Clockwise, so negative.
    expect(enclosedArea(chain(lobe, { kind: 'line', from: [1, 0], to: [0, 0] }))).toBeCloseTo(-0.6, 14);
  });

  it('the area keeps its digits a million lengths away from the origin', () => {
    const far = (x: number, y: number): readonly [number, number] => [1e6 + x, 1e6 + y];
    const square = chain(
      { kind: 'line', from: far(0, 0), to: far(1, 0) },
      { kind: 'line', from: far(1, 0), to: far(1, 1) },
      { kind: 'line', from: far(1, 1), to: far(0, 1) },
      { kind: 'line', from: far(0, 1), to: far(0, 0) },
    );
    expect(enclosedArea(square)).toBe(1);
    expect(chainLength(square)).toBe(4);
  });
});
