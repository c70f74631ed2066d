import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { chainLength, enclosedArea } from '../../mesher/index.ts';
import { layoutDomain } from '../../src/case/layout-domain.ts';
import { readCase } from '../../src/case/read-case.ts';

const folder = new URL('../../meshes/', import.meta.url);
const textOf = (name: string) => readFileSync(new URL(name, folder), 'utf8');
const load = (name: string) => readCase(textOf(name), { file: name, readFile: textOf });

/** What each sample must come to, by formulas worked out by hand. */
const quarter = 1 - Math.PI / 4;
const samples = {
  // Body 1.2 × 0.65 and bay 0.27 × 0.15; corners of radius 0.2, 0.2, 0.15, 0.1 and twice 0.08 cut off, two fillets of
  // radius 0.04 and 0.03 filled in; five posts.
  'capture-chamber.case.json': {
    area:
      1.2 * 0.65 +
      0.27 * 0.15 -
      quarter * (2 * 0.2 ** 2 + 0.15 ** 2 + 0.1 ** 2 + 2 * 0.08 ** 2 - 0.04 ** 2 - 0.03 ** 2) -
      Math.PI * (2 * 0.055 ** 2 + 2 * 0.05 ** 2 + 0.065 ** 2),
    outline: 2.24 + (Math.PI / 2) * (2 * 0.2 + 0.15 + 0.1 + 2 * 0.08 + 0.04 + 0.03),
    layouts: 5,
  },
  // A square of 0.4 × 0.8 between two half discs of radius 0.4; two posts of radius 0.05.
  'case-example.case.json': {
    area: 0.4 * 0.8 + Math.PI * 0.4 ** 2 - 2 * Math.PI * 0.05 ** 2,
    outline: 0.8 + 0.8 * Math.PI,
    layouts: 3,
  },
  'dish-with-slit.case.json': { area: 25 * Math.PI, outline: 10 * Math.PI, layouts: 3 },
  // Body 20 × 10 with four corners of radius 2 and a bay of 4 × 2; a round post of radius 1, an oval one of half axes
  // 2 and 1, a square one of 2 × 2 with corners of radius ½.
  'drawing.case.json': {
    area: 20 * 10 - 4 * quarter * 4 + 4 * 2 - Math.PI - 2 * Math.PI - (4 - 4 * quarter * 0.25),
    outline: 2 * (16 + 6) + 4 * Math.PI + 2 * 2,
    layouts: 4,
  },
  // Two squares of 20 and a neck of 6 × 2.
  'two-rooms.case.json': { area: 812, outline: 2 * 80 - 2 * 2 + 2 * 6, layouts: 3 },
} as const;

it('has an expectation for every sample, and a sample for every expectation', () => {
  const files = readdirSync(folder).filter((name) => name.endsWith('.case.json'));
  expect(files.sort()).toEqual(Object.keys(samples).sort());
});

describe.each(Object.entries(samples))('%s', (name, { area, outline, layouts }) => {
  it('has the area and the length of outline that its formulas give', () => {
    const { drawing } = load(name);
    const inside = [drawing.outline, ...drawing.holes].reduce((sum, chain) => sum + enclosedArea(chain), 0);
    expect(inside / area).toBeCloseTo(1, 13);
    expect(chainLength(drawing.outline) / outline).toBeCloseTo(1, 13);
    expect(drawing.healed).toEqual([]);
  });

  it('can be cut for each of its layouts that this version solves', () => {
    const theCase = load(name);
    const able = theCase.layouts.filter((layout) => layout.notAvailable === undefined);
    expect(theCase.layouts).toHaveLength(layouts);
    expect(able.length).toBeGreaterThan(0);
    for (const layout of able) {
      const { exits, pieces, problem } = layoutDomain(theCase, layout);
      const catching = new Set(
        [...pieces.values()].flatMap(({ wall, physics }) => ('exit' in physics ? (wall ?? []) : [])),
      );
      expect([...catching].sort()).toEqual([...exits].sort());
      expect(problem([[]]).walls.size).toBe(pieces.size);
    }
  });
});

it('gives the chamber pads of the lengths its layouts are named for', () => {
  const theCase = load('capture-chamber.case.json');
  const caught = theCase.layouts.map((layout) => {
    const { pieces } = layoutDomain(theCase, layout);
    return [...pieces.values()].reduce(
      (sum, { wall, from, to }) => sum + (wall === undefined ? 0 : to - from),
      0,
    );
  });
  expect(caught).toEqual(
    [2 * Math.PI * 0.275, 4 * 0.13, 0.69, 3 * 0.22, 0.44].map((length) => expect.closeTo(length, 12)),
  );
});

it('holds the example of the case format word for word', () => {
  expect(JSON.parse(textOf('case-example.case.json'))).toMatchObject({
    title: 'Capture chamber, two posts',
    tarry: 1,
  });
});
