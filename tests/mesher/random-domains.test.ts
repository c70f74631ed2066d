import { describe, expect, it } from 'vitest';
import { meshRandomDrawings } from './random-check.ts';
import { randomDrawing } from './random-drawing.ts';

describe('random drawings', () => {
  it('100 of them mesh without a fault, 28 degrees but at sharp corners', () => {
    const { faults, below, triangles } = meshRandomDrawings(1, 100);
    expect(faults).toEqual([]);
    expect(below.length).toBeLessThanOrEqual(3);
    expect(triangles).toBeGreaterThan(50_000);
  }, 60_000);

  it('cover what they promise: corners, holes, arcs, inner walls, regions', () => {
    const all = Array.from({ length: 100 }, (_, i) => randomDrawing(i + 1).domain);
    const corners = all.map((d) => d.outline.pieces.length);
    expect(Math.min(...corners)).toBe(3);
    expect(Math.max(...corners)).toBeGreaterThan(100);
    expect(all.filter((d) => d.holes.length >= 8).length).toBeGreaterThanOrEqual(10);
    expect(all.filter((d) => d.innerWalls.length > 0).length).toBeGreaterThanOrEqual(30);
    expect(all.filter((d) => d.regions.length === 2).length).toBeGreaterThanOrEqual(20);
    const kinds = new Set(all.flatMap((d) => d.outline.pieces.map((p) => p.curve.kind)));
    expect([...kinds].sort()).toEqual(['arc', 'cubic', 'line']);
  });
});
