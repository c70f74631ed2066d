import { cpus, loadavg } from 'node:os';
import { assemble, type Drift, meanExitTime, prepare, type System } from '../../solver/index.ts';
import { rectangleMesh } from '../support/grid-mesh.ts';
import { absorbing, constant, problem, varying } from '../support/physics.ts';
import { timeRatio } from './ratio.ts';

/*
 * What the solver costs, as ratios within one run: growth from 10k to 100k nodes, drift against none, further
 * right-hand sides one by one and in blocks of 8, multigrid against the factor. Even meshes of right triangles.
 */

const walls = [absorbing(), absorbing(), absorbing(), absorbing()];
const still = problem(constant(1), walls);
const spin: Drift = {
  kind: 'components',
  x: varying((_, y) => -9 * y),
  y: varying((x) => 9 * x),
};
const turning = { ...still, media: [{ diffusion: constant(1), drift: spin }] };

const meshes = new Map(
  [100, 316].map((n) => [n, rectangleMesh({ x: [0, 1], y: [0, 1], columns: n, rows: n })]),
);
const fresh = (n: number, physics = still): System => assemble(meshes.get(n) ?? fail(), physics);
function fail(): never {
  throw new Error('no such mesh');
}
const whole =
  (n: number, physics = still) =>
  (): number =>
    meanExitTime(fresh(n, physics))[(n * n) / 2] ?? 0;

console.log(`${cpus()[0]?.model}, load ${loadavg()[0]?.toFixed(1)}`);
console.log(`noise line, 10k ÷ 10k: ${timeRatio(whole(100), whole(100))}`);
console.log(`100k ÷ 10k nodes, from mesh to field: ${timeRatio(whole(100), whole(316), 5)}`);
console.log(`irreversible drift ÷ none, 10k nodes: ${timeRatio(whole(100), whole(100, turning))}`);

const system = fresh(316);
const prepared = prepare(system);
const sides = Array.from({ length: 8 }, (_, r) => system.load.map((v, i) => v * Math.cos(r * i)));
const first = (): number => (prepare(fresh(316)).solve(system.load).converged ? 1 : 0);
const one = (): number => (prepared.solve(system.load).converged ? 1 : 0);
const oneByOne = (): number => sides.filter((rhs) => prepared.solve(rhs).converged).length;
const inBlock = (): number => prepared.solveMany(sides).filter((s) => s.converged).length;
console.log(`further right-hand side ÷ first solve, 100k nodes: ${timeRatio(first, one, 5)}`);
console.log(`8 right-hand sides in a block ÷ one by one: ${timeRatio(oneByOne, inBlock)}`);
const multigrid = (): number =>
  prepare(fresh(316), { preconditioner: 'multigrid' }).solve(system.load).iterations;
console.log(`multigrid ÷ factor, 100k nodes, first solve: ${timeRatio(first, multigrid, 5)}`);
console.log(`bytes a node: factor ${(prepared.bytes / system.size).toFixed(0)}`);
