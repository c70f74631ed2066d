import { describe, expect, it } from 'vitest';
import type { Chain, Curve, Domain, Point } from '../../mesher/index.ts';
import { narrowGaps } from '../../src/run/narrow-gaps.ts';

const chain = (name: string, curves: readonly Curve[]): Chain => ({
  name,
  pieces: curves.map((curve, tag) => ({ curve, tag })),
});
const polygon = (name: string, corners: readonly Point[]): Chain =>
  chain(
    name,
    corners.map((from, i): Curve => ({ kind: 'line', from, to: corners[(i + 1) % corners.length] ?? from })),
  );
const circle = (name: string, radius: number, sweep: number): Chain =>
  chain(name, [
    {
      kind: 'arc',
      from: [radius, 0],
      to: [radius, 0],
      centre: [0, 0],
      radii: [radius, radius],
      turned: 0,
      start: 0,
      sweep,
    },
  ]);
const domain = (outline: Chain, holes: readonly Chain[] = []): Domain => ({
  outline,
  holes,
  innerWalls: [],
  regions: [],
  tolerance: 1e-12,
});

describe('narrow gaps', () => {
  it('are found all round a thin ring, with its width', () => {
    const ring = domain(circle('outline', 1, 2 * Math.PI), [circle('hole', 0.9, -2 * Math.PI)]);
    const gaps = narrowGaps(ring, 0.3);
    expect(gaps.length).toBeGreaterThan(60);
    for (const { at, width } of gaps) {
      expect(Math.abs(width - 0.1)).toBeLessThan(0.005);
      expect(Math.abs(Math.hypot(at[0], at[1]) - 0.95)).toBeLessThan(0.005);
    }
  });

  it('are not seen through a wall from its other side, nor at the corners of a square', () => {
    const square = polygon('outline', [
      [0, 0],
      [1, 0],
      [1, 1],
      [0, 1],
    ]);
    expect(narrowGaps(domain(square), 0.5)).toEqual([]);
    // The two sides of a thin hole face away from each other: what lies between them is not compartment.
    const plate = polygon('plate', [
      [0.3, 0.5],
      [0.3, 0.51],
      [0.7, 0.51],
      [0.7, 0.5],
    ]);
    expect(narrowGaps(domain(square, [plate]), 0.3)).toEqual([]);
  });
});
