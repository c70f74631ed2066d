import { expect, it } from 'vitest';
import { chainLength } from '../../mesher/index.ts';
import type { Case, WallKind } from '../../src/case/case.ts';
import { buildDrawing, type RawDrawing } from '../../src/case/drawing.ts';
import { layoutDomain } from '../../src/case/layout-domain.ts';
import { type RawExtent, resolveWallParts } from '../../src/case/stretches.ts';
import { drawingContext, refusalOf } from '../support/drawing-context.ts';

const ctx = drawingContext();
const constant = (value: number) => ({ kind: 'constant', value }) as const;
const weak = (value: number): WallKind => ({ kind: 'partlyAbsorbing', kappa: { value } });
const absorbing: WallKind = { kind: 'absorbing' };

interface Given {
  readonly drawing?: RawDrawing;
  readonly walls?: Readonly<Record<string, readonly [RawExtent, WallKind]>>;
  readonly without?: readonly string[];
  readonly ownD?: Readonly<Record<number, number>>;
}

/** A case around a drawing (a 4 × 2 rectangle if none is given) and its only layout, cut. */
function cut({
  drawing: raw = { outline: { rectangle: [0, 0, 4, 2] } },
  walls = {},
  without = [],
  ownD = {},
}: Given) {
  const drawing = buildDrawing(raw, ctx);
  const assignments = Object.entries(walls).map(([name, [extent, kind]]) => ({
    wall: { name, as: 'pad' as const, parts: resolveWallParts(extent, drawing, ctx, name) },
    kind,
  }));
  const theCase = {
    drawing,
    particle: {
      noise: 'isothermal',
      diffusion: constant(1),
      diffusionIn: new Map(Object.entries(ownD).map(([region, value]) => [Number(region), constant(value)])),
      driftIn: new Map(),
      lossIn: new Map(),
    },
  } as unknown as Case;
  return layoutDomain(theCase, { name: 'a', assignments, without });
}

const sorted = (points: readonly (readonly number[])[]) =>
  points
    .map((p) => p.map((n) => Number(n.toFixed(9)) + 0))
    .sort((a, b) => (a[0] ?? 0) - (b[0] ?? 0) || (a[1] ?? 0) - (b[1] ?? 0));

it('cuts pieces at the ends of the layout and gives each its kind, exit and arc lengths', () => {
  const { domain, pieces, exits } = cut({
    walls: {
      low: [{ on: 'outline', from: 1, to: 3 }, absorbing],
      side: [{ on: 'outline', from: 5, to: 7 }, weak(2)],
    },
  });
  expect(exits).toEqual(['low', 'side']);
  expect([...pieces.values()].map(({ from, to, wall, physics }) => [from, to, wall, physics.kind])).toEqual([
    [0, 1, undefined, 'reflecting'],
    [1, 3, 'low', 'absorbing'],
    [3, 4, undefined, 'reflecting'],
    [4, 5, undefined, 'reflecting'],
    [5, 6, 'side', 'partlyAbsorbing'],
    [6, 7, 'side', 'partlyAbsorbing'],
    [7, 10, undefined, 'reflecting'],
    [10, 12, undefined, 'reflecting'],
  ]);
  expect(pieces.get(4)?.physics).toEqual({ kind: 'partlyAbsorbing', kappa: 2, exit: 1 });
  expect(domain.outline.pieces.map(({ tag }) => tag)).toEqual([0, 1, 2, 3, 4, 5, 6, 7]);
  expect(domain.outline.pieces[1]?.curve).toEqual({ kind: 'line', from: [1, 0], to: [3, 0] });
});

it('leaves no gap between pieces and changes no length, on curves too', () => {
  const drawing = {
    outline: { ellipse: [0, 0], radii: [3, 1] },
    holes: { post: { circle: [0, 0], radius: 0.5 } },
  };
  const { domain } = cut({
    drawing,
    walls: {
      a: [{ on: 'outline', near: [0, 1], width: 1.234 }, absorbing],
      b: [{ on: 'outline', where: 'x > 2.5' }, weak(1)],
      c: [{ on: 'post', angles: [100, 200] }, absorbing],
    },
  });
  for (const chain of [domain.outline, ...domain.holes]) {
    chain.pieces.forEach(({ curve }, i) => {
      expect(curve.from).toEqual(chain.pieces.at(i - 1)?.curve.to);
    });
  }
  expect(chainLength(domain.outline)).toBeCloseTo(chainLength(buildDrawing(drawing, ctx).outline), 12);
  expect(domain.holes[0]?.pieces).toHaveLength(6);
});

it('gives every piece of the domain a tag of its own, region borders after the walls', () => {
  const { domain, pieces } = cut({
    drawing: {
      outline: { rectangle: [0, 0, 4, 2] },
      holes: { post: { circle: [1, 1], radius: 0.5 } },
      innerWalls: {
        fin: {
          line: [
            [2, 0.5],
            [2, 1.5],
          ],
        },
      },
      regions: { bay: { rectangle: [3, 0, 5, 2] } },
    },
  });
  const walls = [domain.outline, ...domain.holes, ...domain.innerWalls].flatMap((chain) => chain.pieces);
  const all = [...walls, ...domain.regions.flatMap((chain) => chain.pieces)].map(({ tag }) => tag);
  expect(new Set(all).size).toBe(all.length);
  expect(walls.map(({ tag }) => tag)).toEqual([...pieces.keys()]);
});

it('finds the places where the kind changes, also between two exits and two reactivities, and no others', () => {
  const { junctions } = cut({
    walls: {
      a: [{ on: 'outline', from: 0, to: 1 }, absorbing],
      b: [{ on: 'outline', from: 1, to: 2 }, absorbing],
      c: [{ on: 'outline', from: 2, to: 3 }, weak(1)],
      d: [{ on: 'outline', from: 5, to: 8 }, weak(1)],
    },
  });
  expect(sorted(junctions)).toEqual([
    [0, 0],
    [1, 0],
    [2, 0],
    [2, 2],
    [3, 0],
    [4, 1],
  ]);
});

it('finds corners that stick into the compartment, on outline and holes, but no slight bends', () => {
  const l = {
    polygon: [
      [0, 0],
      [4, 0],
      [4, 2],
      [2, 2],
      [2, 4],
      [0, 4],
    ],
  };
  expect(cut({ drawing: { outline: l } }).junctions).toEqual([[2, 2]]);
  const box = { outline: { rectangle: [0, 0, 9, 9] }, holes: { box: { rectangle: [3, 3, 5, 5] } } };
  expect(sorted(cut({ drawing: box }).junctions)).toEqual([
    [3, 3],
    [3, 5],
    [5, 3],
    [5, 5],
  ]);
  const many = Array.from({ length: 40 }, (_, i) => [
    5 + Math.cos((i * Math.PI) / 20),
    5 + Math.sin((i * Math.PI) / 20),
  ]);
  const round = { outline: { rectangle: [0, 0, 9, 9] }, holes: { round: { polygon: many } } };
  expect(cut({ drawing: round }).junctions).toEqual([]);
});

it('finds free ends and bends of inner walls, and ends on walls only where the kinds differ', () => {
  const drawing = {
    outline: { rectangle: [0, 0, 4, 4] },
    innerWalls: {
      free: {
        line: [
          [1, 1],
          [2, 2],
          [3, 1],
        ],
      },
      fin: {
        line: [
          [2, 4],
          [2, 3],
        ],
      },
    },
  };
  expect(sorted(cut({ drawing }).junctions)).toEqual([
    [1, 1],
    [2, 2],
    [2, 3],
    [3, 1],
  ]);
  const caught = cut({ drawing, walls: { fin: [{ on: 'fin' }, absorbing] } });
  expect(sorted(caught.junctions)).toEqual([
    [1, 1],
    [2, 2],
    [2, 3],
    [2, 4],
    [3, 1],
  ]);
});

it('finds where the border of a region with its own D meets walls, and no border without one', () => {
  const drawing = {
    outline: { circle: [0, 0], radius: 2 },
    regions: { right: { rectangle: [1, -5, 5, 5] }, other: { rectangle: [-5, -5, -1, 5] } },
  };
  const y = Math.sqrt(3);
  expect(cut({ drawing }).junctions).toEqual([]);
  const found = sorted(cut({ drawing, ownD: { 0: 3 } }).junctions);
  expect(found).toEqual([
    [1, Number((-y).toFixed(9))],
    [1, Number(y.toFixed(9))],
  ]);
});

it('finds contacts on the bulge of a curve beyond its chord, and with a Bézier curve', () => {
  // A half disc of radius 1 at (1, 0): x = 1.6 meets it at y = ±0.8.
  const cap = { y: 'up', outline: { path: 'M 0 -1 H 1 A 1 1 0 0 1 1 1 H 0 Z' } };
  const right = { right: { rectangle: [1.6, -5, 5, 5] } };
  expect(sorted(cut({ drawing: { ...cap, regions: right }, ownD: { 0: 3 } }).junctions)).toEqual([
    [1.6, -0.8],
    [1.6, 0.8],
  ]);
  // x(t) = 3t − 3t² bulges to 0.75; y(t) = 2t² (3 − 2t) − 1 … at t = ½ ± 0.2 x is 0.63.
  const bezier = { y: 'up', outline: { path: 'M 0 -1 C 1 -1 1 1 0 1 L -1 1 V -1 Z' } };
  const y = (t: number) => 2 * t * t * (3 - 2 * t) - 1;
  const found = cut({
    drawing: { ...bezier, regions: { right: { rectangle: [0.63, -5, 5, 5] } } },
    ownD: { 0: 3 },
  });
  expect(sorted(found.junctions)).toEqual([0.3, 0.7].map((t) => [0.63, Number(y(t).toFixed(9))]));
});

it('lets the last listed region with its own D decide over a place', () => {
  const drawing = {
    outline: { rectangle: [0, 0, 9, 9] },
    regions: {
      wide: { rectangle: [1, 1, 8, 8] },
      inner: { rectangle: [3, 3, 5, 5] },
      named: { rectangle: [3, 3, 4, 4] },
    },
  };
  const { problem } = cut({ drawing, ownD: { 0: 2, 1: 3 } });
  const { media, noise, exitCount } = problem([[], [0], [0, 1], [0, 1, 2], [2]]);
  expect(media.map(({ diffusion }) => diffusion)).toEqual([1, 2, 3, 3, 1].map(constant));
  expect([noise, exitCount]).toEqual(['isothermal', 0]);
});

it('hands the walls to the solver by tag', () => {
  const { problem, pieces } = cut({ walls: { a: [{ on: 'outline', from: 0, to: 4 }, absorbing] } });
  const { walls, exitCount } = problem([[]]);
  expect(walls.size).toBe(pieces.size);
  expect([walls.get(0), walls.get(1), exitCount]).toEqual([
    { kind: 'absorbing', exit: 0 },
    { kind: 'reflecting' },
    1,
  ]);
});

it('leaves out the holes the layout is without, and refuses a wall that lies on nothing else', () => {
  const drawing = {
    outline: { rectangle: [0, 0, 4, 2] },
    holes: { a: { circle: [1, 1], radius: 0.5 }, b: { circle: [3, 1], radius: 0.5 } },
  };
  const every = cut({ drawing, without: ['b'], walls: { every: [{ on: 'all' }, absorbing] } });
  expect(every.domain.holes.map(({ name }) => name)).toEqual(['a']);
  expect(new Set([...every.pieces.values()].map(({ loop }) => loop))).toEqual(new Set(['outline', 'a']));
  const refused = refusalOf(() =>
    cut({ drawing, without: ['b'], walls: { coat: [{ on: 'b' }, absorbing] } }),
  );
  expect(refused).toMatchObject({ code: 'WALL_KIND_NOT_POSSIBLE', where: { key: 'layouts.a.coat' } });
});

it('refuses two kinds on one stretch with the place and both names, and lets walls touch', () => {
  const overlap = refusalOf(() =>
    cut({
      walls: {
        left: [{ on: 'outline', from: 1, to: 2 }, absorbing],
        right: [{ on: 'outline', from: 1.5, to: 3 }, { kind: 'reflecting' }],
      },
    }),
  );
  expect(overlap).toMatchObject({
    code: 'WALL_KINDS_OVERLAP',
    where: { at: [[1.75, 0]], key: 'layouts.a.right' },
  });
  expect(overlap.what).toMatch(/"left" and "right" both lie on "outline" at s = 1\.75, \(1\.75, 0\)/);
  const touching = cut({
    walls: {
      a: [{ on: 'outline', from: 1, to: 2 }, absorbing],
      b: [{ on: 'outline', from: 2, to: 3 }, absorbing],
    },
  });
  expect(touching.exits).toEqual(['a', 'b']);
});

it('hands a permeable inner wall on without making an exit of it', () => {
  const drawing = {
    outline: { rectangle: [0, 0, 4, 2] },
    innerWalls: {
      fin: {
        line: [
          [2, 0.5],
          [2, 1.5],
        ],
      },
    },
  };
  const kind: WallKind = { kind: 'permeable', permeability: { value: 3 } };
  const { pieces, exits, junctions } = cut({ drawing, walls: { fin: [{ on: 'fin' }, kind] } });
  expect([...pieces.values()].at(-1)).toMatchObject({
    wall: 'fin',
    physics: { kind: 'permeable', permeability: 3 },
  });
  expect(exits).toEqual([]);
  expect(junctions).toHaveLength(2);
});
