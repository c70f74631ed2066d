import { expect, it } from 'vitest';
import { type Chain, directionAt, reversed } from '../../mesher/index.ts';
import { pointAtLength, rulerOf } from '../../src/case/arc-length.ts';
import type { Drawing } from '../../src/case/case.ts';
import { chainOf } from '../../src/case/loop-of-shape.ts';
import { readShape } from '../../src/case/shapes.ts';
import { narrowWallParts, type RawExtent, resolveWallParts } from '../../src/case/stretches.ts';
import { drawingContext, refusalOf } from '../support/drawing-context.ts';

const ctx = drawingContext();
const shape = (name: string, raw: unknown): Chain => chainOf(name, readShape(raw, name, 'up', ctx).curves);
const hole = (name: string, raw: unknown): Chain => {
  const { pieces } = shape(name, raw);
  return chainOf(name, pieces.map(({ curve }) => reversed(curve)).reverse());
};

const drawing: Drawing = {
  outline: shape('outline', { rectangle: [0, 0, 4, 2] }),
  holes: [
    hole('post', { circle: [1, 1], radius: 0.5 }),
    hole('oval', { ellipse: [3, 1], radii: [0.5, 0.25] }),
  ],
  innerWalls: [
    shape('baffle', {
      line: [
        [2, 0.5],
        [2, 1.5],
      ],
    }),
  ],
  regions: [],
  tolerance: 1e-6,
  healed: [],
  taken: [],
  leftOut: [],
};

const parts = (extent: RawExtent, of: Drawing = drawing) => resolveWallParts(extent, of, ctx, 'walls.w');
const spans = (extent: RawExtent, of?: Drawing) => parts(extent, of)[0]?.spans;
const refusal = (extent: RawExtent) => refusalOf(() => parts(extent));

/** Both ends of the only span, as points. */
function ends(extent: RawExtent, of: Drawing = drawing) {
  const [part] = parts(extent, of);
  const chain = [of.outline, ...of.holes, ...of.innerWalls].find(({ name }) => name === part?.loop);
  const span = part?.spans === 'whole' ? undefined : part?.spans[0];
  if (!chain || !span) throw new Error('no span');
  const ruler = rulerOf(chain);
  return [span.from, span.to].map((s) => pointAtLength(ruler, s).map((n) => Number(n.toFixed(9)) + 0));
}

it('means the whole loop without an extent, and outline and every hole by "all"', () => {
  expect(parts({ on: 'post' })).toEqual([{ loop: 'post', spans: 'whole' }]);
  expect(parts({ on: 'all' }).map(({ loop }) => loop)).toEqual(['outline', 'post', 'oval']);
});

it('means the outline by "outline" also where it has another name', () => {
  const named = { ...drawing, outline: { ...drawing.outline, name: 'rim' } };
  expect(parts({ on: 'outline' }, named)).toEqual([{ loop: 'rim', spans: 'whole' }]);
  expect(parts({ on: 'rim' }, named)).toHaveLength(1);
});

it('means the kept hole by the name of its twin', () => {
  expect(parts({ on: 'copy' }, { ...drawing, sameAs: new Map([['copy', 'post']]) })[0]?.loop).toBe('post');
});

it('takes from and to as they stand, over the mark when from lies behind to, and all of it as the whole loop', () => {
  expect(spans({ on: 'outline', from: 1, to: '3500 um' })).toEqual([{ from: 1, to: 3.5 }]);
  expect(spans({ on: 'outline', from: 11, to: 1 })).toEqual([{ from: 11, to: 1 }]);
  expect(spans({ on: 'outline', from: 0, to: 12 })).toBe('whole');
  expect(spans({ on: 'outline', from: 12, to: 1 })).toEqual([{ from: 0, to: 1 }]);
  expect(spans({ on: 'outline', from: 11, to: 0 })).toEqual([{ from: 11, to: 12 }]);
  expect(spans({ on: 'baffle', from: 0.25, to: 1 })).toEqual([{ from: 0.25, to: 1 }]);
});

it('counts from another mark when one is given', () => {
  // The nearest point to (4, 2) is the corner at s = 6.
  expect(spans({ on: 'outline', from: 1, to: 2, mark: [4.2, 2.1] })).toEqual([{ from: 7, to: 8 }]);
  expect(spans({ on: 'outline', from: 5, to: 7, mark: [4, 2] })).toEqual([{ from: 11, to: 1 }]);
});

it('centres a width on the nearest wall point, around corners and over the mark', () => {
  expect(ends({ on: 'outline', near: [2, -1], width: 1 })).toEqual([
    [1.5, 0],
    [2.5, 0],
  ]);
  expect(ends({ on: 'outline', near: [3.9, -0.3], width: 0.6 })).toEqual([
    [3.6, 0],
    [4, 0.2],
  ]);
  expect(ends({ on: 'outline', near: [-1, 0.1], width: 0.6 })).toEqual([
    [0, 0.4],
    [0.2, 0],
  ]);
});

it('measures a width along the true curve, not its chord', () => {
  // On a circle of radius ½ a width of π/4 is a quarter turn; seen from the left, around (½, 1).
  const [from, to] = ends({ on: 'post', near: [0, 1], width: Math.PI / 4 });
  const half = 0.5 * Math.SQRT1_2;
  // Clockwise around a hole: from below left to above left.
  expect(from).toEqual([1 - half, 1 - half].map((n) => Number(n.toFixed(9))));
  expect(to).toEqual([1 - half, 1 + half].map((n) => Number(n.toFixed(9))));
});

it('takes the loop that is nearer when all are meant', () => {
  expect(parts({ on: 'all', near: [1.4, 1], width: 0.1 })[0]?.loop).toBe('post');
  expect(parts({ on: 'all', near: [0.1, 1], width: 0.1 })[0]?.loop).toBe('outline');
});

it('takes angles counter-clockwise from the first to the second, also on a hole that runs clockwise', () => {
  expect(ends({ on: 'post', angles: [0, 90] })).toEqual([
    [1, 1.5],
    [1.5, 1],
  ]);
  expect(ends({ on: 'post', angles: ['60 deg', '120 deg'] })).toEqual([
    [0.75, Number((1 + Math.sqrt(3) / 4).toFixed(9))],
    [1.25, Number((1 + Math.sqrt(3) / 4).toFixed(9))],
  ]);
  // Over the mark at 0°: 20° of a radius ½ in all.
  const span = spans({ on: 'post', angles: [-10, 10] });
  expect(span).toEqual([
    { from: expect.closeTo(Math.PI - Math.PI / 36, 12), to: expect.closeTo(Math.PI / 36, 12) },
  ]);
  const disc = { ...drawing, outline: shape('outline', { circle: [0, 0], radius: 2 }) };
  expect(ends({ on: 'outline', angles: [90, 180] }, disc)).toEqual([
    [0, 2],
    [-2, 0],
  ]);
  expect(ends({ on: 'outline', angles: [350, 10] }, disc)[0]?.[1]).toBeLessThan(0);
  expect(spans({ on: 'outline', angles: [0, 360] }, disc)).toBe('whole');
});

it('cuts exactly where a condition changes', () => {
  // x > 3 on the rectangle: from (3, 0) over the right side to (3, 2).
  expect(spans({ on: 'outline', where: 'x > 3' })).toEqual([{ from: 3, to: 7 }]);
  // On the circle x > 1.25 holds within 60° of +x.
  expect(spans({ on: 'post', where: 'x > 1.25' })).toEqual([
    { from: expect.closeTo((5 / 3) * (Math.PI / 2), 14), to: expect.closeTo(Math.PI / 6, 14) },
  ]);
  // y > 1.2 on the ellipse: 0.25 sin θ > 0.2.
  const [first, second] = ends({ on: 'oval', where: 'y > 1.2' });
  expect([first?.[1], second?.[1]]).toEqual([1.2, 1.2]);
  expect([first?.[0], second?.[0]]).toEqual([2.7, 3.3]);
});

it('takes one side by a condition with ==, without slivers beyond its corners', () => {
  expect(spans({ on: 'outline', where: 'x == 4' })).toEqual([{ from: 4, to: 6 }]);
  expect(spans({ on: 'outline', where: 'x == 0' })).toEqual([{ from: 10, to: 12 }]);
  expect(spans({ on: 'outline', where: 'y == 0 or x == 0' })).toEqual([{ from: 10, to: 4 }]);
  expect(spans({ on: 'outline', where: 'x >= 0' })).toBe('whole');
});

it('gives a condition on all loops only those where it holds', () => {
  expect(parts({ on: 'all', where: 'x < 2 and y < 0.8' }).map(({ loop }) => loop)).toEqual([
    'outline',
    'post',
  ]);
});

it('puts an end within the tolerance of a corner on it, and no other', () => {
  expect(spans({ on: 'outline', from: 4 - 9e-7, to: 6 + 9e-7 })).toEqual([{ from: 4, to: 6 }]);
  expect(spans({ on: 'outline', from: 4 - 2e-6, to: 6 })).toEqual([{ from: 4 - 2e-6, to: 6 }]);
  expect(spans({ on: 'outline', from: 12 - 9e-7, to: 1 })).toEqual([{ from: 0, to: 1 }]);
});

it.each([
  [{ on: 'outline', from: 1, to: 13 }, 'is 13 mm, but "outline" is 12 mm long'],
  [{ on: 'outline', from: -1, to: 3 }, 'but "outline" is 12 mm long'],
  [{ on: 'outline', from: 1, to: 1 }, 'no length'],
  [{ on: 'outline', from: 0, to: 0 }, 'no length'],
  [{ on: 'outline', from: 12, to: 0 }, 'no length'],
  [{ on: 'outline', from: 1 }, '"to" is missing'],
  [{ on: 'outline', near: [1, 1] }, '"width" is missing'],
  [{ on: 'outline', near: [1, 1], width: 20 }, '"outline" is 12 mm long'],
  [{ on: 'outline', near: [1, 1], width: 0 }, 'width of 0'],
  [{ on: 'baffle', from: 0.8, to: 0.2 }, 'which is open'],
  [{ on: 'baffle', near: [2, 0.6], width: 0.5 }, 'runs over an end of "baffle", 0.1 mm'],
  [{ on: 'oval', angles: [0, 90] }, '"oval" is not a circle'],
  [{ on: 'post', angles: [20, 20] }, 'no part of a circle'],
  [{ on: 'post', angles: [0, 400] }, 'no part of a circle'],
  [{ on: 'outline', where: 'x > 9' }, 'holds nowhere on "outline"'],
  [{ on: 'outline', from: 1, to: 2, where: 'x > 1' }, 'given by "from" and "to" and by "where"'],
  [{ on: 'all', from: 1, to: 2 }, 'need one loop'],
  [{ on: 'pots' }, 'no loop "pots"'],
])('refuses %j saying why', (extent, words) => {
  expect(refusal(extent).what).toContain(words);
});

it('names the nearest loop where a name is not known', () => {
  expect(refusal({ on: 'pots' })).toMatchObject({ code: 'NAME_UNKNOWN', where: { key: 'walls.w.on' } });
  expect(refusal({ on: 'pots' }).remedy).toContain('"post"');
});

it('narrows a wall to a part of it and refuses one that reaches beyond, saying how far', () => {
  const wall = { name: 'pad', as: 'pad', parts: parts({ on: 'outline', from: 11, to: 2 }) } as const;
  const narrow = (extent: RawExtent) => narrowWallParts(wall, extent, drawing, ctx, 'layouts.a.pad');
  expect(narrow({ from: 11.5, to: 1 })).toEqual([{ loop: 'outline', spans: [{ from: 11.5, to: 1 }] }]);
  expect(narrow({ near: [0, 0], width: 1 })).toEqual([{ loop: 'outline', spans: [{ from: 11.5, to: 0.5 }] }]);
  expect(narrow({ where: 'y == 0' })).toEqual([{ loop: 'outline', spans: [{ from: 0, to: 2 }] }]);
  expect(refusalOf(() => narrow({ from: 1, to: 2.5 })).what).toContain('0.5 mm beyond the wall "pad"');
});

it('reads places of a case written downwards the way they are written', () => {
  const down: Drawing = {
    ...drawing,
    outline: chainOf('outline', readShape({ rectangle: [0, 0, 4, 2] }, '', 'down', ctx).curves),
    writtenDown: true,
  };
  // Written y = 0 is the upper side: s from 6 to 10, from right to left.
  expect(spans({ on: 'outline', near: [1, 0], width: 1 }, down)).toEqual([{ from: 8.5, to: 9.5 }]);
  expect(spans({ on: 'outline', where: 'y == 0' }, down)).toEqual([{ from: 6, to: 10 }]);
});

it('keeps the compartment on the left as s grows, on outline and holes', () => {
  for (const [chain, inside] of [
    [drawing.outline, [2, 0.2]],
    [drawing.holes[0], [1.9, 1]],
  ] as const) {
    const curve = chain?.pieces[0]?.curve;
    if (!curve) throw new Error('no curve');
    const [dx, dy] = directionAt(curve, 0);
    const toInside = [inside[0] - curve.from[0], inside[1] - curve.from[1]] as const;
    expect(dx * toInside[1] - dy * toInside[0]).toBeGreaterThan(0);
  }
});
