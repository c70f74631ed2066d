import { verdictOf, worldPolygons } from '../support/world-outlines.ts';

/**
 * Every polygon of the 1:10 million map of land, up to 20,000 corners in the largest but one: counts by outcome, and
 * CPU time per corner for small and large outlines, which shows the growth.
 */
const polygons = worldPolygons('land-10m');
const outcomes = new Map<string, number>();
const classes = [
  { most: 100, corners: 0, milliseconds: 0 },
  { most: 1000, corners: 0, milliseconds: 0 },
  { most: Number.POSITIVE_INFINITY, corners: 0, milliseconds: 0 },
];
let troubles = 0;
for (const rings of polygons) {
  const corners = rings.reduce((sum, ring) => sum + ring.length - 1, 0);
  const before = process.cpuUsage();
  const { outcome, trouble } = verdictOf(rings, 300_000);
  const { user, system } = process.cpuUsage(before);
  outcomes.set(outcome, (outcomes.get(outcome) ?? 0) + 1);
  if (trouble !== '') {
    troubles++;
    console.log(`trouble: ${trouble}`);
  }
  const one = classes.find(({ most }) => corners <= most);
  if (one) {
    one.corners += corners;
    one.milliseconds += (user + system) / 1000;
  }
}
console.log(
  `land-10m: ${[...outcomes].map(([what, count]) => `${what} ${count}`).join(', ')}; troubles ${troubles}`,
);
const base = classes[0];
for (const { most, corners, milliseconds } of classes) {
  const perCorner = milliseconds / corners / (base ? base.milliseconds / base.corners : 1);
  console.log(`up to ${most} corners: CPU per corner ÷ that of the smallest class ${perCorner.toFixed(2)}`);
}
