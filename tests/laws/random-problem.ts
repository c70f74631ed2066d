import fc from 'fast-check';
import { type Mesh, meshDomain } from '../../mesher/index.ts';
import type { Coefficient, Medium, NoiseConvention, Problem, Wall } from '../../solver/index.ts';
import { type RandomDomain, randomDomain, seededRandom } from '../support/random-domain.ts';

/** A random compartment with random physics on a coarse mesh. */
export interface RandomProblem {
  readonly drawn: RandomDomain;
  readonly mesh: Mesh;
  readonly problem: Problem;
  /** For further choices of the test. */
  readonly random: () => number;
}

/** Three exits at most; which wall leads to which is drawn. */
const exitCount = 3;

interface Recipe {
  readonly seed: number;
  readonly corners: number;
  readonly holes: number;
  readonly slits: number;
  readonly regions: 0 | 1 | 2;
  readonly noise: NoiseConvention;
}

const recipe: fc.Arbitrary<Recipe> = fc.record({
  seed: fc.integer(),
  corners: fc.integer({ min: 3, max: 10 }),
  holes: fc.integer({ min: 0, max: 3 }),
  slits: fc.integer({ min: 0, max: 2 }),
  regions: fc.constantFrom(0, 1, 2),
  noise: fc.constantFrom('ito', 'stratonovich', 'isothermal'),
});

/** Checks a law on 20 random problems, the same ones in every run; a failure is shrunk to a simpler recipe. */
export function holdsOnRandomProblems(law: (given: RandomProblem) => void): void {
  fc.assert(
    fc.property(recipe, (drawnRecipe) => law(randomProblem(drawnRecipe))),
    { seed: 20_240_607, numRuns: 20 },
  );
}

function randomProblem(from: Recipe): RandomProblem {
  const drawn = randomDomain(from);
  const mesh = meshDomain(drawn.domain, { maxSize: 0.06, maxNodes: 20_000 });
  const random = seededRandom(from.seed ^ 0x5eed);
  const walls = new Map<number, Wall>();
  for (let tag = 0; tag < drawn.tagCount; tag++) walls.set(tag, randomWall(random));
  // One way out at least: the compartment is connected, slits do not cut it.
  walls.set(drawn.loopTags[Math.floor(random() * drawn.loopTags.length)] ?? 0, {
    kind: 'absorbing',
    exit: 0,
  });
  const media = mesh.regionSets.map((): Medium => ({ diffusion: randomDiffusion(random) }));
  return { drawn, mesh, problem: { noise: from.noise, media, walls, exitCount }, random };
}

function randomWall(random: () => number): Wall {
  const kind = random();
  const exit = Math.floor(exitCount * random());
  if (kind < 0.25) return { kind: 'absorbing', exit };
  if (kind < 0.6) return { kind: 'reflecting' };
  return { kind: 'partlyAbsorbing', kappa: 10 ** (4 * random() - 2), exit };
}

/** A constant between 0.1 and 10, or an expression that varies by about as much. */
function randomDiffusion(random: () => number): Coefficient {
  const value = 10 ** (2 * random() - 1);
  if (random() < 0.5) return { kind: 'constant', value };
  const [a, b] = [4 * random() - 2, 4 * random() - 2];
  if (random() < 0.5) return { kind: 'varying', at: (x, y) => value * Math.exp(a * x + b * y) };
  return { kind: 'varying', at: (x, y) => value * (1 + a * a * x * x + b * b * y * y) };
}

/** The problem with every D, and every κ, replaced. */
export function withCoefficients(
  problem: Problem,
  diffusion: (given: Coefficient) => Coefficient,
  kappa: (given: number) => number,
): Problem {
  const walls = new Map<number, Wall>();
  for (const [tag, wall] of problem.walls) {
    walls.set(tag, wall.kind === 'partlyAbsorbing' ? { ...wall, kappa: kappa(wall.kappa) } : wall);
  }
  const media = problem.media.map(
    (medium): Medium => ({ ...medium, diffusion: diffusion(medium.diffusion) }),
  );
  return { ...problem, media, walls };
}

/** D as it is at the places `back` leads to, times a factor. */
export function carried(
  given: Coefficient,
  factor: number,
  back: (x: number, y: number) => readonly [number, number] = (x, y) => [x, y],
): Coefficient {
  if (given.kind === 'constant') return { kind: 'constant', value: factor * given.value };
  return { kind: 'varying', at: (x, y) => factor * given.at(...back(x, y)) };
}

/** The largest of |a_i − b_i| ÷ largest |b|. */
export function largestDifference(a: Float64Array, b: Float64Array): number {
  let difference = 0;
  let size = 0;
  for (let i = 0; i < Math.max(a.length, b.length); i++) {
    difference = Math.max(difference, Math.abs((a[i] ?? Number.NaN) - (b[i] ?? Number.NaN)));
    size = Math.max(size, Math.abs(b[i] ?? Number.NaN));
  }
  return difference / size;
}
