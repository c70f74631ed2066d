import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { CaseError } from '../../src/case/errors.ts';
import { joinKey, showKey, splitKey } from '../../src/case/key-path.ts';
import { parseJson } from '../../src/case/parse-json.ts';

const refusal = (text: string): CaseError => {
  try {
    parseJson(text, 'chamber.json');
  } catch (error) {
    if (error instanceof CaseError) return error;
    throw error;
  }
  throw new Error('was not refused');
};

describe('reading JSON', () => {
  it('reads what JSON.parse reads, for any value and spacing', () => {
    fc.assert(
      fc.property(fc.jsonValue(), fc.constantFrom(0, 1, '\t'), (value, space) => {
        const text = JSON.stringify(value, null, space);
        fc.pre(!text.includes('"__proto__"'));
        expect(parseJson(text).value).toEqual(JSON.parse(text));
      }),
      { seed: 41 },
    );
  });

  it('refuses what JSON.parse refuses, for any damaged text', () => {
    let refused = 0;
    fc.assert(
      fc.property(
        fc.jsonValue({ maxDepth: 2 }),
        fc.nat(),
        fc.constantFrom('', ',', '}', '"', '1', ' ', 'x'),
        (value, seed, put) => {
          const whole = JSON.stringify({ a: value });
          const at = seed % whole.length;
          const text = whole.slice(0, at) + put + whole.slice(at + 1);
          fc.pre(!text.includes('"__proto__"'));
          let expected: unknown;
          try {
            expected = JSON.parse(text);
          } catch {
            refused++;
            expect(refusal(text).code).toMatch(/CASE_NOT_JSON|CASE_KEY_TWICE/);
            return;
          }
          try {
            expect(parseJson(text).value).toEqual(expected);
          } catch (error) {
            // JSON.parse takes the last of two equal keys, and numbers beyond doubles as infinite.
            if (!(error instanceof CaseError)) throw error;
            expect(error.what).toMatch(/given twice|too large/);
          }
        },
      ),
      { seed: 42, numRuns: 300 },
    );
    expect(refused).toBeGreaterThan(100);
  });

  it.each([
    ['{"a": 1,\n "b": }', 2, 'column 7: not JSON: a value'],
    ['{"a": 1,\n}', 2, 'column 1: not JSON: a key in double quotes is expected, "}" is there'],
    ['{"a": 1\n "b": 2}', 2, 'column 2: not JSON: "," or "}" is expected'],
    ["{'a': 1}", 1, 'column 2: not JSON: a key in double quotes'],
    ['{"a": [1, 2}', 1, 'column 12: not JSON: "," or "]" is expected'],
    ['// note\n{}', 1, 'column 1: not JSON'],
    ['{"a": 01}', 1, 'column 7: not JSON'],
    ['{"a": 1.}', 1, 'column 7: not JSON'],
    ['{"a": "x\ny"}', 1, 'column 7: a text in double quotes is not closed'],
    ['{} {}', 1, 'column 4: not JSON: the end of the text'],
    ['', 1, 'the case is empty'],
    ['  \r\n', 2, 'the case is empty'],
    ['{"a": 1e999}', 1, '1e999 is too large to be finite'],
    ['\u0089PNG\0\0', 1, 'this is not text but binary data'],
  ])('refuses %j with line and column', (text, line, what) => {
    const error = refusal(text);
    expect(error.code).toBe('CASE_NOT_JSON');
    expect(error.what).toContain(what);
    expect(error.where).toMatchObject({ file: 'chamber.json', line });
    expect(error.remedy).not.toBe('');
  });

  it('advises to take a last comma away', () => {
    expect(refusal('[1, 2, ]').remedy).toContain('Take away the comma');
    expect(refusal('{"a": 1 ]').remedy).not.toContain('Take away the comma');
  });

  it('refuses a key given twice, naming both lines', () => {
    const error = refusal('{\n"walls": {"a": 1,\n"b": 2,\n"a": 3}}');
    expect(error).toMatchObject({ code: 'CASE_KEY_TWICE', where: { line: 4, key: 'walls.a' } });
    expect(error.what).toContain('first in line 2');
  });

  it('refuses nesting that would exhaust the stack', () => {
    expect(refusal('['.repeat(100_000)).what).toContain('nested deeper than 64');
  });

  it('refuses the key __proto__ and takes constructor as any other', () => {
    expect(refusal('{"__proto__": {}}').what).toContain('__proto__');
    expect(parseJson('{"constructor": 1}').value).toEqual({ constructor: 1 });
  });

  it('skips a byte order mark', () => {
    expect(parseJson('\uFEFF{"a": 1}').value).toEqual({ a: 1 });
  });
});

describe('lines of keys', () => {
  const text = parseJson(
    '\n{\n "walls": {\n  "0.5 mm slot": {"on":\n "a"}},\r\n "asked": [\n 1,\n {"figure":\n "mean"}]}',
  );

  it.each([
    ['', 2],
    ['walls', 3],
    ['walls."0.5 mm slot"', 4],
    ['walls.0.5 mm slot', 4],
    ['walls."0.5 mm slot".on', 4],
    ['walls.missing', 3],
    ['asked', 6],
    ['asked.1.figure', 8],
    ['nowhere.at.all', 2],
  ])('finds %j or its nearest parent', (key, line) => {
    expect(text.lineOf(key)).toBe(line);
  });
});

describe('paths of keys', () => {
  it('come apart as they were joined, for any names', () => {
    fc.assert(
      fc.property(fc.array(fc.string(), { minLength: 1, maxLength: 4 }), (parts) => {
        expect(splitKey(joinKey('', ...parts))).toEqual(parts);
      }),
      { seed: 43 },
    );
  });

  it('show names with spaces in quotes', () => {
    expect(joinKey('', 'drawing', 'holes', 'post 1')).toBe('drawing.holes.post 1');
    expect(showKey('layouts.coated post.coat 1')).toBe('layouts."coated post"."coat 1"');
    expect(showKey('asked.0.figure')).toBe('asked.0.figure');
  });
});
