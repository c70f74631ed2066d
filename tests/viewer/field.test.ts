import fc from 'fast-check';
import { expect, it } from 'vitest';
import { borderLoops, type Field, nodeGradients, readField } from '../../viewer/plan/field.ts';
import { hiddenBy } from '../../viewer/plan/hidden.ts';
import { isolines } from '../../viewer/plan/isolines.ts';
import { Locator } from '../../viewer/plan/locate.ts';
import { project } from '../../viewer/plan/projection.ts';
import { fakeField } from './support/fake-case.ts';

/** n × n squares over the unit square, each cut in two, with the values of a function. */
function square(
  n: number,
  value: (x: number, y: number) => number,
  skip?: (i: number, j: number) => boolean,
): Field {
  const nodes: number[] = [];
  const values: number[] = [];
  for (let j = 0; j <= n; j++) {
    for (let i = 0; i <= n; i++) {
      nodes.push(i / n, j / n);
      values.push(value(i / n, j / n));
    }
  }
  const triangles: number[] = [];
  for (let j = 0; j < n; j++) {
    for (let i = 0; i < n; i++) {
      if (skip?.(i, j)) continue;
      const a = j * (n + 1) + i;
      triangles.push(a, a + 1, a + n + 2, a, a + n + 2, a + n + 1);
    }
  }
  return {
    nodeCount: values.length,
    triangleCount: triangles.length / 3,
    nodes: new Float64Array(nodes),
    values: new Float64Array(values),
    triangles: new Int32Array(triangles),
  };
}

function bytesOf(field: Uint8Array): ArrayBuffer {
  return field.buffer.slice(field.byteOffset, field.byteOffset + field.byteLength) as ArrayBuffer;
}

it('the binary field is read back node by node', () => {
  const field = readField(bytesOf(fakeField('one long pad')));
  expect(field.nodes).toHaveLength(2 * field.nodeCount);
  expect(field.triangles).toHaveLength(3 * field.triangleCount);
  expect(field.nodeCount).toBeGreaterThan(1000);
  expect(Math.min(...field.values)).toBe(0);
  expect(Math.max(...field.values)).toBeGreaterThan(0);
});

it('bytes that are not a field, end early or name missing nodes are refused', () => {
  const good = fakeField('one long pad');
  const other = Uint8Array.from(good);
  other[0] = 0x58;
  expect(() => readField(bytesOf(other))).toThrow(/TRY1/);
  expect(() => readField(bytesOf(good.slice(0, good.length - 4)))).toThrow(/bytes long/);
  const wrong = Uint8Array.from(good);
  new DataView(wrong.buffer).setInt32(wrong.length - 4, 9_999_999, true);
  expect(() => readField(bytesOf(wrong))).toThrow(/names node 9999999/);
});

it('a square with a hole has two borders, compartment on the left of both', () => {
  const field = square(
    6,
    () => 0,
    (i, j) => i === 2 && j === 3,
  );
  const loops = borderLoops(field);
  const area = (loop: readonly number[]) =>
    loop.reduce((sum, a, i) => {
      const b = loop[(i + 1) % loop.length] ?? 0;
      const [ax, ay] = [field.nodes[2 * a] ?? 0, field.nodes[2 * a + 1] ?? 0];
      return sum + (ax * (field.nodes[2 * b + 1] ?? 0) - (field.nodes[2 * b] ?? 0) * ay) / 2;
    }, 0);
  expect(loops.map((loop) => loop.length).sort((a, b) => a - b)).toEqual([4, 24]);
  expect(loops.map(area).sort((a, b) => a - b)).toEqual([expect.closeTo(-1 / 36, 12), expect.closeTo(1, 12)]);
});

it('the gradient of a linear field is exact at every node', () => {
  const gradients = nodeGradients(square(5, (x, y) => 3 * x - 2 * y));
  for (let i = 0; i < gradients.length; i += 2) {
    expect(gradients[i]).toBeCloseTo(3, 5);
    expect(gradients[i + 1]).toBeCloseTo(-2, 5);
  }
});

it('a linear field is read exactly anywhere inside, and not at all outside', () => {
  const locator = new Locator(square(7, (x, y) => 1 + x + 2 * y));
  fc.assert(
    fc.property(
      fc.double({ min: 0, max: 1, noNaN: true }),
      fc.double({ min: 0, max: 1, noNaN: true }),
      (x, y) => {
        expect(locator.valueAt(x, y)).toBeCloseTo(1 + x + 2 * y, 9);
      },
    ),
  );
  expect(locator.valueAt(1.1, 0.5)).toBeNaN();
  expect(locator.valueNear(1 + 1e-4, 0.5)).toBeCloseTo(3, 1);
});

it('the isoline of a linear field is one straight line of the right length', () => {
  const [line, ...more] = isolines(
    square(9, (x) => x),
    0.4,
  );
  expect(more).toEqual([]);
  expect(line?.points.every(([x]) => Math.abs(x - 0.4) < 1e-12)).toBe(true);
  const ys = (line?.points ?? []).map(([, y]) => y);
  expect([Math.min(...ys), Math.max(...ys)]).toEqual([0, 1]);
});

it('a closed isoline is followed once around', () => {
  const lines = isolines(
    square(40, (x, y) => Math.hypot(x - 0.5, y - 0.5)),
    0.3,
  );
  expect(lines).toHaveLength(1);
  const points = lines[0]?.points ?? [];
  const turned = points.reduce((sum, [x, y], i) => {
    const [nx, ny] = points[(i + 1) % points.length] ?? [x, y];
    const cross = (x - 0.5) * (ny - 0.5) - (nx - 0.5) * (y - 0.5);
    return sum + Math.atan2(cross, (x - 0.5) * (nx - 0.5) + (y - 0.5) * (ny - 0.5));
  }, 0);
  expect(Math.abs(turned)).toBeCloseTo(2 * Math.PI, 6);
});

const ROOM = { left: 100, right: 700, top: 50, bottom: 450 };
const SIZE = [800, 500] as const;

function extentOf(field: Field) {
  return { nodes: field.nodes, values: field.values, fullRise: 0.6 };
}

it('flat, the view is a plan: equal scales, y upwards, heights unseen', () => {
  const view = project(extentOf(square(4, (x) => x)), 0, ROOM, SIZE);
  expect(view.at(0, 0, 0)).toEqual([expect.closeTo(200, 9), expect.closeTo(450, 9)]);
  expect(view.at(1, 1, 0)).toEqual([expect.closeTo(600, 9), expect.closeTo(50, 9)]);
  expect(view.at(0.3, 0.4, 5)).toEqual(view.at(0.3, 0.4, 0));
});

it('at every lift all of the surface and its foot lie inside the room and touch it', () => {
  const field = square(8, (x, y) => x * y);
  fc.assert(
    fc.property(fc.double({ min: 0, max: 1, noNaN: true }), (lift) => {
      const view = project(extentOf(field), lift, ROOM, SIZE);
      let [l, r, t, b] = [Infinity, -Infinity, Infinity, -Infinity];
      for (let i = 0; i < field.nodeCount; i++) {
        for (const height of [0, view.rise * (field.values[i] ?? 0)]) {
          const [x, y] = view.at(field.nodes[2 * i] ?? 0, field.nodes[2 * i + 1] ?? 0, height);
          [l, r, t, b] = [Math.min(l, x), Math.max(r, x), Math.min(t, y), Math.max(b, y)];
        }
      }
      expect(l).toBeGreaterThan(ROOM.left - 1e-6);
      expect(r).toBeLessThan(ROOM.right + 1e-6);
      expect(t).toBeGreaterThan(ROOM.top - 1e-6);
      expect(b).toBeLessThan(ROOM.bottom + 1e-6);
      const slack = Math.min(r - l - (ROOM.right - ROOM.left), b - t - (ROOM.bottom - ROOM.top));
      expect(Math.max(r - l - 600, b - t - 400)).toBeCloseTo(0, 6);
      expect(slack).toBeLessThanOrEqual(1e-6);
    }),
  );
});

it('the graphics card and the overlay put a point at the same px, nearer points in front', () => {
  const view = project(extentOf(square(4, (x) => x)), 0.7, ROOM, SIZE);
  const clip = (x: number, y: number, h: number) =>
    [0, 1, 2].map((row) => [x, y, h, 1].reduce((sum, v, k) => sum + v * (view.clip[4 * k + row] ?? 0), 0));
  for (const point of [
    [0, 0, 0],
    [1, 0.2, 0.1],
    [0.4, 0.9, 0.3],
  ] as [number, number, number][]) {
    const [cx = 0, cy = 0] = clip(...point);
    const [px, py] = view.at(...point);
    expect(((cx + 1) / 2) * SIZE[0]).toBeCloseTo(px, 3);
    expect(((1 - cy) / 2) * SIZE[1]).toBeCloseTo(py, 3);
  }
  const [ex, ey, ez] = view.eye;
  const [near = 0, far = 0] = [clip(0.5 + 0.1 * ex, 0.5 + 0.1 * ey, 0.1 * ez)[2], clip(0.5, 0.5, 0)[2]];
  expect(near).toBeLessThan(far);
  expect(Math.hypot(ex, ey, ez)).toBeCloseTo(1, 12);
});

it('a px on the sheet leads back to its point', () => {
  const view = project(extentOf(square(4, (x) => x)), 0.6, ROOM, SIZE);
  const [x, y] = view.back(...view.at(0.3, 0.8, 0));
  expect([x, y]).toEqual([expect.closeTo(0.3, 9), expect.closeTo(0.8, 9)]);
});

it('a lifted surface hides the wall behind it and not the wall before it', () => {
  const field = square(10, () => 1);
  const view = project(extentOf(field), 1, ROOM, SIZE);
  const hidden = hiddenBy(new Locator(field), view, view.rise);
  expect(hidden(0.5, 1, 0)).toBe(true);
  // What floats just outside the back wall is behind the surface too.
  expect(hidden(0.5, 1.01, 0)).toBe(true);
  expect(hidden(0.5, -0.01, 0)).toBe(false);
  expect(hidden(0.5, 0, 0)).toBe(false);
  expect(hidden(0.5, 0.5, view.rise)).toBe(false);
  const flat = project(extentOf(field), 0, ROOM, SIZE);
  expect(hiddenBy(new Locator(field), flat, 0)(0.5, 1, 0)).toBe(false);
});
