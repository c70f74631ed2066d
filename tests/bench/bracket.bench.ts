import { cpus, loadavg } from 'node:os';
import { type Mesh, remesh } from '../../mesher/index.ts';
import {
  adaptUntil,
  assemble,
  type Bracketed,
  type BracketStart,
  type Brackets,
  prepare,
  prepareBrackets,
  prepareSurvivalBrackets,
} from '../../solver/index.ts';
import { type BracketCase, type ExactFigure, even, point } from '../solver/bracket-cases.ts';
import { bracketCases } from '../solver/bracket-polygons.ts';
import { rectangleMesh } from '../support/grid-mesh.ts';
import { absorbing, constant, problem } from '../support/physics.ts';

/*
 * Widths of the guaranteed brackets of every exact case (full width ÷ exact value), their effectivity (half width ÷ true
 * error of the middle), what they cost against the edge-averaged solve, and nodes against width when adapting.
 */

const percent = (x: number): string => `${(100 * x).toPrecision(3)} %`;

function bracketOf(brackets: Brackets, { figure, start }: ExactFigure): Bracketed {
  if (figure === 'mean') return brackets.mean(start);
  if (figure === 'secondMoment') return brackets.secondMoment(start);
  if (figure === 'rate') {
    const { low, high } = brackets.rate();
    return { value: (low + high) / 2, low, high, kind: 'guaranteed' };
  }
  return brackets.share(start, figure.shareOf);
}

function fail(words: string): never {
  throw new Error(words);
}

function bracketsOn(one: BracketCase, mesh: Mesh): Brackets {
  return prepareBrackets(assemble(mesh, one.problem), one.problem) ?? fail(`${one.name} is not reversible`);
}

console.log(`${cpus()[0]?.model}, load ${loadavg()[0]?.toFixed(1)}`);
let held = 0;
let asked = 0;
for (const one of bracketCases) {
  for (const h of [0.1, 0.05]) {
    const mesh = one.mesh(h);
    const brackets = bracketsOn(one, mesh);
    const words = one.figures.map((figure) => {
      const { low, high, value } = bracketOf(brackets, figure);
      asked++;
      if (low <= figure.exact && figure.exact <= high) held++;
      const name = typeof figure.figure === 'string' ? figure.figure : `share ${figure.figure.shareOf}`;
      const effectivity = (high - low) / 2 / Math.abs(value - figure.exact);
      return `${name} (${figure.start.kind}) ${percent((high - low) / figure.exact)}, ${effectivity.toPrecision(2)}`;
    });
    console.log(`${one.name}, ${mesh.nodes.length / 2} nodes: ${words.join('; ')}`);
  }
}
console.log(`held: ${held} of ${asked}`);

const square = problem(constant(1), [absorbing(0), absorbing(1), absorbing(1), absorbing(1)]);
for (const n of [45, 141, 316]) {
  const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: n, rows: n });
  const clock: number[] = [performance.now()];
  const lap = (): void => {
    clock.push(performance.now());
  };
  const system = assemble(mesh, square);
  prepare(system).solve(system.load);
  lap();
  const brackets = prepareBrackets(system, square) ?? fail('not reversible');
  lap();
  const average = brackets.mean(even);
  lap();
  const centre = brackets.mean(point(0.5, 0.5));
  lap();
  const share = brackets.share(even, 0);
  lap();
  if (n < 200) brackets.rate();
  lap();
  const parts = clock.slice(1).map((end, k) => end - (clock[k] ?? 0));
  const [solve = 1, ...rest] = parts;
  const ratios = rest.map((part) => (part / solve).toFixed(2));
  console.log(
    `unit square, ${mesh.nodes.length / 2} nodes: average ${percent((average.high - average.low) / average.value)}, centre ${percent((centre.high - centre.low) / centre.value)}, share ${percent((share.high - share.low) / share.value)}; ` +
      `time ÷ edge-averaged solve (${solve.toFixed(0)} ms): prepare, mean, point, share, rate ${ratios.join(', ')}`,
  );
}

for (const name of ['L-A', 'sq-window-mid-0.05', 'rect-halfbottom']) {
  const one = bracketCases.find((candidate) => candidate.name === name) ?? fail(name);
  const rounds = [1e-2, 1e-3, 1e-4].map((tolerance) => {
    const { outcome, rounds: all } = adaptUntil(
      one.mesh(0.2),
      {
        measure: (mesh) => {
          const brackets = bracketsOn(one, mesh);
          return { bracket: brackets.mean(even), shares: brackets.widthShares(even) };
        },
        refine: (mesh, size, maxNodes) => remesh(mesh, { size, maxSize: 1, maxNodes }),
      },
      { tolerance },
    );
    const { nodes, bracket } = all.at(-1) ?? fail('no round');
    return { outcome, nodes, half: (bracket.high - bracket.low) / 2 / bracket.value };
  });
  const [, middle, last] = rounds;
  const exponent =
    Math.log((last?.nodes ?? 1) / (middle?.nodes ?? 1)) / Math.log((middle?.half ?? 1) / (last?.half ?? 1));
  console.log(
    `${name}, adapting: ${rounds.map(({ outcome, nodes, half }) => `${nodes} nodes ± ${percent(half)} (${outcome})`).join(', ')}; nodes ∝ width^−${exponent.toFixed(2)}`,
  );
}

const still = problem(constant(1), [absorbing(), absorbing(), absorbing(), absorbing()]);
for (const n of [45, 91]) {
  const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: n, rows: n });
  const brackets = prepareBrackets(assemble(mesh, still), still) ?? fail('not reversible');
  const begun = performance.now();
  const times = prepareSurvivalBrackets(brackets, still) ?? fail('no lower bound of the rate');
  const words = [0.5, 0.1, 0.05, 0.01].map((left) => {
    const { low, high } = times.timeTo(even, left);
    return `${1 - left}: ${percent(high / low - 1)}`;
  });
  const spot: BracketStart = { kind: 'spot', x: 0.5, y: 0.5, radius: 0.2 };
  const { low, high } = times.timeTo(spot, 0.05);
  console.log(
    `unit square, ${mesh.nodes.length / 2} nodes, widths of times to a share, even start: ${words.join(', ')}; spot, 0.95: ${percent(high / low - 1)} (${(performance.now() - begun).toFixed(0)} ms in all)`,
  );
}
