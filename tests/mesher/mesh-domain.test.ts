import { describe, expect, it } from 'vitest';
import {
  checkMesh,
  type Domain,
  healDomain,
  type Mesh,
  meshDomain,
  meshQuality,
} from '../../mesher/index.ts';
import { domainOf, Shapes, unitSquare } from './shapes.ts';

function sound(domain: Domain, mesh: Mesh): void {
  expect(checkMesh(mesh, domain)).toEqual([]);
  expect(meshQuality(mesh).minAngleElsewhere).toBeGreaterThanOrEqual(28);
}

describe('inner walls', () => {
  it('gives each side of an open inner wall its own nodes, and shares the free tips', () => {
    const s = new Shapes();
    const wall = s.open('baffle', [
      [0.3, 0.5],
      [0.7, 0.5],
    ]);
    const domain = domainOf(s.polygon('outline', unitSquare), { innerWalls: [wall] });
    const mesh = meshDomain(healDomain(domain).domain, { maxSize: 0.1 });
    sound(domain, mesh);
    const own = [...mesh.segmentTag.keys()].filter(
      (i) => mesh.segmentTag[i] === 4 || mesh.segmentTag[i] === 0,
    );
    const inner = own.filter((i) => (mesh.segmentTwin[i] ?? -1) >= 0);
    const ends = new Set(inner.flatMap((i) => [mesh.segments[2 * i] ?? -1, mesh.segments[2 * i + 1] ?? -1]));
    // n pieces on each side: 2n segments, and 2n nodes because both tips are shared.
    expect(ends.size).toBe(inner.length);
    expect(inner.length).toBeGreaterThanOrEqual(8);
  });

  it('splits an inner wall that refinement would leave in one piece, so that it has two sides at all', () => {
    const s = new Shapes();
    const wall = s.open('baffle', [
      [0.45, 0.5],
      [0.55, 0.5],
    ]);
    const domain = domainOf(s.polygon('outline', unitSquare), { innerWalls: [wall] });
    const mesh = meshDomain(domain, { maxSize: 0.5 });
    sound(domain, mesh);
    expect(mesh.segmentTwin.filter((twin) => twin >= 0).length).toBeGreaterThanOrEqual(4);
  });

  it('cuts the compartment in two where an inner wall runs from wall to wall', () => {
    const s = new Shapes();
    const outline = s.polygon('outline', unitSquare);
    const wall = s.open('divide', [
      [0.5, 0],
      [0.5, 1],
    ]);
    const domain = domainOf(outline, { innerWalls: [wall] });
    const mesh = meshDomain(healDomain(domain).domain);
    sound(domain, mesh);
    const ends = new Set<number>();
    mesh.segmentTag.forEach((tag, i) => {
      if (tag === 4) for (const v of [mesh.segments[2 * i], mesh.segments[2 * i + 1]]) ends.add(v ?? -1);
    });
    const pieces = mesh.segmentTag.filter((tag) => tag === 4).length / 2;
    expect(ends.size).toBe(2 * (pieces + 1));
  });

  it('refuses an inner wall that reaches beyond the outline, with the place', () => {
    const s = new Shapes();
    const outline = s.polygon('outline', unitSquare);
    const wall = s.open('baffle', [
      [0.5, 0.5],
      [1.5, 0.5],
    ]);
    expect(() => healDomain(domainOf(outline, { innerWalls: [wall] }))).toThrow(
      /baffle crosses .* at \(1, 0.5\)/,
    );
  });
});

describe('regions', () => {
  it('counts the part of a region inside the compartment, along walls and across other regions', () => {
    const s = new Shapes();
    const outline = s.polygon('outline', unitSquare);
    const half = s.polygon('right half', [
      [0.5, -1],
      [2, -1],
      [2, 1],
      [0.5, 1],
    ]);
    const disc = s.circle('disc', [0.5, 0.5], 0.25);
    const domain = domainOf(outline, { regions: [half, disc] });
    const mesh = meshDomain(healDomain(domain).domain, { maxSize: 0.02 });
    sound(domain, mesh);
    const area = [0, 0];
    for (let t = 0; t < mesh.triangles.length / 3; t++) {
      const [a, b, c] = [0, 1, 2].map((i) => 2 * (mesh.triangles[3 * t + i] ?? 0)) as [
        number,
        number,
        number,
      ];
      const at = (i: number): number => mesh.nodes[i] ?? 0;
      const twice = (at(b) - at(a)) * (at(c + 1) - at(a + 1)) - (at(b + 1) - at(a + 1)) * (at(c) - at(a));
      for (const r of mesh.regionSets[mesh.regionSet[t] ?? 0] ?? []) area[r] = (area[r] ?? 0) + twice / 2;
    }
    expect(area[0]).toBeCloseTo(0.5, 12);
    // Chords of 0.02 on a circle of radius 0.25 leave out about (0.02/0.25)²/24·π/4 ≈ 1.1 parts in 1000 at most.
    expect(Math.abs((area[1] ?? 0) / (Math.PI / 16) - 1)).toBeLessThan(1.1e-3);
    expect(mesh.segmentTag.every((tag) => tag < 4)).toBe(true);
    expect(mesh.regionSets).toHaveLength(4);
  });
});

describe('curves', () => {
  it('puts wall nodes on the circle and tells the parameter of each', () => {
    const s = new Shapes();
    const domain = domainOf(s.circle('rim', [0, 0], 1), { holes: [s.circle('post', [0.3, 0], 0.2)] });
    const mesh = meshDomain(healDomain(domain).domain, { maxSize: 0.1 });
    sound(domain, mesh);
    let worst = 0;
    mesh.segments.forEach((v, k) => {
      const post = mesh.segmentTag[k >> 1] === 1;
      const x = (mesh.nodes[2 * v] ?? 0) - (post ? 0.3 : 0);
      const y = mesh.nodes[2 * v + 1] ?? 0;
      const radius = post ? 0.2 : 1;
      // The hole is run clockwise after healing, so its parameter falls as the angle grows.
      const t = (mesh.segmentSpan[k] ?? 0) * (post ? -1 : 1) * 2 * Math.PI;
      worst = Math.max(worst, Math.abs(x - radius * Math.cos(t)), Math.abs(y - radius * Math.sin(t)));
    });
    expect(worst).toBeLessThan(1e-14);
  });
});
