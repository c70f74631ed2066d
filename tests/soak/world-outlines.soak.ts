import { expect, it } from 'vitest';
import { verdictOf, type WorldMap, worldPolygons } from '../support/world-outlines.ts';

const maps: WorldMap[] = ['land-50m', 'countries-50m'];

for (const map of maps) {
  it(`meshes every polygon of ${map} soundly or refuses it for a reason that brute force confirms [world-atlas]`, () => {
    const counts = new Map<string, number>();
    const troubles: string[] = [];
    for (const [index, rings] of worldPolygons(map).entries()) {
      const { outcome, trouble } = verdictOf(rings);
      counts.set(outcome, (counts.get(outcome) ?? 0) + 1);
      if (trouble !== '') troubles.push(`polygon ${index}: ${trouble}`);
    }
    process.stdout.write(`${map}: ${[...counts].map(([what, count]) => `${what} ${count}`).join(', ')}\n`);
    expect(troubles).toEqual([]);
    expect(counts.get('meshed')).toBeGreaterThan(1000);
  });
}
