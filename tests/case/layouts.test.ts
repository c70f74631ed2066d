import { describe, expect, it } from 'vitest';
import { describeError } from '../../src/case/describe-error.ts';
import { readObject, refusalOf, smallCase } from './small-case.ts';

const layout = (raw: Record<string, unknown>) => readObject(smallCase({ layouts: { a: raw } })).layouts[0];
const message = (parts: Record<string, unknown>) => describeError(refusalOf(smallCase(parts)));

describe('kinds of wall', () => {
  it("are read with their coefficients in the case's units", () => {
    const read = layout({
      floor: 'absorbing',
      lid: 'reflecting',
      coat: { partlyAbsorbing: { value: '2 um/s', within: 'half to double', source: 'us' } },
      baffle: { permeable: '1e-4 mm/s' },
    });
    expect(read?.assignments.map(({ wall, kind }) => [wall.name, kind])).toEqual([
      ['floor', { kind: 'absorbing' }],
      ['lid', { kind: 'reflecting' }],
      ['coat', { kind: 'partlyAbsorbing', kappa: { value: 2e-3, within: [1e-3, 4e-3], source: 'us' } }],
      ['baffle', { kind: 'permeable', permeability: { value: 1e-4 } }],
    ]);
  });

  it('may hold on a part of the wall', () => {
    const read = layout({
      floor: { absorbing: { from: 0.25, to: 0.5 } },
      coat: { partlyAbsorbing: { value: 1, angles: [0, 90] } },
    });
    expect(read?.assignments[0]?.wall.parts).toEqual([{ loop: 'outline', spans: [{ from: 0.25, to: 0.5 }] }]);
    const span = read?.assignments[1]?.wall.parts[0]?.spans[0];
    const quarter = (Math.PI / 2) * 0.1;
    const length = typeof span === 'object' ? span.to - span.from : 0;
    expect(length).toBeCloseTo(quarter, 9);
  });

  it.each([
    [
      { coat: { partlyAbsorbing: 0 } },
      'layouts.a.coat: partlyAbsorbing is 0, which is not above 0. Give a value such as "2e-3 mm/s", or make the wall "reflecting"',
    ],
    [
      { coat: { partlyAbsorbing: '2e-3 mm' } },
      'layouts.a.coat.partlyAbsorbing: "mm" is length, but a reactivity is length/time',
    ],
    [{ coat: { permeable: 1 } }, 'only an inner wall can be permeable, and this wall lies on "post"'],
    [{ floor: { absorbing: { from: 0.5, to: 1.5 } } }, 'beyond the wall "floor"'],
    [{ without: ['post'], coat: 'absorbing' }, 'the wall lies on "post", which this layout leaves out'],
  ])('refuses %j', (raw, expected) => {
    expect(message({ layouts: { a: raw } })).toContain(expected);
  });
});

describe('two walls of a layout', () => {
  const walls = {
    left: { on: 'outline', from: 0, to: 0.6 },
    right: { on: 'outline', from: 0.4, to: 1 },
    next: { on: 'outline', from: 0.6, to: 1 },
    over: { on: 'outline', from: 3.5, to: 0.1 },
  };

  it('are refused where they share a stretch, also over the mark', () => {
    const text = message({ walls, layouts: { a: { left: 'absorbing', right: 'reflecting' } } });
    expect(text).toContain(
      'layouts.a.right: "left" and "right" share a stretch of "outline", from 0.4 to 0.6 along it',
    );
    expect(message({ walls, layouts: { a: { left: 'absorbing', over: 'absorbing' } } })).toContain(
      'from 0 to 0.1',
    );
  });

  it('may touch, and may overlap when no layout uses both', () => {
    const read = readObject(
      smallCase({
        walls,
        layouts: { a: { left: 'absorbing', next: 'reflecting' }, b: { right: 'absorbing' } },
      }),
    );
    expect(read.layouts).toHaveLength(2);
  });

  it('may overlap as walls when the parts in use do not', () => {
    const read = readObject(
      smallCase({ walls, layouts: { a: { left: { absorbing: { from: 0, to: 0.3 } }, right: 'absorbing' } } }),
    );
    expect(read.layouts[0]?.assignments).toHaveLength(2);
  });
});

describe('a layout', () => {
  it('without anything that catches is told, unless particles can be lost', () => {
    const parts = { layouts: { a: { floor: 'reflecting' } } };
    expect(readObject(smallCase(parts)).warnings).toEqual([
      'layout "a": nothing catches, so the time is endless; make a wall absorbing',
    ]);
    expect(readObject(smallCase({ ...parts, particle: { diffusion: 1, loss: 1 } })).warnings).toEqual([]);
  });

  it('with a floor needs a depth, and can be asked for the share of the floor', () => {
    const drawing = (parts: object) => ({ ...(smallCase()['drawing'] as object), ...parts });
    const parts = { layouts: { a: { bay: { floor: '1e-3 mm/s' } } }, asked: [{ figure: 'share of bay' }] };
    expect(refusalOf(smallCase(parts))).toMatchObject({
      code: 'FLOOR_WITHOUT_DEPTH',
      where: { key: 'layouts.a.bay' },
    });
    const read = readObject(smallCase({ ...parts, drawing: drawing({ depth: '100 um' }) }));
    expect(read.layouts[0]?.floors).toEqual([{ region: 'bay', kappa: { value: 1e-3 } }]);
    expect(read.depth).toEqual({ kind: 'constant', value: 0.1 });
    expect(read.notAvailable).toEqual([]);
    expect(read.asked[0]?.figure).toEqual({ kind: 'share', wall: 'bay' });
  });

  it('has a depth that varies in the units of the case, whatever its own', () => {
    const drawing = { outline: { rectangle: [0, 0, 1, 1] }, depth: { expression: '100 + 50*x', unit: 'um' } };
    const { depth } = readObject(
      smallCase({
        drawing,
        walls: { floor: { on: 'outline' } },
        layouts: { a: { floor: 'absorbing' } },
      }),
    );
    expect(depth?.kind === 'varying' && depth.at(1, 0)).toBeCloseTo(0.15, 15);
  });

  it('tells that ranges of a reactivity, a floor and a depth bear on no answer yet', () => {
    const known = (value: string) => ({ value, within: '10 %' });
    const read = readObject(
      smallCase({
        drawing: { ...(smallCase()['drawing'] as object), depth: known('1 mm') },
        layouts: { a: { bay: { floor: known('1 mm/s') }, coat: { partlyAbsorbing: known('1 mm/s') } } },
      }),
    );
    const places = read.notAvailable.map((told) => /\((.*)\)/.exec(told)?.[1]);
    expect(places).toEqual(['drawing.depth', 'layouts.a.bay.floor', 'layouts.a.coat.partlyAbsorbing']);
  });
});

describe('starts, figures and reports that are not available yet', () => {
  it('are told one by one, and each is marked', () => {
    const read = readObject(
      smallCase({
        starts: {
          spread: { density: 'exp(-x^2)' },
          listed: { table: 's.csv' },
          even: { evenIn: 'everywhere' },
        },
        asked: [
          'standard deviation',
          'median',
          'share of lid by 1 h',
          'still inside at 1 h',
          'time in bay',
          'decay time',
          'mean',
        ].map((figure) => ({ figure, start: 'even' })),
        report: {
          survivalAt: ['1 min'],
          occupationOf: ['bay'],
          moments: 3,
          field: ['mean', 'share of lid', 'median'],
        },
      }),
      { readFile: () => 'x mm,y mm\n' },
    );
    expect(read.starts.map((start) => start.notAvailable !== undefined)).toEqual([true, true, false]);
    expect(read.notAvailable).toEqual(
      [
        'starts by a density (start "spread")',
        'starts from a table (start "listed")',
        'fields other than mean and shares (report.field "median")',
      ].map((each) => `${each}: not available yet`),
    );
    expect(read.report).toEqual({
      survivalAt: [60],
      occupationOf: ['bay'],
      moments: 3,
      field: [{ kind: 'mean' }, { kind: 'share', wall: 'lid' }, { kind: 'median' }],
    });
  });

  it('are checked all the same', () => {
    expect(message({ starts: { s: { density: 'exp(' } } })).toContain(
      'starts.s.density: the expression "exp(" cannot be read',
    );
    expect(message({ report: { survivalAt: ['1 mm'] } })).toContain('report.survivalAt.0: "mm" is length');
    expect(message({ starts: { s: { table: 'x.csv' } } })).toContain(
      'starts.s.table: the file "x.csv" was not given',
    );
  });
});
