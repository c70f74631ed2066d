import { expect, it } from 'vitest';
import { chainLength, enclosedArea } from '../../mesher/index.ts';
import { buildDrawing, type RawDrawing } from '../../src/case/drawing.ts';
import { drawingContext, refusalOf } from '../support/drawing-context.ts';

const build = (raw: RawDrawing, files?: Record<string, string>) => buildDrawing(raw, drawingContext(files));
const square = { rectangle: [0, 0, 4, 4] };

it('runs the outline counter-clockwise and holes clockwise, whichever way they were drawn', () => {
  const drawing = build({
    outline: {
      polygon: [
        [0, 0],
        [0, 4],
        [4, 4],
        [4, 0],
      ],
    },
    holes: {
      a: { circle: [1, 1], radius: 0.5 },
      b: {
        polygon: [
          [2, 2],
          [3, 2],
          [3, 3],
        ],
      },
    },
  });
  expect(enclosedArea(drawing.outline)).toBeCloseTo(16, 14);
  expect(drawing.holes.map(enclosedArea)).toEqual([-Math.PI / 4, -0.5].map((a) => expect.closeTo(a, 14)));
  // Only loops that a person typed point by point have a winding worth telling.
  expect(drawing.healed.map(({ what, loop }) => [what, loop])).toEqual([
    ['orientation', 'outline'],
    ['orientation', 'b'],
  ]);
});

it('keeps s = 0 at the first point drawn when it turns a loop round', () => {
  const drawing = build({
    outline: {
      polygon: [
        [1, 0],
        [0, 4],
        [4, 4],
        [4, 0],
      ],
    },
  });
  expect(drawing.outline.pieces[0]?.curve.from).toEqual([1, 0]);
});

it('closes an open path as SVG paints it and tells so', () => {
  const drawing = build({ y: 'up', outline: { path: 'M 0 0 H 2 V 3' } });
  expect(enclosedArea(drawing.outline)).toBe(3);
  expect(drawing.healed).toEqual([{ what: 'closed with a straight line', loop: 'outline', at: [2, 3] }]);
});

it('finds a repeated closing point ordinary in a path and worth telling in a polygon', () => {
  const path = build({ y: 'up', outline: { path: 'M 0 0 H 2 V 3 L 0 0 Z' } });
  expect(path.healed).toEqual([]);
  // A third of three thirds is not back to the digit.
  const rounded = build({ y: 'up', outline: { path: 'M 0.1 0 h 0.1 h 0.2 v 1 h -0.3 v -1 Z' } });
  expect(rounded.healed).toEqual([]);
  const polygon = build({
    outline: {
      polygon: [
        [0, 0],
        [2, 0],
        [2, 3],
        [0, 0],
      ],
    },
  });
  expect(polygon.healed).toEqual([{ what: 'repeated point', loop: 'outline', at: [0, 0] }]);
});

it('begins a loop at its mark', () => {
  const drawing = build({
    outline: { ...square, mark: [5, 1] },
    holes: { post: { circle: [2, 2], radius: 1, mark: [2, 3.5] } },
  });
  expect(drawing.outline.pieces[0]?.curve.from).toEqual([4, 1]);
  expect(chainLength(drawing.outline)).toBeCloseTo(16, 13);
  expect(drawing.holes[0]?.pieces[0]?.curve.from).toEqual([2, 3]);
  expect(drawing.holes[0]?.pieces).toHaveLength(4);
});

it('takes a tolerance of 1e-12 of the size for typed shapes, or the one given', () => {
  expect(build({ outline: square }).tolerance).toBeCloseTo(Math.hypot(4, 4) * 1e-12, 24);
  expect(build({ outline: square, tolerance: '2 um' }).tolerance).toBe(0.002);
  expect(refusalOf(() => build({ outline: square, tolerance: -1 })).code).toBe('VALUE_OUT_OF_RANGE');
});

it('closes gaps up to the tolerance and tells where', () => {
  const outline = { path: 'M 0 0 H 4 V 4 H 0 V 0.001' };
  const loose = build({ y: 'up', outline, tolerance: 0.01 });
  expect(loose.outline.pieces).toHaveLength(4);
  expect(loose.healed).toEqual([{ what: 'gap closed', loop: 'outline', at: [0, 0] }]);
  const rounded = build({ y: 'up', outline: { path: 'M 0 0 H 4 V 4 H 0 V 1e-13' }, tolerance: 0.01 });
  expect([rounded.outline.pieces.length, rounded.healed]).toEqual([4, []]);
  const tight = build({ y: 'up', outline });
  expect(tight.outline.pieces).toHaveLength(5);
});

it('refuses loops that cross, with every place and the key of a loop', () => {
  const crossing = refusalOf(() => build({ outline: square, holes: { post: { rectangle: [3, 1, 5, 2] } } }));
  expect(crossing).toMatchObject({ code: 'WALLS_CROSS', where: { key: 'drawing.holes.post' } });
  expect(crossing.where.at?.map(([x, y]) => [x, y])).toEqual(
    expect.arrayContaining([
      [4, 1],
      [4, 2],
    ]),
  );
  const outside = refusalOf(() => build({ outline: square, holes: { post: { circle: [9, 9], radius: 1 } } }));
  expect(outside).toMatchObject({ code: 'HOLE_OUTSIDE', where: { key: 'drawing.holes.post' } });
});

it('gives places of a case written downwards as they are written', () => {
  const refused = refusalOf(() =>
    build({ y: 'down', outline: square, holes: { post: { rectangle: [3, 1, 5, 2] } } }),
  );
  expect(refused.where.at).toEqual(
    expect.arrayContaining([
      [4, 1],
      [4, 2],
    ]),
  );
});

it('lets the second name of a hole given twice mean the first', () => {
  const post = { circle: [1, 1], radius: 0.5 };
  const drawing = build({ outline: square, holes: { a: post, b: post } });
  expect(drawing.holes.map(({ name }) => name)).toEqual(['a']);
  expect(drawing.sameAs?.get('b')).toBe('a');
});

it('keeps inner walls open, and refuses open lines where a loop is needed', () => {
  const drawing = build({
    outline: square,
    innerWalls: {
      fin: {
        line: [
          [1, 1],
          [2, 2],
          [3, 1],
        ],
      },
    },
  });
  expect(drawing.innerWalls[0]?.pieces).toHaveLength(2);
  const open = refusalOf(() =>
    build({
      outline: square,
      holes: {
        fin: {
          line: [
            [1, 1],
            [2, 2],
            [3, 1],
          ],
        },
      },
    }),
  );
  expect(open).toMatchObject({ code: 'LOOP_OPEN', where: { key: 'drawing.holes.fin' } });
});

it('refuses names that mean something else or two things', () => {
  const post = { circle: [1, 1], radius: 0.5 };
  expect(refusalOf(() => build({ outline: square, holes: { all: post } })).code).toBe('NAME_RESERVED');
  const twice = () =>
    build({
      outline: square,
      holes: { a: post },
      innerWalls: {
        a: {
          line: [
            [2, 2],
            [3, 3],
          ],
        },
      },
    });
  expect(refusalOf(twice)).toMatchObject({ code: 'NAME_TWICE', where: { key: 'drawing.innerWalls.a' } });
});
