import { describe, expect, it } from 'vitest';
import { locate, meshDomain } from '../../mesher/index.ts';
import { seededRandom } from '../support/random-domain.ts';
import { domainOf, Shapes, unitSquare } from './shapes.ts';

const s = new Shapes();
const domain = domainOf(s.polygon('outline', unitSquare), { holes: [s.circle('post', [0.5, 0.5], 0.2)] });
const mesh = meshDomain(domain, { maxSize: 0.05 });
const locator = locate(mesh);

describe('locating places', () => {
  it('finds a triangle and weights that give the place back, and nothing outside', () => {
    const random = seededRandom(3);
    let found = 0;
    for (let i = 0; i < 2000; i++) {
      const x = 1.2 * random() - 0.1;
      const y = 1.2 * random() - 0.1;
      const place = locator.find(x, y);
      const inSquare = x >= 0 && x <= 1 && y >= 0 && y <= 1;
      const radius = Math.hypot(x - 0.5, y - 0.5);
      if (!inSquare || radius < 0.2 - mesh.chordError) expect(place).toBeUndefined();
      else if (radius > 0.2) expect(place).toBeDefined();
      if (!place) continue;
      found++;
      let [backX, backY] = [0, 0];
      place.weights.forEach((w, k) => {
        const v = mesh.triangles[3 * place.triangle + k] ?? 0;
        expect(w).toBeGreaterThanOrEqual(0);
        backX += w * (mesh.nodes[2 * v] ?? 0);
        backY += w * (mesh.nodes[2 * v + 1] ?? 0);
      });
      expect(Math.hypot(backX - x, backY - y)).toBeLessThan(1e-14);
    }
    expect(found).toBeGreaterThan(1000);
  });

  it('finds every node and every middle of an edge', () => {
    for (let t = 0; t < mesh.triangles.length; t += 3) {
      const a = 2 * (mesh.triangles[t] ?? 0);
      const b = 2 * (mesh.triangles[t + 1] ?? 0);
      const [ax = 0, ay = 0, bx = 0, by = 0] = [
        mesh.nodes[a],
        mesh.nodes[a + 1],
        mesh.nodes[b],
        mesh.nodes[b + 1],
      ];
      expect(locator.find(ax, ay)).toBeDefined();
      expect(locator.find((ax + bx) / 2, (ay + by) / 2)).toBeDefined();
    }
  });

  it('measures the distance to the nearest wall as a search over all walls does', () => {
    const random = seededRandom(5);
    for (let i = 0; i < 300; i++) {
      const [x, y] = [2 * random() - 0.5, 2 * random() - 0.5];
      let least = Number.POSITIVE_INFINITY;
      for (let k = 0; k < mesh.segments.length; k += 2) {
        const p = 2 * (mesh.segments[k] ?? 0);
        const q = 2 * (mesh.segments[k + 1] ?? 0);
        const [px = 0, py = 0, qx = 0, qy = 0] = [
          mesh.nodes[p],
          mesh.nodes[p + 1],
          mesh.nodes[q],
          mesh.nodes[q + 1],
        ];
        const share = ((x - px) * (qx - px) + (y - py) * (qy - py)) / ((qx - px) ** 2 + (qy - py) ** 2);
        const c = Math.min(1, Math.max(0, share));
        least = Math.min(least, Math.hypot(px + c * (qx - px) - x, py + c * (qy - py) - y));
      }
      expect(Math.abs(locator.nearestWall(x, y).distance - least)).toBeLessThan(1e-15);
    }
  });
});
