import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { healDomain, meshDomain, type Point } from '../../mesher/index.ts';
import { domainOf, Shapes } from './shapes.ts';
import { compareSimilar } from './similar.ts';

describe('a drawing turned, moved and scaled', () => {
  it('gets the same verdict, and the same count within 2 percent', () => {
    const { faults, beyond, compared } = compareSimilar(1, 10);
    expect(faults).toEqual([]);
    expect(beyond).toEqual([]);
    expect(compared).toBe(40);
  }, 60_000);

  it('in nanometres has as many triangles as in gigametres', () => {
    const counts = ['28-scale-1e-9', '29-scale-1e9'].map((name) => {
      const file = new URL(`../data/nasty/${name}.json`, import.meta.url);
      const { outline, holes } = JSON.parse(readFileSync(file, 'utf8')) as {
        outline: Point[];
        holes: Point[][];
      };
      const s = new Shapes();
      const reach = Math.max(...outline.map(([x, y]) => Math.hypot(x, y)));
      const rim = s.polygon('outline', outline);
      const domain = domainOf(rim, {
        holes: holes.map((h) => s.polygon('hole', h)),
        tolerance: 1e-12 * reach,
      });
      return meshDomain(healDomain(domain).domain).triangles.length / 3;
    });
    expect(Math.abs((counts[0] ?? 0) / (counts[1] ?? 1) - 1)).toBeLessThan(0.02);
    expect(counts[0]).toBeGreaterThan(1000);
  });
});
