import { expect, it } from 'vitest';
import { layoutDomain } from '../../src/case/layout-domain.ts';
import { readCase } from '../../src/case/read-case.ts';
import { layerMesh, layerSources } from '../../src/run/layer-sizes.ts';
import { unitSquare } from './solve-case.ts';

const even = 0.01;

/** Sources for the unit square, absorbing on the left, reflecting elsewhere. */
function sources(drift: object, parts: Record<string, unknown> = {}, maxNodes = 500_000) {
  const read = readCase(JSON.stringify(unitSquare({ particle: { diffusion: 1, ...drift }, ...parts })));
  const [only] = read.layouts;
  if (!only) throw new Error('no layout');
  return layerSources(layoutDomain(read, only), even, maxNodes);
}
const flow = (x: number, y = 0) => ({ drift: { x, y } });
const places = (found: ReturnType<typeof sources>, axis: 0 | 1) => [
  ...new Set(found.map(({ at }) => Number(at[axis].toFixed(9)))),
];

it('a strong drift asks for rows of small edges where it pushes from a catching wall and against one that is not', () => {
  const found = sources(flow(25));
  // Thickness 1/25: rows 0 to 4 thicknesses from both walls, and none along the sides it passes.
  expect(places(found, 0).sort((a, b) => a - b)).toEqual(
    [0, 0.04, 0.08, 0.12, 0.16, 0.84, 0.88, 0.92, 0.96, 1].sort((a, b) => a - b),
  );
  for (const { size } of found) expect(size).toBeCloseTo(layerMesh.perThickness / 25, 12);
  // One size apart along both walls of length 1.
  expect(found.length).toBeGreaterThan(2 * 5 * (25 / layerMesh.perThickness - 1));
});

it('a drift that carries to the catching wall, or makes layers thick against the even size, asks for nothing', () => {
  expect(sources(flow(-200))).toEqual([]);
  expect(sources(flow(10))).toEqual([]);
  expect(sources({})).toEqual([]);
});

it('a potential asks by its slope, in the regions that have it only', () => {
  const drawing = {
    outline: { rectangle: [0, 0, 1, 1] },
    regions: { low: { rectangle: [-1, -1, 2, 0.5] } },
  };
  const found = sources({ driftIn: { low: { potential: { expression: '-25*x' } } } }, { drawing });
  expect(found.length).toBeGreaterThan(0);
  for (const { at, size } of found) {
    expect(at[1]).toBeLessThanOrEqual(0.5);
    expect(size).toBeCloseTo(layerMesh.perThickness / 25, 8);
  }
});

it('an inner wall that does not catch has its layer on the side the drift pushes against', () => {
  const baffle = {
    line: [
      [0.5, 0.25],
      [0.5, 0.75],
    ],
  };
  const drawing = { outline: { rectangle: [0, 0, 1, 1] }, innerWalls: { baffle } };
  const found = sources(flow(-25), { drawing });
  expect(places(found, 0).sort((a, b) => a - b)).toEqual([0.5, 0.54, 0.58, 0.62, 0.66]);
});

it('all layers together keep within their part of the nodes', () => {
  // Each source stands for a strip one size wide and a thickness 1/v long, with 2/√3 nodes per size².
  const nodes = (v: number, most?: number) =>
    sources(flow(v), {}, most).reduce((sum, { size }) => sum + 2 / (Math.sqrt(3) * size * v), 0);
  expect(nodes(25)).toBeGreaterThan(15_000);
  expect(nodes(25, 10_000)).toBeLessThan(1.05 * layerMesh.partOfNodes * 10_000);
  expect(nodes(25, 10_000)).toBeGreaterThan(0.8 * layerMesh.partOfNodes * 10_000);
  expect(nodes(300)).toBeLessThan(1.05 * layerMesh.nodes);
});
