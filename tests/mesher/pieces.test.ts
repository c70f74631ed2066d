import { describe, expect, it } from 'vitest';
import { connectedPieces, healDomain, meshDomain } from '../../mesher/index.ts';
import { domainOf, Shapes, unitSquare } from './shapes.ts';

describe('connected pieces', () => {
  it('are found on the two sides of a wall across, and in the corner that a hole cuts off', () => {
    const s = new Shapes();
    const outline = s.polygon('outline', unitSquare);
    const across = s.open('across', [
      [0, 0.5],
      [1, 0.5],
    ]);
    const hole = s.polygon('wedge', [
      [0, 0.2],
      [0.2, 0],
      [0.2, 0.2],
    ]);
    const domain = healDomain(domainOf(outline, { innerWalls: [across], holes: [hole] })).domain;
    const mesh = meshDomain(domain);
    const pieces = connectedPieces(mesh);
    expect(pieces.count).toBe(3);
    const area = [0, 0, 0];
    pieces.ofTriangle.forEach((piece, t) => {
      const [a, b, c] = [0, 1, 2].map((i) => 2 * (mesh.triangles[3 * t + i] ?? 0)) as [
        number,
        number,
        number,
      ];
      const at = (i: number): number => mesh.nodes[i] ?? 0;
      area[piece] =
        (area[piece] ?? 0) +
        ((at(b) - at(a)) * (at(c + 1) - at(a + 1)) - (at(b + 1) - at(a + 1)) * (at(c) - at(a))) / 2;
      for (const i of [a, b, c]) expect(pieces.ofNode[i / 2]).toBe(piece);
    });
    const sorted = area.sort((p, q) => p - q);
    [0.02, 0.46, 0.5].forEach((expected, i) => {
      expect(sorted[i]).toBeCloseTo(expected, 12);
    });
    // The wall across bounds two pieces, one on each side.
    const sides = new Set(
      [...mesh.segmentTag.keys()].filter((i) => mesh.segmentTag[i] === 4).map((i) => pieces.ofSegment[i]),
    );
    expect(sides.size).toBe(2);
  });
});
