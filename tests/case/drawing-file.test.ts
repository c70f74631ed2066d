import { expect, it } from 'vitest';
import { enclosedArea } from '../../mesher/index.ts';
import { buildDrawing, type RawDrawing } from '../../src/case/drawing.ts';
import { drawingContext, refusalOf } from '../support/drawing-context.ts';

const page = 'width="10mm" height="8mm" viewBox="0 0 1000 800"';
const build = (inside: string, raw: Omit<RawDrawing, 'file'> = {}, head = page) =>
  buildDrawing({ file: 'a.svg', ...raw }, drawingContext({ 'a.svg': `<svg ${head}>\n${inside}\n</svg>` }));
const refusal = (inside: string, raw?: Omit<RawDrawing, 'file'>, head?: string) =>
  refusalOf(() => build(inside, raw, head));

const rim = '<rect id="rim" x="100" y="100" width="600" height="400"/>';
const posts =
  '<circle id="left" cx="200" cy="200" r="50"/>\n<circle cx="400" cy="300" r="50"/><circle cx="600" cy="300" r="20"/>';

it('takes the largest closed shape with others inside as the outline and warns that it did', () => {
  const drawing = build(`${posts}\n${rim}\n<rect x="800" y="0" width="150" height="800"/>`);
  expect(drawing.outline.name).toBe('rim');
  expect(drawing.warnings).toEqual([expect.stringContaining('outline proposed: "rim" of a.svg')]);
  expect(drawing.holes.map(({ name }) => name)).toEqual(['left', 'hole 1', 'hole 2']);
  expect(drawing.leftOut).toEqual(['"shape 5" (rect, line 5): outside the outline']);
  expect(enclosedArea(drawing.outline)).toBeCloseTo(24, 12);
});

it('tells what was taken with sizes, scale and the smallest gap', () => {
  const { taken } = build(`${rim}\n${posts}`, { outline: 'rim' });
  expect(taken).toEqual([
    '"rim": outline, 6 × 4 mm (rect, line 2)',
    '"left": hole, 1 × 1 mm (circle, line 3)',
    '"hole 1": hole, 1 × 1 mm ("shape 3", circle, line 4)',
    '"hole 2": hole, 0.4 × 0.4 mm ("shape 4", circle, line 4)',
    'scale: one drawing unit is 0.01 mm, from the page size',
    'coordinates: measured from the lower left corner of the page, y upwards',
    // 200 − 100 − 50 units from the left post to the rim.
    'smallest gap: 0.5 mm, between "rim" and "left"',
  ]);
});

it('reports no winding for shapes that a drawing program made', () => {
  const drawing = build('<path id="rim" d="M 0 0 V 9 H 9 V 0 Z"/>', { outline: 'rim' });
  expect(enclosedArea(drawing.outline)).toBeGreaterThan(0);
  expect(drawing.healed).toEqual([]);
});

it('refuses two shapes that tie for the outline, and asks among several that stand apart', () => {
  const box = (x: number) =>
    `<rect x="${x}" width="100" height="100"/><circle cx="${x + 50}" cy="50" r="9"/>`;
  expect(refusal(box(0) + box(200))).toMatchObject({
    code: 'DRAWING_OUTLINE_UNCLEAR',
    what: expect.stringContaining('equally large'),
    remedy: expect.stringContaining('"shape 3" (line 2)'),
  });
  expect(refusal('<circle r="5"/><circle cx="90" r="6"/>').what).toContain('none of its closed shapes');
  expect(refusal('<line x2="5"/>').what).toContain('no shape in it is closed');
  expect(build('<circle cx="50" cy="50" r="5"/>').outline.name).toBe('outline');
});

it('names regions and inner walls from the file and leaves other open lines out, saying so', () => {
  const lines =
    '<path id="fin" d="M 300 200 V 400" fill="none"/>\n<path id="dim" d="M 100 600 H 700" fill="none"/>';
  const drawing = build(`${rim}\n<rect id="bay" x="600" y="450" width="90" height="90"/>\n${lines}`, {
    outline: 'rim',
    regions: { inlet: 'bay' },
    innerWalls: { baffle: 'fin' },
  });
  expect(drawing.regions.map(({ name }) => name)).toEqual(['inlet']);
  expect(drawing.innerWalls.map(({ name }) => name)).toEqual(['baffle']);
  expect(drawing.holes).toEqual([]);
  expect(drawing.leftOut).toEqual(['"dim" (path, line 5): open line; name it under "innerWalls" to take it']);
});

it('takes only the layer named, and ignores shapes and groups named so', () => {
  const inside = `<rect id="frame" width="1000" height="800"/><g id="fluid">${rim}${posts}</g>`;
  expect(build(inside, { take: 'fluid' }).outline.name).toBe('rim');
  expect(build(inside, { ignore: ['frame', 'left'] }).holes).toHaveLength(2);
  // Without either, the frame is proposed, and the refusal that follows says so.
  expect(refusal(inside).remedy).toContain('outline proposed: "frame"');
  expect(refusal(inside, { take: 'fluids' }).remedy).toContain('"fluid"');
});

it('takes the scale of the case before that of the page', () => {
  const scale = {
    between: [
      [100, 500],
      [700, 500],
    ],
    is: '1.2 mm',
  };
  const drawing = build(`${rim}${posts}`, { outline: 'rim', scale });
  expect(enclosedArea(drawing.outline)).toBeCloseTo(1.2 * 0.8, 13);
});

it('asks for the scale of a page without a physical size instead of guessing', () => {
  const error = refusal(rim, {}, 'viewBox="0 0 1000 800" width="1000" height="800"');
  expect(error).toMatchObject({ code: 'DRAWING_SCALE_MISSING', where: { key: 'drawing.scale' } });
  expect(error.what).toContain('600 units wide');
});

it('leaves the scale of a shape exact: a circle stays one circle', () => {
  const drawing = build(`${rim}${posts}`, { outline: 'rim' });
  const curve = drawing.holes[0]?.pieces[0]?.curve;
  expect(curve?.kind === 'arc' && curve.radii).toEqual([0.5, 0.5]);
  // Page 800 high: y = 200 from above is 600 from below.
  expect(curve?.kind === 'arc' && curve.centre).toEqual([2, 6]);
});

it('adds shapes typed in the coordinates of the case to those of the file', () => {
  const drawing = build(rim, { outline: 'rim', holes: { pin: { circle: [4, 5], radius: 0.25 } } });
  expect(drawing.holes.map(enclosedArea)).toEqual([expect.closeTo(-Math.PI / 16, 14)]);
  expect(drawing.taken[1]).toBe('"pin": hole, 0.5 × 0.5 mm (circle, typed in)');
});

it('refuses shapes across the outline with the places, an open outline with its ends, an unknown name with a near one', () => {
  const across = refusal(`${rim}<circle id="big" cx="700" cy="300" r="50"/>`, { outline: 'rim' });
  expect(across).toMatchObject({ code: 'WALLS_CROSS' });
  expect(across.where.at).toHaveLength(2);
  const open = refusal('<path id="rim" d="M 0 0 H 9 V 9" fill="none"/>', { outline: 'rim' });
  expect(open).toMatchObject({ code: 'LOOP_OPEN', where: { key: 'drawing.outline' } });
  expect(refusal(rim, { outline: 'rime' }).remedy).toContain('"rim"');
});

it('says that a file is needed where none can be read', () => {
  const { readFile: _, ...blind } = drawingContext();
  expect(refusalOf(() => buildDrawing({ file: 'a.svg' }, blind)).code).toBe('FILE_NOT_READ');
});
