import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { canonicalJson, caseHash, sha256 } from '../../src/case/canonical.ts';

describe('the canonical form of RFC 8785', () => {
  it('is that of the example in section 3.2.2 of the RFC (recalled)', () => {
    const value = {
      numbers: [Number('333333333.33333329'), 1e30, 4.5, 2e-3, 0.000000000000000000000000001],
      string: '\u20ac$\u000F\u000aA\'\u0042\u0022\u005c\\\\"/',
      literals: [null, true, false],
    };
    expect(canonicalJson(value)).toBe(
      '{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\\u000f\\nA\'B\\"\\\\\\\\\\\\\\"/"}',
    );
  });

  it('sorts keys by UTF-16 code units, as the example in section 3.2.3 (recalled)', () => {
    const value = {
      '\u20ac': 'Euro Sign',
      '\r': 'Carriage Return',
      '\ufb33': 'Hebrew Letter Dalet With Dagesh',
      '1': 'One',
      '\ud83d\ude00': 'Emoji: Grinning Face',
      '\u0080': 'Control',
      '\u00f6': 'Latin Small Letter O With Diaeresis',
    };
    const keys = [...canonicalJson(value).matchAll(/:"([^"]*)"/g)].map((found) => found[1]?.split(' ')[0]);
    expect(keys).toEqual(['Carriage', 'One', 'Control', 'Latin', 'Euro', 'Emoji:', 'Hebrew']);
  });

  it('does not depend on the order in which keys were written, and parses back', () => {
    const turned = (value: unknown): unknown =>
      typeof value === 'object' && value !== null && !Array.isArray(value)
        ? Object.fromEntries(
            Object.entries(value)
              .reverse()
              .map(([name, entry]) => [name, turned(entry)]),
          )
        : value;
    fc.assert(
      fc.property(fc.jsonValue({ noUnicodeString: false }), (value) => {
        fc.pre(!JSON.stringify(value).includes('__proto__'));
        expect(canonicalJson(turned(value))).toBe(canonicalJson(value));
        expect(JSON.parse(canonicalJson(value))).toEqual(JSON.parse(JSON.stringify(value)));
      }),
      { seed: 51 },
    );
  });

  it('refuses numbers that are not finite', () => {
    expect(() => canonicalJson({ a: Number.NaN })).toThrow(RangeError);
  });

  it('hashes the case and each file it uses', () => {
    const expected = createHash('sha256').update('{"case":{"a":1},"files":{"b.svg":"00"}}').digest('hex');
    expect(caseHash({ a: 1 }, new Map([['b.svg', '00']]))).toBe(expected);
    // SHA-256 of "abc": FIPS 180-2, appendix B.1.
    expect(sha256('abc')).toBe('ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad');
  });
});
