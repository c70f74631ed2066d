import { expect, it } from 'vitest';
import {
  densityStart,
  evenStart,
  pointStart,
  SolverError,
  spotStart,
  valueFromStart,
} from '../../solver/index.ts';
import { rectangleMesh } from '../support/grid-mesh.ts';

const mesh = rectangleMesh({
  ...{ x: [0, 2], y: [0, 1], columns: 20, rows: 10, regionSets: [[], [0]] },
  region: (x) => (x > 1 ? 1 : 0),
});
const fieldOf = (f: (x: number, y: number) => number): Float64Array =>
  Float64Array.from({ length: mesh.nodes.length / 2 }, (_, i) =>
    f(mesh.nodes[2 * i] ?? 0, mesh.nodes[2 * i + 1] ?? 0),
  );
const one = fieldOf(() => 1);
const x = fieldOf((px) => px);
const y = fieldOf((_, py) => py);

it('weights sum to 1 and carry the centre of mass of the region, whatever its triangles', () => {
  const right = evenStart(mesh, (set) => set === 1);
  expect(valueFromStart(right, one)).toBeCloseTo(1, 14);
  expect(valueFromStart(right, x)).toBeCloseTo(1.5, 13);
  expect(valueFromStart(right, y)).toBeCloseTo(0.5, 13);
  expect(valueFromStart(evenStart(mesh), x)).toBeCloseTo(1, 13);
});

it('a point start reads a linear field exactly', () => {
  const start = pointStart(mesh, 0, [0.2, 0.5, 0.3]); // nodes (0, 0), (0.1, 0), (0.1, 0.1)
  expect(valueFromStart(start, x)).toBeCloseTo(0.08, 15);
  expect(valueFromStart(start, y)).toBeCloseTo(0.03, 15);
});

it('a spot inside is the exact disc: centre of mass at its centre, for any place and radius', () => {
  for (const [cx, cy, r] of [
    [0.513, 0.47, 0.3],
    [1.2, 0.5, 0.04],
    [0.5, 0.5, 0.0001],
    [1, 0.5, 0.5],
  ] as const) {
    const start = spotStart(mesh, cx, cy, r);
    expect(valueFromStart(start, one)).toBeCloseTo(1, 13);
    expect(valueFromStart(start, x)).toBeCloseTo(cx, 11);
    expect(valueFromStart(start, y)).toBeCloseTo(cy, 11);
  }
});

it('a spot over the wall counts its part in the compartment: a half disc has its middle 4r/3π off', () => {
  const start = spotStart(mesh, 1, 0, 0.6);
  expect(valueFromStart(start, x)).toBeCloseTo(1, 12);
  expect(valueFromStart(start, y)).toBeCloseTo((4 * 0.6) / (3 * Math.PI), 12); // Archimedes; any table of centroids
});

it('a spot that covers the compartment is the even start', () => {
  const start = spotStart(mesh, 1, 0.5, 9);
  const even = evenStart(mesh);
  for (let i = 0; i < even.length; i++) expect(start[i]).toBeCloseTo(even[i] ?? Number.NaN, 14);
});

it('a start outside is refused with its place', () => {
  expect(() => spotStart(mesh, 3, 3, 0.5)).toThrow(SolverError);
  expect(() => spotStart(mesh, 3, 3, 0.5)).toThrow(/\(3, 3\)/);
  expect(() => evenStart(mesh, () => false)).toThrow(/no area/);
});

it('a density start has the moments of its density: ρ = x y on [0, 2] × [0, 1] has its middle at (4/3, 2/3) [exact]', () => {
  const start = densityStart(mesh, (px, py) => 5 * px * py);
  expect(valueFromStart(start, one)).toBeCloseTo(1, 13);
  expect(valueFromStart(start, x)).toBeCloseTo(4 / 3, 12); // degree 3 in all: the rule is exact
  expect(valueFromStart(start, y)).toBeCloseTo(2 / 3, 12);
  const right = densityStart(
    mesh,
    () => 1,
    (set) => set === 1,
  );
  expect(valueFromStart(right, x)).toBeCloseTo(1.5, 12);
});

it('a density that is negative somewhere, or zero throughout, is refused', () => {
  expect(() => densityStart(mesh, (px) => px - 1.9)).toThrow(/density/);
  expect(() => densityStart(mesh, () => 0)).toThrow(SolverError);
});
