import { expect, it } from 'vitest';
import { verdictOf, worldPolygons } from '../support/world-outlines.ts';

it('meshes every land of the 1:110 million map soundly or refuses it for a reason that brute force confirms [world-atlas]', () => {
  const counts = new Map<string, number>();
  const troubles: string[] = [];
  for (const [index, rings] of worldPolygons('land-110m').entries()) {
    const { outcome, trouble } = verdictOf(rings);
    counts.set(outcome, (counts.get(outcome) ?? 0) + 1);
    if (trouble !== '') troubles.push(`polygon ${index}: ${trouble}`);
  }
  process.stdout.write(`land-110m: ${[...counts].map(([what, count]) => `${what} ${count}`).join(', ')}\n`);
  expect(troubles).toEqual([]);
  expect(counts.get('meshed')).toBeGreaterThan(100);
});
