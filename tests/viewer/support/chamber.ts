import poly2tri from 'poly2tri';

/**
 * A small chamber for looking at the page without the service: invented geometry, a coarse mesh, and mean exit times
 * solved on it with linear elements. Not the program's solver: only the page is tried with it.
 */

export type Point = [number, number];

export interface Loop {
  readonly name: string;
  readonly role: 'outline' | 'hole';
  readonly points: readonly Point[];
}

export interface Mesh {
  readonly nodes: Float64Array;
  readonly triangles: Int32Array;
  /** Node numbers of each loop, in order. */
  readonly loops: readonly (readonly number[])[];
}

function arc(cx: number, cy: number, r: number, from: number, to: number, n: number): Point[] {
  return Array.from({ length: n }, (_, i): Point => {
    const a = ((from + ((to - from) * (i + 0.5)) / n) * Math.PI) / 180;
    return [cx + r * Math.cos(a), cy + r * Math.sin(a)];
  });
}

function resample(points: readonly Point[], step: number): Point[] {
  const fine: Point[] = [];
  points.forEach((from, i) => {
    const to = points[(i + 1) % points.length] ?? from;
    const n = Math.max(1, Math.round(Math.hypot(to[0] - from[0], to[1] - from[1]) / step));
    for (let k = 0; k < n; k++) {
      fine.push([from[0] + ((to[0] - from[0]) * k) / n, from[1] + ((to[1] - from[1]) * k) / n]);
    }
  });
  return fine;
}

/** Outline with a bay below, counter-clockwise from the middle of the bay, and five posts, clockwise. */
export function chamberLoops(step: number): Loop[] {
  const outline: Point[] = [
    [0.263, 0],
    ...arc(0.32, 0.06, 0.06, -90, 0, 6),
    ...arc(0.43, 0.1, 0.05, 180, 90, 5),
    ...arc(1.02, 0.33, 0.18, -90, 0, 14),
    ...arc(1.02, 0.62, 0.18, 0, 90, 14),
    ...arc(0.16, 0.64, 0.16, 90, 180, 12),
    ...arc(0.08, 0.23, 0.08, 180, 270, 8),
    ...arc(0.09, 0.1, 0.05, 90, 0, 5),
    ...arc(0.2, 0.06, 0.06, 180, 270, 6),
  ];
  const post = (name: string, x: number, y: number, r: number): Loop => ({
    name,
    role: 'hole',
    points: arc(x, y, r, 360, 0, 36),
  });
  return [
    { name: 'outline', role: 'outline', points: resample(outline, step) },
    post('inlet post', 0.52, 0.36, 0.055),
    post('high post', 0.38, 0.62, 0.055),
    post('middle post', 0.7, 0.5, 0.065),
    post('low post', 0.9, 0.33, 0.05),
    post('far post', 0.94, 0.64, 0.05),
  ];
}

function inside(point: Point, loop: readonly Point[]): boolean {
  let odd = false;
  loop.forEach((a, i) => {
    const b = loop[(i + 1) % loop.length] ?? a;
    const crosses = a[1] > point[1] !== b[1] > point[1];
    if (crosses && point[0] < a[0] + ((point[1] - a[1]) / (b[1] - a[1])) * (b[0] - a[0])) odd = !odd;
  });
  return odd;
}

/** Triangles over a hexagonal grid of points and the loops. */
export function meshChamber(loops: readonly Loop[], step: number): Mesh {
  const all: poly2tri.Point[] = [];
  const contour = (loop: Loop) =>
    loop.points.map(([x, y]) => {
      const point = new poly2tri.Point(x, y);
      all.push(point);
      return point;
    });
  const [outline, ...holes] = loops;
  if (outline === undefined) throw new Error('no outline');
  const sweep = new poly2tri.SweepContext(contour(outline));
  for (const hole of holes) sweep.addHole(contour(hole));
  const near = (x: number, y: number) =>
    loops.some((loop) => loop.points.some(([px, py]) => Math.hypot(px - x, py - y) < 0.75 * step));
  for (let j = 0; j * step * 0.866 < 1; j++) {
    for (let i = 0; i * step < 1.4; i++) {
      // A little off the grid, so that no three points are in line with a corner.
      const at: Point = [(i + 0.5 * (j % 2)) * step + 1e-5 * (j % 7), j * step * 0.866 + 1e-5 * (i % 5)];
      if (!inside(at, outline.points) || holes.some((hole) => inside(at, hole.points)) || near(...at))
        continue;
      const point = new poly2tri.Point(...at);
      all.push(point);
      sweep.addPoint(point);
    }
  }
  sweep.triangulate();
  const index = new Map(all.map((point, i) => [point as unknown, i]));
  const triangles = sweep
    .getTriangles()
    .flatMap((triangle) => triangle.getPoints().map((point) => index.get(point) ?? 0));
  let next = 0;
  const numbered = loops.map((loop) => loop.points.map(() => next++));
  return {
    nodes: new Float64Array(all.flatMap((point) => [point.x, point.y])),
    triangles: new Int32Array(triangles),
    loops: numbered,
  };
}

/** Per node of a loop: 'absorbing', a reactivity κ, or nothing. */
export type WallAt = (loop: string, s: number, length: number) => 'absorbing' | number | undefined;

export interface Solved {
  readonly values: Float64Array;
  /** Per loop: arc length at each node, and the whole length. */
  readonly lengths: readonly { readonly s: readonly number[]; readonly total: number }[];
  /** Share caught at each node for a release with the given weights. */
  readonly caught: (weights: Float64Array) => Float64Array;
}

/** −D Δu = 1 with linear elements, solved by conjugate gradients; the same matrix gives the shares. */
export function solveChamber(mesh: Mesh, loops: readonly Loop[], wallAt: WallAt, d: number): Solved {
  const n = mesh.nodes.length / 2;
  const rows: Map<number, number>[] = Array.from({ length: n }, () => new Map());
  const load = new Float64Array(n);
  const add = (i: number, j: number, v: number) => rows[i]?.set(j, (rows[i]?.get(j) ?? 0) + v);
  const at = (i: number): Point => [mesh.nodes[2 * i] ?? 0, mesh.nodes[2 * i + 1] ?? 0];
  for (let t = 0; t < mesh.triangles.length; t += 3) {
    const c = [0, 1, 2].map((k) => mesh.triangles[t + k] ?? 0);
    const p = c.map(at);
    const e = [0, 1, 2].map((k): Point => {
      const a: Point = p[(k + 1) % 3] ?? [0, 0];
      const b: Point = p[(k + 2) % 3] ?? [0, 0];
      return [b[0] - a[0], b[1] - a[1]];
    });
    const e0: Point = e[0] ?? [0, 0];
    const e1: Point = e[1] ?? [0, 0];
    const area2 = e0[0] * e1[1] - e0[1] * e1[0];
    for (let i = 0; i < 3; i++) {
      load[c[i] ?? 0] = (load[c[i] ?? 0] ?? 0) + area2 / 6;
      for (let j = 0; j < 3; j++) {
        const a: Point = e[i] ?? [0, 0];
        const b: Point = e[j] ?? [0, 0];
        add(c[i] ?? 0, c[j] ?? 0, (d * (a[0] * b[0] + a[1] * b[1])) / (2 * area2));
      }
    }
  }
  const fixed = new Uint8Array(n);
  const kappaAt = new Float64Array(n);
  const lengths = loops.map((loop, l) => {
    const ids = mesh.loops[l] ?? [];
    const s = [0];
    ids.forEach((id, i) => {
      const [a, b] = [at(id), at(ids[(i + 1) % ids.length] ?? id)];
      s.push((s[i] ?? 0) + Math.hypot(b[0] - a[0], b[1] - a[1]));
    });
    const total = s[ids.length] ?? 0;
    ids.forEach((id, i) => {
      const wall = wallAt(loop.name, s[i] ?? 0, total);
      if (wall === 'absorbing') fixed[id] = 1;
      else if (wall !== undefined) {
        const before = (s[i] ?? 0) - (i > 0 ? (s[i - 1] ?? 0) : (s[ids.length - 1] ?? 0) - total);
        kappaAt[id] = (wall * (before + (s[i + 1] ?? 0) - (s[i] ?? 0))) / 2;
        add(id, id, kappaAt[id] ?? 0);
      }
    });
    return { s: s.slice(0, ids.length), total };
  });
  const times = (x: Float64Array) => {
    const y = new Float64Array(n);
    rows.forEach((row, i) => {
      if (fixed[i] === 1) return;
      let sum = 0;
      for (const [j, v] of row) if (fixed[j] !== 1) sum += v * (x[j] ?? 0);
      y[i] = sum;
    });
    return y;
  };
  const solve = (right: Float64Array): Float64Array => {
    const x = new Float64Array(n);
    const r = right.map((v, i) => (fixed[i] === 1 ? 0 : v));
    const scale = (v: Float64Array) => v.map((one, i) => one / (rows[i]?.get(i) ?? 1));
    let z = scale(r);
    const p = z.slice();
    const dot = (a: Float64Array, b: Float64Array) => a.reduce((sum, v, i) => sum + v * (b[i] ?? 0), 0);
    let rz = dot(r, z);
    const stop = 1e-20 * rz;
    for (let k = 0; k < 4000 && rz > stop; k++) {
      const q = times(p);
      const step = rz / dot(p, q);
      for (let i = 0; i < n; i++) {
        x[i] = (x[i] ?? 0) + step * (p[i] ?? 0);
        r[i] = (r[i] ?? 0) - step * (q[i] ?? 0);
      }
      z = scale(r);
      const next = dot(r, z);
      for (let i = 0; i < n; i++) p[i] = (z[i] ?? 0) + (next / rz) * (p[i] ?? 0);
      rz = next;
    }
    return x;
  };
  return {
    values: solve(load),
    lengths,
    caught: (weights) => {
      const g = solve(weights);
      return g.map((v, i) => {
        if (fixed[i] !== 1) return (kappaAt[i] ?? 0) * v;
        let flow = weights[i] ?? 0;
        for (const [j, entry] of rows[i] ?? []) flow -= entry * (fixed[j] === 1 ? 0 : (g[j] ?? 0));
        return flow;
      });
    },
  };
}
