import { expect, it } from 'vitest';
import type { Chain, Mesh, Point } from '../../mesher/index.ts';
import type { Wall } from '../../solver/index.ts';
import type { WallPiece } from '../../src/case/layout-domain.ts';
import { stretches } from '../../src/run/wall-stretches.ts';

const line = (from: Point, to: Point, tag: number) => ({ curve: { kind: 'line' as const, from, to }, tag });

const reflecting: Wall = { kind: 'reflecting' };
const absorbing: Wall = { kind: 'absorbing', exit: 0 };
const weak: Wall = { kind: 'partlyAbsorbing', kappa: 0.002, exit: 1 };

/** Unit square from (0, 0), its lower side in two halves, tags 0 to 4 in order; a wall across its middle, tags 5 to 7. */
const outline: Chain = {
  name: 'outline',
  pieces: [
    line([0, 0], [0.5, 0], 0),
    line([0.5, 0], [1, 0], 1),
    line([1, 0], [1, 1], 2),
    line([1, 1], [0, 1], 3),
    line([0, 1], [0, 0], 4),
  ],
};
const baffle: Chain = {
  name: 'baffle',
  pieces: [
    line([0.25, 0.5], [0.5, 0.5], 5),
    line([0.5, 0.5], [0.75, 0.5], 6),
    line([0.75, 0.5], [0.875, 0.5], 7),
  ],
};
const lengths = [0.5, 0.5, 1, 1, 1];

/** Wall segments only: stretches ask for nothing else of a mesh. Segments are shuffled. */
const places: Point[] = [
  [0, 0],
  [0.5, 0],
  [1, 0],
  [1, 1],
  [0, 1],
  [0.25, 0.5],
  [0.75, 0.5],
  [0.5, 0.5],
  [0.5, 0.5],
  [0.5, 1],
  [0.875, 0.5],
  [0.75, 0.5],
];
const segments = [
  { ends: [4, 0], tag: 4, span: [0, 1] },
  { ends: [7, 6], tag: 6, span: [0, 1] },
  { ends: [5, 7], tag: 5, span: [0, 1] },
  { ends: [0, 1], tag: 0, span: [0, 1] },
  { ends: [2, 3], tag: 2, span: [0, 1] },
  { ends: [8, 5], tag: 5, span: [1, 0] },
  { ends: [1, 2], tag: 1, span: [0, 1] },
  { ends: [11, 8], tag: 6, span: [1, 0] },
  { ends: [6, 10], tag: 7, span: [0, 1] },
  { ends: [10, 11], tag: 7, span: [1, 0] },
  { ends: [9, 4], tag: 3, span: [0.5, 1] },
  { ends: [3, 9], tag: 3, span: [0, 0.5] },
];
const mesh: Mesh = {
  nodes: Float64Array.from(places.flat()),
  triangles: new Int32Array(0),
  regionSet: new Int32Array(0),
  regionSets: [[]],
  segments: Int32Array.from(segments.flatMap(({ ends }) => ends)),
  segmentTag: Int32Array.from(segments.map(({ tag }) => tag)),
  segmentSpan: Float64Array.from(segments.flatMap(({ span }) => span)),
  segmentTwin: new Int32Array(segments.length).fill(-1),
  chordError: 0,
};

/** The square with one kind and name per outline piece; the baffle has none. */
const stretchesOf = (kinds: readonly [Wall, string?][], middle: Wall = reflecting) => {
  let s = 0;
  const pieces = new Map<number, WallPiece>(
    kinds.map(([physics, wall], tag) => {
      const from = s;
      s += lengths[tag] ?? 0;
      return [tag, { tag, loop: 'outline', from, to: s, physics, ...(wall !== undefined && { wall }) }];
    }),
  );
  pieces.set(5, { tag: 5, loop: 'baffle', from: 0, to: 0.25, physics: reflecting });
  pieces.set(6, { tag: 6, loop: 'baffle', from: 0.25, to: 0.5, physics: middle });
  pieces.set(7, { tag: 7, loop: 'baffle', from: 0.5, to: 0.625, physics: reflecting });
  const domain = { outline, holes: [], innerWalls: [baffle], regions: [], tolerance: 1e-12 };
  return stretches(mesh, { domain, pieces }, { length: 'mm', time: 's' });
};

const plain: [Wall, string?] = [reflecting];

it('joins neighbouring pieces of one kind and name to one stretch, in the order of the wall', () => {
  const { walls } = stretchesOf([[absorbing, 'pad'], plain, plain, plain, plain]);
  expect(walls.slice(0, 2)).toEqual([
    {
      loop: 'outline',
      name: 'pad',
      kind: 'absorbing',
      from: 0,
      to: 0.5,
      points: [
        [0, 0],
        [0.5, 0],
      ],
    },
    {
      loop: 'outline',
      kind: 'reflecting',
      from: 0.5,
      to: 4,
      points: [
        [0.5, 0],
        [1, 0],
        [1, 1],
        [0.5, 1],
        [0, 1],
        [0, 0],
      ],
    },
  ]);
});

it('joins a stretch over the mark of its loop, so that it ends before it begins', () => {
  const { walls } = stretchesOf([[absorbing, 'pad'], plain, plain, plain, [absorbing, 'pad']]);
  const pad = walls.find(({ name }) => name === 'pad');
  expect([pad?.from, pad?.to]).toEqual([3, 0.5]);
  expect(pad?.points).toEqual([
    [0, 1],
    [0, 0],
    [0.5, 0],
  ]);
  expect(walls.filter(({ name }) => name === 'pad')).toHaveLength(1);
});

it('keeps a loop of one kind in one stretch that begins and ends at the mark', () => {
  const { walls } = stretchesOf([plain, plain, plain, plain, plain]);
  const [whole, ...rest] = walls.filter(({ loop }) => loop === 'outline');
  expect(rest).toEqual([]);
  expect([whole?.from, whole?.to, whole?.points.length]).toEqual([0, 4, 7]);
});

it('parts stretches of different names, also where their kind is the same', () => {
  const { walls } = stretchesOf([[absorbing, 'left'], [absorbing, 'right'], plain, plain, plain]);
  expect(walls.slice(0, 2).map(({ name }) => name)).toEqual(['left', 'right']);
});

it('parts stretches of different reactivity and prints it with its unit', () => {
  const { walls } = stretchesOf([[weak, 'coat'], [{ ...weak, kappa: 0.004 }, 'coat'], plain, plain, plain]);
  expect(walls.slice(0, 2).map(({ kappa }) => kappa)).toEqual(['0.002 mm/s', '0.004 mm/s']);
});

it('gives both sides of an inner wall, each with the compartment on its left', () => {
  const { walls, segmentsOf } = stretchesOf([plain, plain, plain, plain, plain]);
  const sides = walls.filter(({ loop }) => loop === 'baffle');
  expect(sides.map(({ from, to, points }) => [from, to, points.map(([x]) => x)])).toEqual([
    [0, 0.625, [0.25, 0.5, 0.75, 0.875]],
    [0.625, 0, [0.875, 0.75, 0.5, 0.25]],
  ]);
  expect(segmentsOf.map((list) => list.length)).toEqual(walls.map(({ points }) => points.length - 1));
});

it('does not join the two ends of an inner wall, which are no neighbours', () => {
  const { walls } = stretchesOf([plain, plain, plain, plain, plain], { kind: 'permeable', permeability: 3 });
  const sides = walls.filter(({ loop }) => loop === 'baffle');
  expect(sides.map(({ from, to, permeability }) => [from, to, permeability])).toEqual([
    [0, 0.25, undefined],
    [0.25, 0.5, '3 mm/s'],
    [0.5, 0.625, undefined],
    [0.625, 0.5, undefined],
    [0.5, 0.25, '3 mm/s'],
    [0.25, 0, undefined],
  ]);
});
