import { expect, it } from 'vitest';
import { chainLength, curveLength, enclosedArea, pointAt } from '../../mesher/index.ts';
import { arcFromEnds } from '../../src/importers/elliptic-arc.ts';
import { readPathData } from '../../src/importers/path-data.ts';

const chainOf = (d: string) => {
  const { subpaths, problem } = readPathData(d);
  expect(problem).toBeUndefined();
  expect(subpaths).toHaveLength(1);
  return { name: '', pieces: (subpaths[0]?.curves ?? []).map((curve, tag) => ({ curve, tag })) };
};

it('keeps a stadium of two half circles exact: area 4r² + πr², length 4r + 2πr', () => {
  const chain = chainOf('M 0.4 0 H 0.8 A 0.4 0.4 0 0 1 0.8 0.8 H 0.4 A 0.4 0.4 0 0 1 0.4 0 Z');
  expect(chain.pieces.map(({ curve }) => curve.kind)).toEqual(['line', 'arc', 'line', 'arc']);
  expect(enclosedArea(chain)).toBeCloseTo(0.4 * 0.8 + Math.PI * 0.16, 14);
  expect(chainLength(chain)).toBeCloseTo(0.8 + 0.8 * Math.PI, 14);
});

it('reads all four arcs of one ellipse between two points by their flags [SVG 1.1, F.6.5]', () => {
  // Circle of radius 1 through (1, 0) and (0, 1): centres (0, 0) and (1, 1), a quarter or three quarters of it.
  const sweeps = (['00', '01', '10', '11'] as const).map((flags) => {
    const arc = arcFromEnds({
      from: [1, 0],
      to: [0, 1],
      radii: [1, 1],
      turned: 0,
      large: flags[0] === '1',
      positive: flags[1] === '1',
    });
    return arc?.kind === 'arc' ? [...arc.centre, arc.sweep].map((n) => Number(n.toFixed(12)) + 0) : [];
  });
  const quarter = Number((Math.PI / 2).toFixed(12));
  const rest = Number(((3 * Math.PI) / 2).toFixed(12));
  expect(sweeps).toEqual([
    [1, 1, -quarter],
    [0, 0, quarter],
    [0, 0, -rest],
    [1, 1, rest],
  ]);
});

it('scales up half axes that do not reach, to a half turn about the middle of the ends [SVG 1.1, F.6.6]', () => {
  const arc = arcFromEnds({
    from: [0, 0],
    to: [4, 0],
    radii: [1, 0.5],
    turned: 0,
    large: false,
    positive: true,
  });
  expect(arc).toMatchObject({ kind: 'arc', radii: [2, 1], centre: [2, 0], sweep: Math.PI });
  expect(arc && pointAt(arc, 0.5)[1]).toBeCloseTo(-1, 14);
});

it('draws a line for an arc with a half axis of zero and nothing between equal ends [SVG 1.1, F.6.2]', () => {
  const between = (to: [number, number], r: number) =>
    arcFromEnds({ from: [0, 0], to, radii: [r, 1], turned: 0, large: false, positive: true });
  expect(between([1, 1], 0)?.kind).toBe('line');
  expect(between([0, 0], 1)).toBeUndefined();
});

it('raises a quadratic Bézier curve to the same cubic one', () => {
  const [curve] = chainOf('M 0 0 Q 1 2 3 0').pieces.map((piece) => piece.curve);
  // B(½) = (P0 + 2 P1 + P2) ÷ 4
  expect(curve?.kind).toBe('cubic');
  expect(curve && pointAt(curve, 0.5)).toEqual([expect.closeTo(1.25, 14), expect.closeTo(1, 14)]);
  expect(curve && pointAt(curve, 0.25)[1]).toBeCloseTo(2 * 0.25 * 0.75 * 2, 14);
});

it('starts anew at the first point after Z, and counts each stroke of the pen', () => {
  const { subpaths } = readPathData('M 1 1 h 2 v 2 z l 0 -1 M 5 5 h 1');
  expect(subpaths.map(({ closed }) => closed)).toEqual([true, false, false]);
  expect(subpaths[1]?.curves[0]).toEqual({ kind: 'line', from: [1, 1], to: [1, 0] });
});

it('adds no line for Z where the path has come back to its first point', () => {
  expect(chainOf('M 0 0 H 1 V 1 L 0 0 Z').pieces).toHaveLength(3);
  expect(chainOf('M 0 0 H 1 V 1 Z').pieces).toHaveLength(3);
});

it('mirrors the control point for S and T, also after other commands', () => {
  const [, second] = chainOf('M 0 0 C 0 1 1 1 1 0 S 2 -1 2 0').pieces.map((piece) => piece.curve);
  expect(second).toMatchObject({
    controls: [
      [1, -1],
      [2, -1],
    ],
  });
  const [, straight] = chainOf('M 0 0 L 1 0 S 2 1 3 0').pieces.map((piece) => piece.curve);
  expect(straight).toMatchObject({
    controls: [
      [1, 0],
      [2, 1],
    ],
  });
});

it('measures the length of an elliptic arc as the complete elliptic integral gives it [Abramowitz & Stegun 17.3.12]', () => {
  // L = 4a E(m), m = 1 − b²/a², E(m) = (π/2)(1 − Σ ((2n−1)!!/(2n)!!)² mⁿ/(2n−1)).
  const m = 1 - 0.25;
  let series = 1;
  let ratio = 1;
  for (let n = 1; n < 400; n++) {
    ratio *= (2 * n - 1) / (2 * n);
    series -= (ratio * ratio * m ** n) / (2 * n - 1);
  }
  const chain = chainOf('M 2 0 A 2 1 0 0 1 -2 0 A 2 1 0 0 1 2 0');
  expect(chain.pieces.reduce((sum, { curve }) => sum + curveLength(curve), 0)).toBeCloseTo(
    4 * Math.PI * series,
    12,
  );
});

it('reads long runs of points behind one letter like the same points with a letter each', () => {
  const points = Array.from({ length: 3000 }, (_, i) => [i % 7, -((i * 0.37) % 5)] as const);
  const plain = points.map(([x, y], i) => `${i === 0 ? 'M' : 'L'} ${x} ${y}`).join(' ');
  // Numbers run together as programs write them: "3-1.11" and ".5.25".
  const run = `M${points.map(([x, y]) => `${x}${y === 0 ? ' 0' : `-${-y}`.replace('--', '-')}`).join(' ')}`;
  const moves = `m${points.map(([x, y]) => `${x},${y}`).join(' ')}`;
  expect(run.length).toBeGreaterThan(4000);
  expect(readPathData(run)).toEqual(readPathData(plain));
  expect(readPathData(moves).subpaths[0]?.curves).toHaveLength(2999);
  expect(readPathData(moves).subpaths[0]?.curves.at(-1)?.to[0]).toBe(points.reduce((sum, [x]) => sum + x, 0));
  expect(readPathData(`${run} 1 !`).problem).toContain('"!"');
});

it.each([
  ['M0 0 L1 1 x 3', 'character 11, "x 3"'],
  ['L 1 1', 'does not begin with M'],
  ['M 0 0 A 1 1 0 2 1 1 1', 'cannot be read at character'],
  ['M 0 0 L 1e999 0', 'too large'],
  ['M 0 0 L 1', 'ends in the middle'],
])('says where %j cannot be read', (text, words) => {
  expect(readPathData(text).problem).toContain(words);
});
