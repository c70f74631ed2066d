import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { orient2d } from 'robust-predicates';
import { feature } from 'topojson-client';
import {
  type Chain,
  checkMesh,
  type Domain,
  MesherError,
  meshDomain,
  meshQuality,
  type Point,
} from '../../mesher/index.ts';

/** Outlines of land from the npm package world-atlas (Natural Earth, public domain), each polygon a compartment. */
export type WorldMap = 'land-110m' | 'land-50m' | 'land-10m' | 'countries-50m';

/** Walls nearer than this, in degrees, are one: about a tenth of a micrometre on the ground. */
const tolerance = 1e-12;

type Topology = Parameters<typeof feature>[0];
type GeometryCollection = Parameters<typeof feature>[1];

type Rings = readonly (readonly Point[])[];

/** Every polygon of a map, longitude and latitude taken as plane coordinates. */
export function worldPolygons(map: WorldMap): Rings[] {
  const file = createRequire(import.meta.url).resolve(`world-atlas/${map}.json`);
  const topology = JSON.parse(readFileSync(file, 'utf8')) as Topology;
  const name = map.startsWith('land') ? 'land' : 'countries';
  const found = feature(topology, topology.objects[name] as GeometryCollection);
  const polygons: Rings[] = [];
  for (const { geometry } of found.type === 'FeatureCollection' ? found.features : [found]) {
    if (geometry.type === 'Polygon') polygons.push(geometry.coordinates as unknown as Rings);
    if (geometry.type === 'MultiPolygon') polygons.push(...(geometry.coordinates as unknown as Rings[]));
  }
  return polygons;
}

/** What became of one outline: meshed soundly, or refused with a code; `trouble` is empty when all is well. */
export interface OutlineVerdict {
  readonly outcome: string;
  readonly trouble: string;
}

/**
 * Meshes one polygon with its holes. A refusal for crossing or touching walls is held against a brute-force exact
 * test of every pair of edges, a refusal by a cap on size is believed.
 */
export function verdictOf(rings: Rings, maxNodes = 100_000): OutlineVerdict {
  const domain = domainOf(rings);
  try {
    const mesh = meshDomain(domain, { maxNodes });
    const broken = checkMesh(mesh, domain);
    const { minAngleElsewhere } = meshQuality(mesh);
    const small = minAngleElsewhere >= 28 ? '' : `smallest angle ${minAngleElsewhere}`;
    return { outcome: 'meshed', trouble: [...broken, small].filter((text) => text !== '').join('; ') };
  } catch (error) {
    if (!(error instanceof MesherError)) return { outcome: 'thrown', trouble: String(error) };
    const believed = ['TOO_MANY_TRIANGLES', 'TOO_MANY_CORNERS', 'CORNER_TOO_SHARP'].includes(error.code);
    const sound = believed || edgesMeet(rings);
    return { outcome: error.code, trouble: sound ? '' : `${error.message}: not confirmed by brute force` };
  }
}

function domainOf(rings: Rings): Domain {
  const chain = (name: string, ring: readonly Point[]): Chain => {
    // GeoJSON repeats the first point at the end.
    const points = ring.slice(0, -1);
    return {
      name,
      pieces: points.map((from, i) => ({
        curve: { kind: 'line', from, to: points[(i + 1) % points.length] ?? from },
        tag: i,
      })),
    };
  };
  const [outline, ...holes] = rings.map((ring, i) => chain(i === 0 ? 'outline' : `hole ${i}`, ring));
  let tag = 0;
  const numbered = (one: Chain): Chain => ({
    ...one,
    pieces: one.pieces.map((piece) => ({ ...piece, tag: tag++ })),
  });
  if (outline === undefined) throw new Error('a polygon without an outline');
  return {
    outline: numbered(outline),
    holes: holes.map(numbered),
    innerWalls: [],
    regions: [],
    tolerance,
  };
}

/** True when two edges that are not neighbours meet, or neighbours overlap: every pair looked at, exact signs; or they come within the tolerance. */
function edgesMeet(rings: Rings): boolean {
  const edges: [Point, Point][] = [];
  for (const ring of rings) {
    for (let i = 0; i + 1 < ring.length; i++) {
      const [from, to] = [ring[i], ring[i + 1]];
      if (from && to) edges.push([from, to]);
    }
  }
  for (const [i, [a, b]] of edges.entries()) {
    for (const [c, d] of edges.slice(i + 1)) {
      if (Math.max(a[0], b[0]) < Math.min(c[0], d[0]) || Math.max(c[0], d[0]) < Math.min(a[0], b[0]))
        continue;
      if (Math.max(a[1], b[1]) < Math.min(c[1], d[1]) || Math.max(c[1], d[1]) < Math.min(a[1], b[1]))
        continue;
      if (meet(a, b, c, d)) return true;
    }
  }
  return false;
}

function meet(a: Point, b: Point, c: Point, d: Point): boolean {
  const side = (p: Point, q: Point, r: Point): number =>
    Math.sign(orient2d(p[0], p[1], q[0], q[1], r[0], r[1]));
  const same = (p: Point, q: Point): boolean => p[0] === q[0] && p[1] === q[1];
  // Neighbours share one end; they are at fault only when the shorter lies on the longer, to within the tolerance.
  const sharedEnd = [a, b].find((end) => same(end, c) || same(end, d));
  if (sharedEnd && !(same(a, c) && same(b, d)) && !(same(a, d) && same(b, c))) {
    const first = same(sharedEnd, a) ? b : a;
    const second = same(sharedEnd, c) ? d : c;
    return distance(first, c, d) <= tolerance || distance(second, a, b) <= tolerance;
  }
  const ends = [distance(a, c, d), distance(b, c, d), distance(c, a, b), distance(d, a, b)];
  return (
    Math.min(...ends) <= tolerance ||
    (side(a, b, c) * side(a, b, d) <= 0 && side(c, d, a) * side(c, d, b) <= 0)
  );
}

/** Distance of a point from a segment. */
function distance(p: Point, a: Point, b: Point): number {
  const [dx, dy] = [b[0] - a[0], b[1] - a[1]];
  const along = Math.min(1, Math.max(0, ((p[0] - a[0]) * dx + (p[1] - a[1]) * dy) / (dx * dx + dy * dy)));
  return Math.hypot(p[0] - a[0] - along * dx, p[1] - a[1] - along * dy);
}
