import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { loadavg, tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { meshDomain, meshQuality } from '../../mesher/index.ts';
import { type BenchDomain, graded, sized } from '../bench/mesher-domains.ts';

/*
 * Our mesher beside CGAL's (Debian libcgal-dev, tests/outside/cgal-driver.cpp), same domains, angle bound and size
 * field, in one run, order swapped every round: throughput in triangles per CPU second (warm, median of three),
 * triangle count, and peak resident memory of the first mesh in a process less that of an idle process. Needs g++, libcgal-dev, libgmp-dev and libmpfr-dev.
 *
 * Run after `npm run build`: npm run outside -- mesher
 */

interface Outcome {
  readonly triangles: number;
  readonly seconds: number;
  readonly kilobytes: number;
  readonly minAngle: number;
}

const angle = 28;
const cases: readonly (readonly [BenchDomain, number])[] = [
  [sized('square', 0.007), 5],
  [sized('notched', 0.008), 5],
  [sized('comb', 0.004), 5],
  [graded(0.08), 3],
  [graded(0.04), 3],
  [sized('square', 0.00182), 3],
];

if (process.argv[2] === 'one') {
  // A process of its own for each measurement, so that peak memory is that of one mesh.
  process.stdout.write(JSON.stringify(ours(Number(process.argv[3]))));
} else {
  compareAll();
}

function ours(index: number): Outcome {
  const bench = cases[index]?.[0];
  if (!bench) return { triangles: 0, seconds: 0, kilobytes: process.resourceUsage().maxRSS, minAngle: 0 };
  // Warm-up compiles the hot loops, as a service that has meshed before would have them.
  meshDomain(bench.domain, {
    ...bench.options,
    maxSize: 4 * bench.options.maxSize,
    growth: 4 * bench.options.growth,
  });
  const start = process.cpuUsage();
  const mesh = meshDomain(bench.domain, { ...bench.options, minAngle: angle });
  const used = process.cpuUsage(start);
  const kilobytes = process.resourceUsage().maxRSS;
  const { triangles, minAngle } = meshQuality(mesh);
  return { triangles, seconds: (used.user + used.system) / 1e6, kilobytes, minAngle };
}

function oursApart(index: number): Outcome {
  const self = fileURLToPath(import.meta.url);
  return JSON.parse(
    execFileSync(process.execPath, [self, 'one', String(index)], { encoding: 'utf8' }),
  ) as Outcome;
}

/** The input of the driver: see its head. */
function driverInput({ domain, options, seeds }: BenchDomain): string {
  const points: string[] = [];
  const ends: string[] = [];
  for (const { pieces } of [domain.outline, ...domain.holes]) {
    const first = points.length;
    pieces.forEach(({ curve }, i) => {
      points.push(curve.from.join(' '));
      ends.push(`${first + i} ${first + ((i + 1) % pieces.length)}`);
    });
  }
  const sources = (options.sources ?? []).map(({ at, size }) => `${at.join(' ')} ${size}`);
  const lists = [sources, points, ends, seeds.map((p) => p.join(' '))];
  return [angle, options.maxSize, options.growth, ...lists.flatMap((l) => [l.length, ...l])].join('\n');
}

function theirs(driver: string, input: string): Outcome {
  const line = execFileSync(driver, { input, encoding: 'utf8' }).trim().split(' ').map(Number);
  const [, triangles = 0, seconds = 0, kilobytes = 0, minAngle = 0] = line;
  return { triangles, seconds, kilobytes, minAngle };
}

function median(values: readonly number[]): number {
  return [...values].sort((a, b) => a - b)[values.length >> 1] ?? Number.NaN;
}

function compareAll(): void {
  const folder = mkdtempSync(join(tmpdir(), 'cgal-'));
  const driver = join(folder, 'cgal-driver');
  // Sources lie beside the compiled tests' sources, not in dist.
  const source = fileURLToPath(new URL('../../../tests/outside/cgal-driver.cpp', import.meta.url));
  try {
    execFileSync('g++', ['-O3', '-DNDEBUG', '-o', driver, source, '-lgmp', '-lmpfr']);
    const idle = oursApart(-1).kilobytes;
    const nothing = theirs(driver, driverInput(sized('square', 2))).kilobytes;
    cases.forEach(([bench, rounds], index) => {
      compareOne(bench, rounds, driver, () => oursApart(index), idle, nothing);
    });
  } finally {
    rmSync(folder, { recursive: true });
  }
}

function compareOne(
  bench: BenchDomain,
  rounds: number,
  driver: string,
  own: () => Outcome,
  idle: number,
  nothing: number,
): void {
  const input = driverInput(bench);
  const ratios: number[] = [];
  let [a, b] = [own(), theirs(driver, input)];
  for (let round = 0; round < rounds; round++) {
    if (round % 2 === 0) a = own();
    b = theirs(driver, input);
    if (round % 2 === 1) a = own();
    ratios.push(a.triangles / a.seconds / (b.triangles / b.seconds));
  }
  const memory = (a.kilobytes - idle) / a.triangles / ((b.kilobytes - nothing) / b.triangles);
  const spread = `${Math.min(...ratios).toFixed(2)}–${Math.max(...ratios).toFixed(2)}`;
  process.stdout.write(
    `${bench.name}: ${a.triangles} triangles, count ÷ CGAL's ${(a.triangles / b.triangles).toFixed(3)}, throughput ÷ CGAL's ${median(ratios).toFixed(2)} [${spread}], memory a triangle ÷ CGAL's ${memory.toFixed(2)}, smallest angle ${a.minAngle.toFixed(2)} and ${b.minAngle.toFixed(2)}, load ${loadavg()[0]?.toFixed(1)}\n`,
  );
}
