import { expect, it } from 'vitest';
import { layoutDomain } from '../../src/case/layout-domain.ts';
import { readObject, smallCase } from './small-case.ts';

const regions = {
  wide: { rectangle: [0.1, 0.1, 0.9, 0.9] },
  inner: { rectangle: [0.2, 0.2, 0.6, 0.6] },
};
const constant = (value: number) => ({ kind: 'constant', value }) as const;

/** The problem of the only layout of a square with two nested regions, floor 0 wide, 1 inner. */
function problemOf(particle: object, layout: object = {}, drawing: object = {}) {
  const read = readObject(
    smallCase({
      units: 'none',
      drawing: { outline: { rectangle: [0, 0, 1, 1] }, regions, ...drawing },
      particle,
      walls: { rim: { on: 'outline' } },
      layouts: { only: { rim: 'absorbing', ...layout } },
    }),
  );
  const [only] = read.layouts;
  if (!only) throw new Error('no layout');
  const domain = layoutDomain(read, only);
  return { ...domain.problem([[], [0], [0, 1]]), exits: domain.exits };
}

it('a region keeps what it does not state itself from the region around it, and that from the compartment', () => {
  const { media } = problemOf({
    diffusion: 1,
    diffusionIn: { inner: 2 },
    noise: 'isothermal',
    drift: { x: 3, y: 0 },
    driftIn: { wide: { x: 4, y: 0 } },
    loss: 5,
    lossIn: { inner: 6 },
  });
  expect(media).toEqual([
    {
      diffusion: constant(1),
      drift: { kind: 'components', x: constant(3), y: constant(0) },
      loss: constant(5),
    },
    {
      diffusion: constant(1),
      drift: { kind: 'components', x: constant(4), y: constant(0) },
      loss: constant(5),
    },
    {
      diffusion: constant(2),
      drift: { kind: 'components', x: constant(4), y: constant(0) },
      loss: constant(6),
    },
  ]);
});

it('a region may be without the drift and the loss of the compartment', () => {
  const { media } = problemOf({
    diffusion: 1,
    drift: { potential: { expression: 'x' } },
    driftIn: { wide: { potential: 7 }, inner: { x: 0, y: 0 } },
    loss: 1,
    lossIn: { wide: 0 },
  });
  expect(media.map(({ drift, loss }) => [drift?.kind, loss?.kind])).toEqual([
    ['potential', 'constant'],
    [undefined, undefined],
    [undefined, undefined],
  ]);
});

it('catching floors are exits after the walls, each under the name of its region; depth is handed on', () => {
  const { media, exits, exitCount, depth } = problemOf(
    { diffusion: 1 },
    { inner: { floor: 3 }, wide: { floor: 2 } },
    { depth: 0.5 },
  );
  expect([exits, exitCount, depth]).toEqual([['rim', 'inner', 'wide'], 3, constant(0.5)]);
  expect(media.map(({ floor }) => floor)).toEqual([undefined, { kappa: 2, exit: 2 }, { kappa: 3, exit: 1 }]);
});

it('a tensor takes the place of D, and no number stands there to be solved by mistake', () => {
  const { media } = problemOf({ diffusion: { principal: [2, 1] } });
  expect(media[0]).toMatchObject({ tensor: { kind: 'constant', value: [2, 0, 1] } });
  expect(media[0]?.diffusion).toEqual(constant(Number.NaN));
});
