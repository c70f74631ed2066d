import { describe, expect, it } from 'vitest';
import { checkMesh, type Mesh, meshDomain } from '../../mesher/index.ts';
import { domainOf, Shapes, unitSquare } from './shapes.ts';

const s = new Shapes();
const domain = domainOf(s.polygon('outline', unitSquare), {
  innerWalls: [
    s.open('baffle', [
      [0.3, 0.5],
      [0.7, 0.6],
    ]),
  ],
});
const good = meshDomain(domain, { maxSize: 0.1 });

/** The good mesh with one thing changed. */
function spoilt(change: (mesh: { -readonly [K in keyof Mesh]: Mesh[K] }) => void): string {
  const mesh = structuredClone(good);
  change(mesh);
  return checkMesh(mesh, domain).join('; ');
}

describe('checkMesh', () => {
  it('finds nothing wrong with a good mesh', () => {
    expect(checkMesh(good, domain)).toEqual([]);
  });

  it('finds a triangle turned over', () => {
    expect(spoilt((m) => m.triangles.set([m.triangles[1] ?? 0, m.triangles[0] ?? 0], 0))).toMatch(
      /clockwise/,
    );
  });

  it('finds an inner node moved so that Delaunay is lost', () => {
    const onWall = new Set(good.segments);
    const free = [...good.triangles].find((v) => !onWall.has(v)) ?? 0;
    const told = spoilt((m) => {
      m.nodes[2 * free] = (m.nodes[2 * free] ?? 0) + 0.06;
    });
    expect(told).toMatch(/not Delaunay|clockwise/);
  });

  it('finds a wall left out, a twin that points elsewhere, and a foreign tag', () => {
    expect(spoilt((m) => (m.segments = m.segments.slice(2)))).toMatch(/walls are listed/);
    const inner = good.segmentTwin.findIndex((twin) => twin >= 0);
    expect(spoilt((m) => m.segmentTwin.set([0], inner))).toMatch(/twins/);
    expect(spoilt((m) => m.segmentTag.set([99], 0))).toMatch(/tag 99/);
  });

  it('finds a node that stands nowhere and a triangle that names none', () => {
    expect(spoilt((m) => (m.nodes = Float64Array.from([...m.nodes, 5, 5])))).toMatch(/no triangle/);
    expect(spoilt((m) => m.triangles.set([1e6], 0))).toMatch(/names node/);
  });

  it('finds a triangle missing from the inside by area and Euler number', () => {
    const told = spoilt((m) => {
      m.triangles = m.triangles.slice(3);
      m.regionSet = m.regionSet.slice(1);
    });
    expect(told).toMatch(/area/);
  });
});
