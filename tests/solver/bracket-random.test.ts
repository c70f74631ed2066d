import { expect, it } from 'vitest';
import { meshDomain } from '../../mesher/index.ts';
import { assemble, type Coefficient, type Medium, type Problem, type Wall } from '../../solver/index.ts';
import type { Bracketed } from '../../solver/trust/bracketed.ts';
import { type BracketStart, prepareBrackets } from '../../solver/trust/brackets.ts';
import { randomDomain, seededRandom } from '../support/random-domain.ts';

const exitCount = 2;

/** Walls of every kind; slits may let through. */
function randomWall(random: () => number, slit: boolean): Wall {
  const kind = random();
  const exit = Math.floor(exitCount * random());
  if (kind < 0.3) return { kind: 'absorbing', exit };
  if (kind < 0.6) return { kind: 'reflecting' };
  if (slit && kind < 0.85) return { kind: 'permeable', permeability: 10 ** (2 * random() - 1) };
  return { kind: 'partlyAbsorbing', kappa: 10 ** (3 * random() - 1.5), exit };
}

/** D constant or varying, a loss now and then; the same potential everywhere, if any, so that the process is reversible. */
function randomMedium(random: () => number, pull: number): Medium {
  const value = 10 ** (random() - 0.5);
  const slope = 2 * random() - 1;
  const diffusion: Coefficient =
    random() < 0.5
      ? { kind: 'constant', value }
      : { kind: 'varying', at: (x, y) => value * Math.exp(slope * x - y / 2) };
  return {
    diffusion,
    ...(random() < 0.3 ? { loss: { kind: 'constant', value: 5 * random() } as const } : {}),
    ...(pull > 0
      ? {
          drift: {
            kind: 'potential',
            value: { kind: 'varying', at: (x, y) => pull * ((x - 0.4) ** 2 + x * y) },
          } as const,
        }
      : {}),
  };
}

function randomCase(seed: number) {
  const random = seededRandom(seed);
  const drawn = randomDomain({
    ...{ seed, corners: 4 + Math.floor(6 * random()), holes: Math.floor(3 * random()) },
    ...{ slits: Math.floor(3 * random()), regions: (seed % 3) as 0 | 1 | 2 },
  });
  const walls = new Map<number, Wall>();
  for (let tag = 0; tag < drawn.tagCount; tag++) {
    walls.set(tag, randomWall(random, !drawn.loopTags.includes(tag)));
  }
  walls.set(drawn.loopTags[0] ?? 0, { kind: 'absorbing', exit: 0 });
  const meshes = [0.08, 0.03].map((maxSize) => meshDomain(drawn.domain, { maxSize, maxNodes: 20_000 }));
  const pull = random() < 0.5 ? 0 : 3 * random();
  const media = (meshes[0]?.regionSets ?? []).map(() => randomMedium(random, pull));
  const noise = (['ito', 'stratonovich', 'isothermal'] as const)[seed % 3] ?? 'ito';
  const problem: Problem = { noise, media, walls, exitCount };
  return { meshes, problem };
}

const figures = ['mean', 'share 0', 'second moment', 'decay time', 'spot', 'lost'] as const;

/*
 * The meshes cover the same polygon and the coefficients are the same functions, so both brackets hold the same number
 * (up to the quadrature of varying coefficients, far below the widths here).
 */
it('brackets on a mesh and on a finer one overlap, and the finer ones are narrower, on a dozen random reversible cases [METHODS 6]', () => {
  let narrower = 0;
  let compared = 0;
  for (let seed = 1; seed <= 12; seed++) {
    const { meshes, problem } = randomCase(seed);
    const [coarse, fine] = meshes.map((mesh) => {
      const brackets = prepareBrackets(assemble(mesh, problem), problem);
      if (!brackets) throw new Error(`case ${seed} is not reversible`);
      const even: BracketStart = { kind: 'even' };
      const spot: BracketStart = { kind: 'spot', x: 0.5, y: 0.5, radius: 0.3 };
      return {
        mean: brackets.mean(even),
        'share 0': brackets.share(even, 0),
        'second moment': brackets.secondMoment(even),
        'decay time': brackets.decayTime(),
        spot: brackets.mean(spot),
        lost: brackets.share(spot, -1),
      };
    });
    for (const figure of figures) {
      const [a, b] = [coarse?.[figure], fine?.[figure]] as [Bracketed, Bracketed];
      expect(a.low <= b.high && b.low <= a.high, `case ${seed}, ${figure}: ${show(a)} and ${show(b)}`).toBe(
        true,
      );
      expect(a.low <= a.high && b.low <= b.high, `case ${seed}, ${figure}`).toBe(true);
      compared++;
      if (b.high - b.low <= a.high - a.low) narrower++;
    }
  }
  expect(compared).toBe(12 * figures.length);
  expect(narrower).toBe(compared);
});

function show({ low, high }: Bracketed): string {
  return `[${low}, ${high}]`;
}
