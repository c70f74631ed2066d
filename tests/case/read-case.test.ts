import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { describeError } from '../../src/case/describe-error.ts';
import { readCase } from '../../src/case/read-case.ts';
import { readObject, refusalOf, smallCase } from './small-case.ts';

const example = readFileSync(new URL('../data/case-md-example.case.json', import.meta.url), 'utf8');
const message = (parts: Record<string, unknown>) => describeError(refusalOf(smallCase(parts)));

describe('the example of the case form', () => {
  const read = readCase(example, { file: 'chamber.json' });

  it('loads with everything in it', () => {
    expect(read.title).toBe('Capture chamber, two posts');
    expect(read.units).toEqual({ length: 'mm', time: 's' });
    expect(read.drawing.holes.map((hole) => hole.name)).toEqual(['post 1', 'post 2']);
    expect(read.drawing.tolerance).toBe(0.0005);
    expect(read.walls.map((wall) => wall.name)).toEqual([
      'left pad',
      'right pad',
      'top pad',
      'coat 1',
      'baffle',
    ]);
    expect(read.layouts.map((layout) => layout.name)).toEqual(['two end pads', 'coated post', 'top']);
    expect(read.reference).toBe('two end pads');
    expect(read.starts.map((start) => start.kind)).toEqual(['evenIn', 'evenIn', 'point', 'spot']);
    expect(read.starts[0]).toEqual({ kind: 'evenIn', name: 'inlet bay', region: 0 });
    expect(read.pins).toEqual([{ name: 'between posts', at: [0.5, 0.5] }]);
    expect(read.accuracy).toEqual({ bracket: 0.001, nodes: 2_000_000, seconds: 300, paths: 20_000, seed: 7 });
    expect(read.warnings).toEqual([]);
  });

  it('converts the particle and keeps range and source', () => {
    expect(read.particle.diffusion).toEqual({ kind: 'constant', value: 1e-4 });
    expect(read.particle.diffusionIn.get(0)).toEqual({ kind: 'constant', value: 8e-5 });
    expect(read.particle.noise).toBe('isothermal');
    expect(read.particle.stated?.source).toBe('our run 12, 25 degC');
    expect(read.particle.stated?.within?.[0]).toBeCloseTo(9e-5, 15);
    expect(read.particle.stated?.within?.[1]).toBeCloseTo(1.1e-4, 15);
  });

  it('reads what is asked with its limits', () => {
    expect(read.asked[0]).toMatchObject({
      text: 'time to 95 %',
      figure: { kind: 'time to', fraction: 0.95 },
      start: 'inlet bay',
      limit: { kind: 'under', value: 1200, text: '20 min' },
    });
    expect(read.asked[1]).toEqual({
      text: 'share of left pad',
      figure: { kind: 'share', wall: 'left pad' },
      start: 'inlet bay',
      limit: { kind: 'atLeast', value: 0.4, text: '40 %' },
    });
  });

  it('narrows a wall to the part a layout gives, and leaves the wall itself alone', () => {
    const top = read.layouts[2]?.assignments.find(({ wall }) => wall.name === 'left pad');
    const span = top?.wall.parts[0]?.spans[0];
    expect(typeof span === 'object' && span.to - span.from).toBeCloseTo(0.2, 9);
    const whole = read.walls[0]?.parts[0]?.spans[0];
    expect(typeof whole === 'object' && whole.to - whole.from).toBeCloseTo(0.3, 9);
  });

  it('names what is not available yet, item by item, and holds no layout back', () => {
    expect(read.notAvailable).toEqual([
      'what ranges of inputs do to the answers (particle.diffusion): not available yet',
      'a guaranteed bracket of a given width (accuracy.bracket): not available yet',
      'the check by trajectories (accuracy.paths): not available yet',
    ]);
    expect(read.layouts.map((layout) => layout.notAvailable)).toEqual([undefined, undefined, undefined]);
  });
});

describe('what a case may leave out', () => {
  const read = readObject(smallCase());

  it('has one start, even everywhere, and is asked for the mean', () => {
    expect(read.starts).toEqual([{ kind: 'evenIn', name: 'anywhere', region: 'everywhere' }]);
    expect(read.asked).toEqual([{ text: 'mean', figure: { kind: 'mean' }, start: 'anywhere' }]);
    expect(read.reference).toBe('first');
    expect(read.accuracy).toEqual({ bracket: 0.001, nodes: 500_000, seconds: 120, paths: 4_000, seed: 1 });
    expect(read.particle.noise).toBe('isothermal');
    expect(read.notAvailable).toEqual([]);
    expect(read.title).toBe('small');
  });

  it('has a wider bracket when a time to N % comes first', () => {
    expect(readObject(smallCase({ asked: [{ figure: 'time to 95 %' }] })).accuracy.bracket).toBe(0.01);
  });

  it('takes notes and sources anywhere, as no names', () => {
    const noted = smallCase({
      note: 'n',
      walls: { note: 'all of them', source: 'us', floor: { on: 'outline', from: 0, to: 1, note: 'x' } },
      layouts: { source: 'us', first: { note: 'why', floor: 'absorbing' } },
      drawing: {
        note: 'd',
        outline: { rectangle: [0, 0, 1, 1], note: 'o' },
        holes: { note: 'h' },
        regions: { source: 'r' },
      },
    });
    const case1 = readObject(noted);
    expect(case1.walls.map((wall) => wall.name)).toEqual(['floor']);
    expect(case1.layouts.map((layout) => layout.name)).toEqual(['first']);
    expect(case1.drawing.holes).toEqual([]);
  });
});

describe('a drawing with y downwards', () => {
  it('turns points and expressions with it', () => {
    const read = readObject(
      smallCase({
        drawing: { y: 'down', outline: { path: 'M 0 0 H 1 V 2 H 0 Z' } },
        walls: { lid: { on: 'outline', near: [0.5, 0], width: 0.2 } },
        layouts: { a: { lid: 'absorbing' } },
        particle: { diffusion: { expression: '1 + y', unit: 'mm^2/s' }, noise: 'ito' },
        starts: { s: { point: [0.25, '1.5 mm'] } },
        pins: { p: [0.5, 0.5] },
      }),
    );
    expect(read.starts[0]).toMatchObject({ at: [0.25, -1.5] });
    expect(read.pins[0]?.at).toEqual([0.5, -0.5]);
    const { diffusion } = read.particle;
    expect(diffusion.kind === 'varying' && diffusion.at(0.3, -1.5)).toBe(2.5);
  });
});

describe('names', () => {
  it.each([
    [{ walls: { lost: { on: 'outline' } } }, 'walls.lost: "lost" means something in every case'],
    [{ walls: { bay: { on: 'outline' } } }, 'walls.bay: "bay" is both a region and a wall'],
    [{ walls: { ' a': { on: 'outline' } } }, 'walls." a": " a" cannot be a name'],
    [{ walls: { a: { on: 'pots' } } }, 'walls.a.on: the drawing has no loop "pots". Did you mean "post"?'],
    [
      { layouts: { a: { flor: 'absorbing' } } },
      'layouts.a.flor: no wall is called "flor". Did you mean "floor"?',
    ],
    [{ layouts: { a: { bay: 'absorbing' } } }, 'A region can only catch from below'],
    [{ layouts: { a: { lid: { floor: 1 } } } }, 'only a region has a floor'],
    [
      { layouts: { a: { without: ['pst'], floor: 'absorbing' } } },
      'layouts.a.without.0: no hole is called "pst". Did you mean "post"?',
    ],
    [{ layouts: {} }, 'layouts: the case has no layout'],
    [{ reference: 'thrid' }, 'reference: no layout is called "thrid"'],
    [{ starts: { s: { evenIn: 'bai' } } }, 'starts.s.evenIn: no region is called "bai". Did you mean "bay"?'],
    [
      { asked: [{ figure: 'mean', start: 'anywher' }] },
      'asked.0.start: no start is called "anywher". Did you mean "anywhere"?',
    ],
    [
      { asked: [{ figure: 'share of lidd' }] },
      'asked.0.figure: no wall is called "lidd". Did you mean "lid"?',
    ],
    [{ asked: [{ figure: 'share of lost' }] }, 'no wall is called "lost"'],
    [{ report: { occupationOf: ['bayy'] } }, 'report.occupationOf.0: no region is called "bayy"'],
  ])('refuses %j', (parts, expected) => {
    expect(message(parts)).toContain(expected);
  });

  it('gives the line of the key in the file', () => {
    const error = refusalOf(smallCase({ layouts: { a: { flor: 'absorbing' } } }));
    const lines = JSON.stringify(smallCase({ layouts: { a: { flor: 'absorbing' } } }), null, 1).split('\n');
    expect(lines[(error.where.line ?? 0) - 1]).toContain('"flor"');
  });

  it('takes names that objects have of themselves', () => {
    const read = readObject(
      smallCase({
        walls: { constructor: { on: 'post' }, toString: { on: 'outline' } },
        layouts: { valueOf: { constructor: 'absorbing' } },
      }),
    );
    expect(read.walls.map((wall) => wall.name)).toEqual(['constructor', 'toString']);
  });
});

describe('limits of what is asked', () => {
  it.each([
    [{ figure: 'share of lid', atLeast: 40 }, 'Give one from 0 to 1, or in per cent, such as "40 %"'],
    [
      { figure: 'mean', under: '40 %' },
      'asked.0.under: "%" is not known as a unit of length and time. Here a time is expected',
    ],
    [{ figure: 'mean', under: '5 mm' }, '"mm" is length, but a time is time'],
    [{ figure: 'mean', under: 1, atLeast: 1 }, 'both "under" and "atLeast" are given'],
    [{ figure: 'mean', under: -1 }, 'a limit of -1 can never be met or missed'],
  ])('refuses %j', (asked, expected) => {
    expect(message({ asked: [asked] })).toContain(expected);
  });
});

describe('files beside the case', () => {
  const drawing = {
    file: 'chamber.svg',
    scale: {
      between: [
        [0, 0],
        [1, 0],
      ],
      is: '1 mm',
    },
  };

  it.each(['../a.svg', '/etc/a.svg', 'C:\\a.svg', 'a/../../b.svg'])(
    'refuses %s, which lies elsewhere',
    (file) => {
      const source = { readFile: () => '<svg/>' };
      expect(refusalOf(smallCase({ drawing: { ...drawing, file } }), source)).toMatchObject({
        code: 'FILE_NOT_READ',
        where: { key: 'drawing.file', file: 'small.json' },
      });
    },
  );

  it("says which file cannot be read, without the system's own words", () => {
    const readFile = () => {
      throw new Error('ENOENT: no such file');
    };
    const text = describeError(refusalOf(smallCase({ drawing }), { readFile }));
    expect(text).toContain('drawing.file: the file "chamber.svg" cannot be read');
    expect(text).not.toContain('ENOENT');
    expect(describeError(refusalOf(smallCase({ drawing })))).toContain('was not given with the case');
  });

  it('refuses a drawing over 5 MB', () => {
    const readFile = () => new Uint8Array(5_000_001);
    expect(refusalOf(smallCase({ drawing }), { readFile }).code).toBe('DRAWING_TOO_LARGE');
  });
});
