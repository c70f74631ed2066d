import { describe, expect, it } from 'vitest';
import { meshDomain, meshQuality, remesh } from '../../mesher/index.ts';
import { domainOf, Shapes } from './shapes.ts';

describe('a disc', () => {
  it('loses area to chords as the square of the size, by 4 when the size is halved', () => {
    // Regular n-gon in a circle: π − (n/2) sin(2π/n) = 2π³/3n² + … (elementary).
    let mesh = meshDomain(domainOf(new Shapes().circle('rim', [0, 0], 1)), { maxSize: 0.2 });
    const errors: number[] = [];
    for (const maxSize of [0.2, 0.1, 0.05, 0.025]) {
      mesh = remesh(mesh, { maxSize });
      errors.push(Math.PI - meshQuality(mesh).area);
      const n = mesh.segments.length / 2;
      expect(Math.abs((errors.at(-1) ?? 0) / ((2 * Math.PI ** 3) / (3 * n * n)) - 1)).toBeLessThan(0.02);
      expect(Math.abs(mesh.chordError / (1 - Math.cos(Math.PI / n)) - 1)).toBeLessThan(1e-9);
    }
    for (let i = 1; i < errors.length; i++) {
      const ratio = (errors[i - 1] ?? 0) / (errors[i] ?? 1);
      // 4 − O(1/n²): the next term of the series is under 1.5 % at 24 chords.
      expect(Math.abs(ratio / 4 - 1)).toBeLessThan(0.015);
    }
  });
});
