import {
  type Chain,
  type Domain,
  locate,
  type Mesh,
  type MeshOptions,
  meshDomain,
} from '../../mesher/index.ts';
import {
  assemble,
  evenStart,
  meanExitTime,
  pointStart,
  valueFromStart,
  type Wall,
} from '../../solver/index.ts';
import { arcAverage, arcExitTime } from '../published/arc-exit-time.ts';
import { rectangleAverage, rectangleExitTime } from '../published/rectangle-exit-time.ts';

/*
 * Errors of mean exit times against exact values as meshes grow, and the order seen: p in error ~ n^(−p/2), n nodes,
 * which on even meshes is the p of error ~ h^p. Figures, no times.
 */

interface Problem {
  readonly domain: Domain;
  readonly walls: readonly Wall[];
  /** Where the error is taken beside the average. */
  readonly at: readonly [number, number];
  readonly exact: { readonly point: number; readonly average: number };
}

const absorbing: Wall = { kind: 'absorbing', exit: 0 };
const reflecting: Wall = { kind: 'reflecting' };
const halfAngle = Math.PI / 6;
const arcEnds = [-halfAngle, halfAngle].map((a): [number, number] => [Math.cos(a), Math.sin(a)]);

const domainOf = (outline: Chain): Domain => ({
  ...{ outline, holes: [], innerWalls: [], regions: [] },
  tolerance: 1e-12,
});

/** The unit circle cut at the given angles, which run once around; piece k has tag k. */
function circle(cuts: readonly number[]): Domain {
  const place = (angle: number): [number, number] => [Math.cos(angle), Math.sin(angle)];
  const pieces = cuts.map((start, tag) => {
    const end = cuts[tag + 1] ?? (cuts[0] ?? 0) + 2 * Math.PI;
    const [from, to] = [place(start), tag + 1 < cuts.length ? place(end) : place(cuts[0] ?? 0)];
    const arc = { radii: [1, 1], centre: [0, 0], turned: 0, start, sweep: end - start } as const;
    return { tag, curve: { kind: 'arc', from, to, ...arc } as const };
  });
  return domainOf({ name: 'outline', pieces });
}

function square(): Domain {
  const corners = [
    [0, 0],
    [1, 0],
    [1, 1],
    [0, 1],
    [0, 0],
  ] as const;
  const pieces = corners.slice(0, 4).map((from, tag) => {
    return { tag, curve: { kind: 'line', from, to: corners[tag + 1] ?? from } as const };
  });
  return domainOf({ name: 'outline', pieces });
}

const problems = {
  disc: {
    domain: circle([0, 2, 4]),
    walls: [absorbing, absorbing, absorbing],
    at: [0, 0],
    exact: { point: 1 / 4, average: 1 / 8 },
  },
  square: {
    domain: square(),
    walls: [absorbing, absorbing, absorbing, absorbing],
    at: [0.5, 0.5],
    exact: { point: rectangleExitTime(1, 1, 0.5, 0.5), average: rectangleAverage(1, 1) },
  },
  arc: {
    domain: circle([-halfAngle, halfAngle, Math.PI]),
    walls: [absorbing, reflecting, reflecting],
    at: [0, 0],
    exact: { point: arcExitTime(0, 0, halfAngle), average: arcAverage(halfAngle) },
  },
} satisfies Record<string, Problem>;

interface Row {
  readonly nodes: number;
  readonly point: number;
  readonly average: number;
}

function errorsOn(mesh: Mesh, { walls, at, exact }: Problem): Row {
  const byTag = new Map(walls.map((wall, tag) => [tag, wall]));
  const media = mesh.regionSets.map(() => ({ diffusion: { kind: 'constant', value: 1 } as const }));
  const u = meanExitTime(assemble(mesh, { noise: 'ito', media, walls: byTag, exitCount: 1 }));
  const found = locate(mesh).find(...at);
  if (!found) throw new Error('the point of the bench lies outside its mesh');
  const start = pointStart(mesh, found.triangle, found.weights);
  return {
    nodes: mesh.nodes.length / 2,
    point: Math.abs(valueFromStart(start, u) / exact.point - 1),
    average: Math.abs(valueFromStart(evenStart(mesh), u) / exact.average - 1),
  };
}

/** One line per mesh, with the order seen from the mesh before. */
function table(title: string, problem: Problem, meshes: readonly MeshOptions[]): Row[] {
  console.log(`\n${title}\n   nodes   at the point  order    average  order`);
  const rows: Row[] = [];
  for (const options of meshes) {
    const row = errorsOn(meshDomain(problem.domain, options), problem);
    const last = rows.at(-1);
    const order = (of: 'point' | 'average'): string =>
      last ? ((2 * Math.log(last[of] / row[of])) / Math.log(row.nodes / last.nodes)).toFixed(2) : '';
    const cell = (of: 'point' | 'average'): string =>
      `${(100 * row[of]).toExponential(1)} % ${order(of).padStart(6)}`;
    console.log(`${String(row.nodes).padStart(8)}   ${cell('point')}  ${cell('average')}`);
    rows.push(row);
  }
  const [first, last] = [rows[0], rows.at(-1)];
  if (first && last) {
    const over = (of: 'point' | 'average'): string =>
      ((2 * Math.log(first[of] / last[of])) / Math.log(last.nodes / first.nodes)).toFixed(2);
    console.log(`   order over all: at the point ${over('point')}, average ${over('average')}`);
  }
  return rows;
}

const sizes = [0.2, 0.1, 0.05, 0.025, 0.0125];
const even = sizes.map((maxSize) => ({ maxSize }));

/** As the program grades: a fixed growth from a size 256 times finer than the even one. */
const fixedGrowth = sizes.map((maxSize) => ({
  ...{ maxSize, growth: 0.15 },
  sources: arcEnds.map((at) => ({ at, size: maxSize / 256 })),
}));

/** Size ~ √r from the arc's ends, which equidistributes the error of an r^(1/2) singularity (METHODS 4). */
const rootGrowth = sizes.map((maxSize) => ({
  maxSize,
  size: (x: number, y: number): number => {
    const r = Math.min(...arcEnds.map(([ax, ay]) => Math.hypot(x - ax, y - ay)));
    return Math.max(maxSize * Math.sqrt(r), maxSize ** 2 / 8);
  },
}));

table('disc, rim absorbing, even meshes: second order expected', problems.disc, even);
table('square, sides absorbing, even meshes: second order expected', problems.square, even);
const plain = table(
  'disc, one absorbing arc of half-angle π/6, even meshes: first order expected',
  problems.arc,
  even,
);
const fixed = table('the same, graded with fixed growth 0.15 from size/256', problems.arc, fixedGrowth);
const rooted = table('the same, graded like √distance', problems.arc, rootGrowth);

/** Error of the average at a node count, on the straight line between two meshes in the logarithms. */
function averageAt(rows: readonly Row[], nodes: number): number {
  const next = rows.findIndex((row) => row.nodes >= nodes);
  const [a, b] = [rows[next - 1], rows[next]];
  if (!a || !b) return Number.NaN;
  const t = Math.log(nodes / a.nodes) / Math.log(b.nodes / a.nodes);
  return a.average * (b.average / a.average) ** t;
}

console.log('\nerror of the average, graded ÷ even meshes, at equal node counts (log-log between meshes)');
for (const nodes of [500, 1500, 5000, 15_000, 50_000]) {
  const ratio = (rows: readonly Row[]): string => {
    const found = averageAt(rows, nodes) / averageAt(plain, nodes);
    return Number.isFinite(found) ? found.toFixed(3) : 'no mesh that small';
  };
  console.log(
    `${String(nodes).padStart(8)} nodes: fixed growth ${ratio(fixed)}, like √distance ${ratio(rooted)}`,
  );
}
