import { describe, expect, it } from 'vitest';
import { meshRandomDrawings } from '../mesher/random-check.ts';
import { compareSimilar } from '../mesher/similar.ts';

describe('random drawings, many of them', () => {
  it('1000 mesh without a fault, 28 degrees but at sharp corners', () => {
    const { faults, below, triangles } = meshRandomDrawings(1, 1000);
    expect(faults).toEqual([]);
    // Measured: 31, all beside two-sided corners of less than 7 degrees.
    expect(below.length).toBeLessThanOrEqual(40);
    expect(triangles).toBeGreaterThan(500_000);
  }, 3_600_000);

  it('100 get the same verdict and count turned, moved and scaled', () => {
    const { faults, beyond, compared } = compareSimilar(1, 100);
    expect(faults).toEqual([]);
    expect(compared).toBeGreaterThan(300);
    expect(beyond.length).toBeLessThanOrEqual(0.01 * compared);
  }, 3_600_000);
});
