import { cpus, loadavg } from 'node:os';
import { meshDomain, meshQuality, remesh } from '../../mesher/index.ts';
import { type BenchDomain, graded, sized } from './mesher-domains.ts';
import { timeRatio } from './ratio.ts';

/*
 * What meshing costs: triangles per CPU second and memory on even, graded and large domains, how time grows with the
 * count, and what smoothing and re-refining cost beside meshing. CPU time of this thread and V8's helpers.
 */

function run({ domain, options }: BenchDomain): { triangles: number; seconds: number } {
  const start = process.cpuUsage();
  const mesh = meshDomain(domain, options);
  const used = process.cpuUsage(start);
  return { triangles: mesh.triangles.length / 3, seconds: (used.user + used.system) / 1e6 };
}

function median(values: readonly number[]): number {
  return [...values].sort((a, b) => a - b)[values.length >> 1] ?? Number.NaN;
}

/** Prints the rate over five rounds and gives back count and median time. */
function report(bench: BenchDomain, rounds = 5): { triangles: number; seconds: number } {
  const runs = Array.from({ length: rounds }, () => run(bench));
  const triangles = runs[0]?.triangles ?? 0;
  const seconds = runs.map((r) => r.seconds);
  const rate = (s: number): string => `${(triangles / s / 1000).toFixed(0)}k`;
  console.log(
    `${bench.name}: ${triangles} triangles, ${rate(median(seconds))} per CPU second [${rate(Math.max(...seconds))}–${rate(Math.min(...seconds))}], ${rounds} rounds`,
  );
  return { triangles, seconds: median(seconds) };
}

function exponent(a: { triangles: number; seconds: number }, b: typeof a): string {
  return (Math.log(b.seconds / a.seconds) / Math.log(b.triangles / a.triangles)).toFixed(2);
}

console.log(`${cpus()[0]?.model}, load ${loadavg()[0]?.toFixed(1)}`);
run(sized('notched', 0.02));
run(graded(0.1));

const small = report(sized('square', 0.01));
report(sized('notched', 0.006));
report(sized('comb', 0.005));
report(graded(0.1));
report(graded(0.04));
const mid = report(sized('square', 0.00316), 3);
const before = process.resourceUsage().maxRSS;
const large = report(sized('square', 0.00182), 3);
const after = process.resourceUsage().maxRSS;
console.log(
  `growth of time with count: exponent ${exponent(small, large)} from 0.05M to 1.5M (${exponent(small, mid)} to 0.5M, ${exponent(mid, large)} from there)`,
);
console.log(
  `peak memory: ${((after * 1024) / large.triangles).toFixed(0)} bytes a triangle all in all at 1.5M (of it ${((before * 1024) / large.triangles).toFixed(0)} there before)`,
);

const bench = sized('notched', 0.006);
const mesh = meshDomain(bench.domain, bench.options);
const meshing = (): number => meshDomain(bench.domain, bench.options).triangles.length;
console.log(`noise line, meshing ÷ meshing: ${timeRatio(meshing, meshing)}`);
const smoothed = (): number => meshDomain(bench.domain, { ...bench.options, smoothing: 3 }).triangles.length;
console.log(`with three sweeps of smoothing ÷ without: ${timeRatio(meshing, smoothed)}`);
const again = (): number => remesh(mesh, { ...bench.options, maxSize: 0.0059 }).triangles.length;
console.log(`re-refining a mesh that is nearly right ÷ meshing: ${timeRatio(meshing, again)}`);
console.log(`smallest angle ${meshQuality(mesh).minAngle.toFixed(2)}`);
