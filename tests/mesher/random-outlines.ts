import type { Point } from '../../mesher/index.ts';
import { at, crossing, gap } from './segments.ts';

/** Simple polygons in the unit square that are not star-shaped as a rule, counter-clockwise. */

/** Random points joined in random order, untangled by reversals (2-opt); tried again until no corner is below `least`. */
export function shuffledPolygon(random: () => number, corners: number, least: number): Point[] {
  for (let tries = 0; ; tries++) {
    const points = Array.from({ length: corners }, (): Point => [random(), random()]);
    if (!untangle(points)) continue;
    if (tries < 400 ? isOpen(points, least) : isOpen(points, least / 4)) return oriented(points);
  }
}

function untangle(points: Point[]): boolean {
  const n = points.length;
  for (let pass = 0; pass < 200; pass++) {
    let tangled = false;
    for (let i = 0; i < n; i++) {
      for (let j = i + 2; j < n; j++) {
        if (i === 0 && j === n - 1) continue;
        if (!crossing([at(points, i), at(points, i + 1)], [at(points, j), at(points, j + 1)])) continue;
        points.splice(i + 1, j - i, ...points.slice(i + 1, j + 1).reverse());
        tangled = true;
      }
    }
    if (!tangled) return true;
  }
  return false;
}

/** No corner sharper than `least`, and no two walls nearer than a thousandth but at corners. */
function isOpen(points: readonly Point[], least: number): boolean {
  const n = points.length;
  for (let i = 0; i < n; i++) {
    const [p, q, r] = [at(points, i), at(points, i + 1), at(points, i + 2)];
    const angle = Math.abs(
      Math.atan2(
        (p[0] - q[0]) * (r[1] - q[1]) - (p[1] - q[1]) * (r[0] - q[0]),
        (p[0] - q[0]) * (r[0] - q[0]) + (p[1] - q[1]) * (r[1] - q[1]),
      ),
    );
    if (angle < Math.max(least, 0.003)) return false;
    for (let j = i + 2; j < n; j++) {
      if (i === 0 && j === n - 1) continue;
      if (gap([p, q], [at(points, j), at(points, j + 1)]) < 1e-3) return false;
    }
  }
  return true;
}

function oriented(points: Point[]): Point[] {
  let twice = 0;
  points.forEach((p, i) => {
    const q = at(points, i + 1);
    twice += p[0] * q[1] - p[1] * q[0];
  });
  return twice > 0 ? points : points.reverse();
}

/** The rim of a grown patch of grid cells with shaken corners: branches, bays, no two walls near each other. */
export function polyomino(random: () => number, corners: number): Point[] {
  const side = Math.max(4, Math.ceil(Math.sqrt(corners) * 1.15));
  const cells = new Uint8Array(side * side);
  const filled = (x: number, y: number): boolean =>
    x >= 0 && y >= 0 && x < side && y < side && cells[y * side + x] === 1;
  const start = Math.floor(side / 2);
  cells[start * side + start] = 1;
  let rim = 4;
  for (let tries = 0; tries < 400 * corners && rim < corners; tries++) {
    const x = Math.floor(side * random());
    const y = Math.floor(side * random());
    if (filled(x, y)) continue;
    const ringOf = [
      [1, 0],
      [1, 1],
      [0, 1],
      [-1, 1],
      [-1, 0],
      [-1, -1],
      [0, -1],
      [1, -1],
    ].map(([dx = 0, dy = 0]) => filled(x + dx, y + dy));
    // One run of filled neighbours round the cell, with a side among them: the patch stays in one piece without holes.
    const runs = ringOf.filter((f, i) => f && !ringOf[(i + 7) % 8]).length;
    const sides = [0, 2, 4, 6].filter((i) => ringOf[i]).length;
    if (runs !== 1 || sides === 0 || (sides > 1 && random() > 0.1)) continue;
    cells[y * side + x] = 1;
    rim += 4 - 2 * sides;
  }
  return traced(filled, side, random);
}

function traced(filled: (x: number, y: number) => boolean, side: number, random: () => number): Point[] {
  const shake = Array.from({ length: (side + 1) ** 2 }, (): Point => [random() - 0.5, random() - 0.5]);
  // Unit edges with the patch on their left, by start corner; no corner has two because runs were kept single.
  const after = new Map<number, number>();
  const key = (x: number, y: number): number => y * (side + 1) + x;
  for (let y = 0; y < side; y++) {
    for (let x = 0; x < side; x++) {
      if (!filled(x, y)) continue;
      if (!filled(x, y - 1)) after.set(key(x, y), key(x + 1, y));
      if (!filled(x + 1, y)) after.set(key(x + 1, y), key(x + 1, y + 1));
      if (!filled(x, y + 1)) after.set(key(x + 1, y + 1), key(x, y + 1));
      if (!filled(x - 1, y)) after.set(key(x, y + 1), key(x, y));
    }
  }
  const points: Point[] = [];
  const [first = 0] = after.keys();
  let k = first;
  do {
    const s = shake[k] ?? [0, 0];
    points.push([((k % (side + 1)) + 0.5 * s[0]) / side, (Math.floor(k / (side + 1)) + 0.5 * s[1]) / side]);
    k = after.get(k) ?? first;
  } while (k !== first);
  return points;
}
