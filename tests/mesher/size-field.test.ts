import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { meshDomain } from '../../mesher/index.ts';
import { makeSizeField } from '../../mesher/size-field.ts';
import { domainOf, Shapes, unitSquare } from './shapes.ts';

const coordinate = fc.double({ min: -3, max: 3, noNaN: true });
const source = fc.record({
  at: fc.tuple(coordinate, coordinate),
  size: fc.double({ min: 1e-6, max: 0.5, noNaN: true }),
});

describe('the size field', () => {
  it('of many sources is the least of size + growth·distance over all of them', () => {
    fc.assert(
      fc.property(
        fc.array(source, { minLength: 1, maxLength: 60 }),
        coordinate,
        coordinate,
        (sources, x, y) => {
          const field = makeSizeField({ sources, growth: 0.3, maxSize: 1 }, 1);
          const all = sources.map(({ at, size }) => size + 0.3 * Math.hypot(x - at[0], y - at[1]));
          const least = Math.min(1, ...all);
          const got = typeof field === 'number' ? field : field(x, y);
          expect(Math.abs(got - least)).toBeLessThanOrEqual(1e-15 * 4);
        },
      ),
      { seed: 7, numRuns: 300 },
    );
  });

  it('is kept by every edge of the mesh', () => {
    const domain = domainOf(new Shapes().polygon('outline', unitSquare));
    const size = (x: number, y: number): number => 0.01 + 0.1 * Math.hypot(x - 0.3, y - 0.8);
    const mesh = meshDomain(domain, { size, maxSize: 0.07 });
    for (let t = 0; t < mesh.triangles.length; t += 3) {
      const p = [0, 1, 2].map((i) => {
        const v = mesh.triangles[t + i] ?? 0;
        return [mesh.nodes[2 * v] ?? 0, mesh.nodes[2 * v + 1] ?? 0] as const;
      });
      const x = p.reduce((sum, q) => sum + q[0] / 3, 0);
      const y = p.reduce((sum, q) => sum + q[1] / 3, 0);
      const edges = p.map((q, i) =>
        Math.hypot(q[0] - (p[(i + 1) % 3]?.[0] ?? 0), q[1] - (p[(i + 1) % 3]?.[1] ?? 0)),
      );
      expect(Math.max(...edges)).toBeLessThanOrEqual(Math.min(0.07, size(x, y)) * (1 + 1e-8));
    }
  });
});
