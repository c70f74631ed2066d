import Value from 'typebox/value';
import { describe, expect, it } from 'vitest';
import { describeError } from '../../src/case/describe-error.ts';
import { explainMismatch } from '../../src/case/explain-mismatch.ts';
import { caseSchema } from '../../src/case/schema.ts';
import { refusalOf, smallCase } from './small-case.ts';

const message = (parts: Record<string, unknown>) => describeError(refusalOf(smallCase(parts)));

describe('the form of a case', () => {
  it('names an unknown key with the nearest known one, its path and its line', () => {
    const error = refusalOf(
      '{\n"tarry": 1,\n"units": {"length": "mm", "time": "s"},\n"particle": {\n  "diffussion": 1},\n"drawing": {"outline": {"rectangle": [0,0,1,1]}},\n"walls": {}, "layouts": {}}',
    );
    expect(error).toMatchObject({
      code: 'CASE_KEY_UNKNOWN',
      where: { file: 'small.json', line: 5, key: 'particle.diffussion' },
    });
    expect(describeError(error)).toMatch(
      /^small\.json line 5, particle\.diffussion: the key "diffussion" is not known here\. Did you mean "diffusion"\?/,
    );
  });

  it('says that a value is missing as STYLE.md has it', () => {
    const text =
      '{"tarry": 1, "units": "none", "drawing": {"outline": {"rectangle": [0,0,1,1]}}, "particle": {"diffusion": 1},\n"walls": {"coat 1": {"on": "outline"}},\n"layouts": {"coated post": {\n"coat 1": {"partlyAbsorbing": null}}}}';
    expect(describeError(refusalOf(text))).toBe(
      'small.json line 4, layouts."coated post"."coat 1": partlyAbsorbing has no value. Give a reactivity such as "2e-3 mm/s", or make the wall "reflecting".',
    );
  });

  it.each([
    [
      { particle: {} },
      'particle: "diffusion" is missing. Give a diffusion coefficient such as "1e-4 mm^2/s" (dX = b dt + σ dW has D = σ²/2)',
    ],
    [
      { particle: { diffusion: true } },
      'particle.diffusion: true does not fit here. Give a diffusion coefficient',
    ],
    [{ tarry: 2 }, 'tarry: 2 does not fit here. Give 1, the version of the form'],
    [
      { layouts: { a: { floor: 'absorbin' } } },
      'layouts.a.floor: "absorbin" does not fit here. Did you mean "absorbing"?',
    ],
    [
      { layouts: { a: { floor: { partlyAbsorbin: 1 } } } },
      'layouts.a.floor.partlyAbsorbin: the key "partlyAbsorbin" is not known here. Did you mean "partlyAbsorbing"?',
    ],
    [
      { layouts: { a: { floor: { absorbing: { nar: [0, 0] } } } } },
      'layouts.a.floor.absorbing.nar: the key "nar" is not known here. Did you mean "near"?',
    ],
    [{ layouts: { a: { floor: {} } } }, 'layouts.a: floor has no value. Give "absorbing", "reflecting"'],
    [{ walls: { w: { from: 0, to: 1 } } }, 'walls.w: "on" is missing. Give the name of a loop'],
    [
      { walls: { w: { on: 'outline', as: 'door' } } },
      'walls.w.as: "door" does not fit here. Did you mean "pad"?',
    ],
    [
      { pins: { 'pin one': [1, 2, 3] } },
      'pins."pin one": a list of 3 does not fit here. Give a point [x, y]',
    ],
    [
      { pins: { p: [1, { a: 1 }] } },
      'pins.p.1: an object does not fit here. Give a length such as 0.5 or "0.5 mm"',
    ],
    [{ starts: { s: { spot: [0, 0] } } }, 'starts.s: "radius" is missing. Give a radius such as'],
    [
      { starts: { s: { evnIn: 'bay' } } },
      'starts.s.evnIn: the key "evnIn" is not known here. Did you mean "evenIn"?',
    ],
    [
      { accuracy: { nodes: 0.5 } },
      'accuracy.nodes: 0.5 does not fit here. Give a whole number of nodes from 100',
    ],
    [{ accuracy: { nodes: 1 } }, 'accuracy.nodes: 1 does not fit here'],
    [{ accuracy: { seconds: 0 } }, 'accuracy.seconds: 0 does not fit here. Give seconds above 0'],
    [{ units: 'metric' }, 'units: "metric" does not fit here. Did you mean "none"? Give units:'],
    [{ units: { length: 'mm' } }, 'units: "time" is missing. Give a unit of time'],
    [
      { drawing: { outline: { circel: [0, 0], radius: 1 } } },
      'drawing.outline.circel: the key "circel" is not known here. Did you mean "circle"?',
    ],
    [
      { drawing: { outline: { polygon: [[0, 0], [1]] } } },
      'drawing.outline.polygon: a list of 2 does not fit here',
    ],
    [{ drawing: { file: 'a.svg', take: 5 } }, 'drawing.take: 5 does not fit here. Give the layer'],
    [
      { asked: [{ figure: 'mean' }, { figur: 'mean' }] },
      'asked.1.figur: the key "figur" is not known here. Did you mean "figure"?',
    ],
    [{ note: 5 }, 'note: 5 does not fit here'],
    [{ title: 'x'.repeat(201) }, 'title: '],
    [
      { particle: { diffusion: 1, noise: 'Ito' } },
      'particle.noise: "Ito" does not fit here. Did you mean "ito"?',
    ],
  ])('refuses %j', (parts, expected) => {
    expect(message(parts)).toContain(expected);
  });
});

describe('a case that is not one', () => {
  it('tells a missing part by its name, in the order of the form', () => {
    expect(describeError(refusalOf({ tarry: 1 }))).toContain(
      'small.json line 1: "units" is missing. Give units:',
    );
    expect(describeError(refusalOf('[]'))).toContain(
      'a list of 0 does not fit here. Give a case: one object',
    );
    expect(describeError(refusalOf('7'))).toContain('7 does not fit here. Give a case');
  });

  it('refuses more than 10 MB', () => {
    expect(refusalOf(`{"tarry": 1${' '.repeat(10_000_000)}}`).code).toBe('CASE_TOO_LARGE');
  });
});

describe('the published schema', () => {
  it('is plain JSON of draft 2020-12', () => {
    expect(JSON.parse(JSON.stringify(caseSchema))).toMatchObject({
      $schema: 'https://json-schema.org/draft/2020-12/schema',
      type: 'object',
      required: ['tarry', 'units', 'drawing', 'particle', 'walls', 'layouts'],
      additionalProperties: false,
    });
    expect(JSON.stringify(caseSchema)).not.toContain('"items":[');
  });

  it('takes a note and a source on every object', () => {
    const schemas: { type?: unknown; properties?: object }[] = [];
    const collect = (node: unknown): void => {
      if (typeof node !== 'object' || node === null) return;
      if ('type' in node && node.type === 'object') schemas.push(node);
      for (const entry of Object.values(node)) collect(entry);
    };
    collect(caseSchema);
    expect(schemas.length).toBeGreaterThan(40);
    for (const schema of schemas)
      expect(Object.keys(schema.properties ?? {})).toEqual(expect.arrayContaining(['note', 'source']));
  });

  it('finds words for exactly what the check refuses', () => {
    // Each part of a case that is in order is replaced by values of other kinds: check and words must agree.
    const values = [
      null,
      true,
      5,
      -1,
      'text',
      '',
      [],
      [1, 2],
      [
        [0, 0],
        [1, 1],
      ],
      {},
      { value: 1 },
      { a: 'absorbing' },
      { expression: 'x' },
    ];
    const whole = smallCase({
      starts: { s: { point: [0, 0] } },
      asked: [{ figure: 'mean' }],
      accuracy: { seed: 1 },
      pins: { p: [0, 0] },
    });
    let compared = 0;
    let refused = 0;
    const compare = (raw: unknown) => {
      const fits = Value.Check(caseSchema, raw);
      expect(explainMismatch(caseSchema, raw) === undefined).toBe(fits);
      compared++;
      if (!fits) refused++;
    };
    const replaceIn = (node: unknown, put: (changed: unknown) => unknown): void => {
      for (const value of values) compare(put(value));
      if (typeof node !== 'object' || node === null) return;
      for (const [name, entry] of Object.entries(node)) {
        const set = (changed: unknown) =>
          Array.isArray(node)
            ? node.map((each, i) => (String(i) === name ? changed : each))
            : { ...node, [name]: changed };
        replaceIn(entry, (changed) => put(set(changed)));
      }
    };
    replaceIn(whole, (changed) => changed);
    expect(compared).toBeGreaterThan(500);
    expect(refused).toBeGreaterThan(200);
  });
});
