import { expect, it } from 'vitest';
import { type Curve, chainLength, enclosedArea } from '../../mesher/index.ts';
import { CaseError } from '../../src/case/errors.ts';
import type { FoundShape } from '../../src/importers/found-shape.ts';
import { boxOf } from '../../src/importers/found-shape.ts';
import { readDrawing } from '../../src/importers/registry.ts';

const svg = (inside: string, head = 'width="12mm" height="8mm" viewBox="0 0 1200 800"') =>
  readDrawing(`<svg xmlns="http://www.w3.org/2000/svg" ${head}>\n${inside}\n</svg>`, 'a.svg');

const chain = (curves: readonly Curve[]) => ({
  name: '',
  pieces: curves.map((curve, tag) => ({ curve, tag })),
});
const area = (shape: FoundShape | undefined) => Math.abs(enclosedArea(chain(shape?.curves ?? [])));

/** What a refusal says. */
function refusal(run: () => unknown): CaseError {
  try {
    run();
  } catch (error) {
    if (error instanceof CaseError) return error;
    throw error;
  }
  throw new Error('was not refused');
}

it('reads each of the seven kinds of shape with its size', () => {
  const { shapes } = svg(`
    <path d="M 0 0 H 10 V 5 H 0 Z"/><rect x="1" y="2" width="3" height="4"/><circle r="2"/>
    <ellipse rx="3" ry="1"/><polygon points="0,0 4,0 4,3"/><polyline points="0 0 1 0 1 1" fill="none"/>
    <line x2="3" y2="4"/>`);
  expect(shapes.map(({ element }) => element)).toEqual([
    'path',
    'rect',
    'circle',
    'ellipse',
    'polygon',
    'polyline',
    'line',
  ]);
  const areas = shapes.slice(0, 5).map(area);
  expect(areas).toEqual([50, 12, 4 * Math.PI, 3 * Math.PI, 6].map((a) => expect.closeTo(a, 12)));
  expect(shapes.map(({ closed }) => closed)).toEqual([true, true, true, true, true, false, false]);
  expect(chainLength(chain(shapes[6]?.curves ?? []))).toBe(5);
});

it('puts the lower left corner of the page at the origin, y upwards', () => {
  const { shapes } = svg(
    '<rect x="120" y="80" width="10" height="20"/>',
    'viewBox="100 50 400 300" width="4in"',
  );
  // Page from y = 50 to 350 downwards: the rectangle's lower edge y = 100 lies 250 above the page's.
  expect(boxOf(shapes[0]?.curves ?? [])).toEqual([
    [20, 250],
    [30, 270],
  ]);
});

it('begins a rectangle in its lower left corner and a circle at its +x point, as seen, counter-clockwise', () => {
  const { shapes } = svg('<rect x="10" y="20" width="30" height="40"/><circle cx="50" cy="60" r="7"/>');
  expect(shapes[0]?.curves[0]).toMatchObject({ from: [10, 740], to: [40, 740] });
  expect(shapes[1]?.curves[0]).toMatchObject({ from: [57, 740], to: [50, 747] });
  for (const { curves } of shapes) expect(enclosedArea(chain(curves))).toBeGreaterThan(0);
});

it('applies the transforms of nested groups from the outside in', () => {
  const { shapes } = svg(
    '<g transform="translate(100 0)"><g transform="scale(2)"><circle cx="5" cy="10" r="3"/></g></g>',
    'viewBox="0 0 1000 100" width="10mm"',
  );
  const [low, high] = boxOf(shapes[0]?.curves ?? []);
  expect([...low, ...high]).toEqual([104, 74, 116, 86].map((n) => expect.closeTo(n, 12)));
});

it.each([
  ['width="12mm" viewBox="0 0 1200 800"', 0.01],
  ['width="1.2cm" height="8mm" viewBox="0 0 1200 800"', 0.01],
  ['width="2in" viewBox="0 0 100 50"', 0.508],
  ['width="72pt" viewBox="0 0 72 36"', 25.4 / 72],
  ['width="6pc" viewBox="0 0 96 36"', 25.4 / 96],
  ['width="96px" viewBox="0 0 96 36"', 25.4 / 96],
  ['width="40q" viewBox="0 0 10 10"', 1],
  ['width="20mm" height="10mm"', 25.4 / 96],
  // The smaller scale of the two holds: the page is fitted into the space.
  ['width="20mm" height="30mm" viewBox="0 0 10 10"', 2],
])('takes the size of a unit from %s', (head, millimetres) => {
  expect(svg('<circle r="1"/>', head).physicalScale?.value).toBeCloseTo(millimetres, 14);
});

it.each([
  'viewBox="0 0 10 10"',
  'width="100%" viewBox="0 0 10 10"',
  'width="600" height="400" viewBox="0 0 6 4"',
  '',
])('knows no physical size from %j', (head) => {
  expect(svg('<circle r="1"/>', head).physicalScale).toBeUndefined();
});

it('names shapes by title, else id, else position, and twins by number', () => {
  const { shapes } = svg(
    '<circle id="a" r="1"><title> left\n post </title></circle><circle id="b" r="1"/><circle r="1"/><circle id="b" r="2"/>',
  );
  expect(shapes.map(({ name, isNamed }) => [name, isNamed])).toEqual([
    ['left post', true],
    ['b', true],
    ['shape 3', false],
    ['b 2', true],
  ]);
});

it('takes an unclosed line as closed only where it is filled or its ends meet', () => {
  const open = 'd="M 0 0 L 10 0 L 10 10"';
  const { shapes } = svg(`
    <path ${open}/><path ${open} fill="none"/><path ${open} style="stroke:#000;fill : none"/>
    <g fill="none"><path ${open}/><path ${open} fill="red"/></g><path d="M 0 0 L 10 0 L 10 10 L 0 1e-10" fill="none"/>
    <path d="M 0 0 L 10 0"/>`);
  expect(shapes.map(({ closed }) => closed)).toEqual([true, false, false, false, true, true, false]);
});

it('gives each stroke of a compound path its own shape', () => {
  const { shapes } = svg('<path id="ring" d="M 0 0 H 9 V 9 H 0 Z M 3 3 V 6 H 6 V 3 Z"/>');
  expect(shapes.map((shape) => [shape.name, area(shape)])).toEqual([
    ['ring', 81],
    ['ring 2', 9],
  ]);
});

it('tells what it leaves out, with lines', () => {
  const { shapes, leftOut } = svg(
    '<text>hi</text>\n<circle r="1" display="none"/>\n<use href="#a"/>\n<circle r="0"/><defs><circle r="4"/></defs>',
  );
  expect(shapes).toHaveLength(0);
  expect(leftOut).toEqual([
    '<text> (line 2)',
    'hidden shapes (line 3)',
    '<use> (line 4)',
    '<circle> without size (line 5)',
  ]);
});

it.each([
  ['<path d="M 0 0 L 1 1 Q"/>', /line 2, <path>.*middle/],
  ['<g>\n<circle r="big"/></g>', /line 3, <circle>: r="big"/],
  ['<circle r="1" transform="turn(4)"/>', /line 2, <circle>: transform="turn\(4\)" cannot be read/],
  ['<circle r="1" transform="scale(0 1)"/>', /flattens/],
  ['<polygon points="1 2 3"/>', /pairs/],
])('refuses %s with element and line', (inside, words) => {
  const error = refusal(() => svg(inside));
  expect(error.code).toBe('DRAWING_NOT_READ');
  expect(error.what).toMatch(words);
  expect(error.where).toMatchObject({ file: 'a.svg', line: expect.any(Number) });
});

it('refuses files that are not sound, declare entities or are too large, in words of its own', () => {
  const unclosed = refusal(() => readDrawing('<svg>\n<g></svg>', 'b.svg'));
  expect(unclosed).toMatchObject({ code: 'DRAWING_NOT_READ', where: { file: 'b.svg', line: 2 } });
  const entity = refusal(() =>
    readDrawing('<?xml version="1.0"?>\n<!DOCTYPE svg [<!ENTITY a "b">]><svg/>', 'b.svg'),
  );
  expect(entity).toMatchObject({ code: 'DRAWING_UNSAFE', where: { line: 2 } });
  expect(refusal(() => readDrawing(`<svg>${' '.repeat(5_000_001)}</svg>`, 'b.svg')).code).toBe(
    'DRAWING_TOO_LARGE',
  );
  expect(refusal(() => readDrawing('<html/>', 'b.svg')).what).toContain('no <svg>');
  expect(refusal(() => readDrawing('POINT (0 0)', 'b.dwg')).remedy).toContain('.svg');
  const deep = `<svg>${'<g>'.repeat(80)}<circle r="1"/>${'</g>'.repeat(80)}</svg>`;
  expect(refusal(() => readDrawing(deep, 'b.svg')).what).toContain('deeper');
});

it('refuses a drawing with more shapes than a compartment can have', () => {
  const many = '<circle r="1"/>'.repeat(20_001);
  expect(refusal(() => svg(many))).toMatchObject({ code: 'DRAWING_TOO_LARGE', where: { line: 2 } });
});

it('gives twins numbers that no other shape has', () => {
  const { shapes } = svg(
    '<circle id="a" r="1"/><circle id="a 2" r="1"/><circle id="a" r="1"/><circle id="a" r="1"/>',
  );
  expect(shapes.map(({ name }) => name)).toEqual(['a', 'a 2', 'a 3', 'a 4']);
});
