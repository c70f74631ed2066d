import fc from 'fast-check';
import { evaluate } from 'mathjs';
import { describe, expect, it } from 'vitest';
import { compileCondition, compileExpression, type FailAtKey } from '../../src/case/expression.ts';

const fail: FailAtKey = (code, what, key, remedy) => {
  throw new Error(`${code} ${key}: ${what}. ${remedy}`);
};
const compile = (text: string) => compileExpression(text, 'k', fail);
const at = (text: string, x = 0, y = 0) => compile(text).at(x, y);
const holds = (text: string, x = 0, y = 0, tolerance = 1e-9) =>
  compileCondition(text, 'k', fail, tolerance)(x, y);

describe('expressions', () => {
  it.each([
    ['1e-4*(1+x)', 1, 0, 2e-4],
    ['-x^2', 3, 0, -9],
    ['2^3^2', 0, 0, 512],
    ['1/2x', 3, 0, 1.5],
    ['2x y', 3, 5, 30],
    ['exp(-(x^2 + y^2))', 1, 1, Math.exp(-2)],
    ['max(0, x - 1)', 3, 0, 2],
    ['atan2(y, x)', 1, 1, Math.PI / 4],
    ['ln(e) + log(e) + pi', 0, 0, 2 + Math.PI],
    ['x² − 3·y', 2, 1, 1],
    ['10 - 2 - 3', 0, 0, 5],
    ['8 / 4 / 2', 0, 0, 1],
  ])('computes %s', (text, x, y, expected) => {
    expect(at(text, x, y)).toBeCloseTo(expected, 12);
  });

  it('knows whether place matters', () => {
    expect(compile('2*pi').varies).toBe(false);
    expect(compile('2*y').varies).toBe(true);
  });
});

describe('expressions against the library', () => {
  it('agrees with the mathjs library on random trees of arithmetic', () => {
    // mathjs's own evaluator is the reference; both run the same IEEE operations in the same order.
    const leaf = fc.oneof(fc.constantFrom('x', 'y', 'pi'), fc.integer({ min: 0, max: 9 }).map(String));
    const tree = fc.letrec<{ node: string }>((tie) => ({
      node: fc.oneof(
        { maxDepth: 4, withCrossShrink: true },
        leaf,
        fc
          .tuple(tie('node'), fc.constantFrom(' + ', ' - ', ' * ', ' / '), tie('node'))
          .map((parts) => parts.join('')),
        tie('node').map((inner) => `(${inner})`),
        tie('node').map((inner) => `-${inner}`),
        fc
          .tuple(fc.constantFrom('sin', 'exp', 'abs', 'cos'), tie('node'))
          .map(([f, inner]) => `${f}(${inner})`),
        tie('node').map((inner) => `(${inner})^2`),
      ),
    })).node;
    let compared = 0;
    fc.assert(
      fc.property(
        tree,
        fc.double({ min: -3, max: 3, noNaN: true }),
        fc.double({ min: -3, max: 3, noNaN: true }),
        (text, x, y) => {
          fc.pre(text.length <= 500 && !/\d \d/.test(text));
          const expected = evaluate(text, { x, y }) as number;
          let value = expected;
          try {
            value = at(text, x, y);
          } catch (error) {
            // A text without x and y that is not finite is refused.
            expect(String(error)).toContain('is not a finite number');
            return;
          }
          compared++;
          if (Number.isFinite(expected))
            expect(Math.abs(value - expected)).toBeLessThanOrEqual(1e-12 * Math.abs(expected));
          else expect(Number.isFinite(value)).toBe(false);
        },
      ),
      { seed: 31, numRuns: 300 },
    );
    expect(compared).toBeGreaterThan(200);
  });
});

describe('what is not an expression', () => {
  it.each([
    'x = 1',
    'x.constructor',
    'x["constructor"]',
    'f(a) = a',
    '"text"',
    "'text'",
    '[1, 2]',
    '{a: 1}',
    'import("fs")',
    'evaluate("1")',
    'parse("x")',
    'createUnit("a")',
    'constructor(1)',
    'toString()',
    '__proto__',
    'sin.constructor("return 1")()',
    'x; y',
    '1:3',
    'x ? 1 : 2',
    'x < 1',
    'true',
    'i',
    'z',
    '3 cm',
    'x to y',
    '5!',
    "x'",
    '5 mod 3',
    'random()',
    'x & 1',
    'NaN',
    'Infinity',
    '1e999',
    '9^9^9',
    '1/0',
    'sin()',
    'sin(1, 2)',
    'min(1)',
    'process',
    'globalThis',
    '(x',
    'x +',
    '',
    '   ',
    '$x',
    '`x`',
    '\\u0078',
    '0,5*x',
    'max(0,5)',
  ])('refuses %j', (text) => {
    expect(() => compile(text)).toThrow('EXPRESSION_REFUSED k:');
  });
});

describe('refusals of expressions', () => {
  it('refuses more than 500 characters and says how many there are', () => {
    expect(compile(`${'x+'.repeat(249)}x`).at(1, 0)).toBe(250);
    expect(() => compile(`${'x+'.repeat(250)}x`)).toThrow('the expression has 501 characters');
  });

  it('refuses a decimal comma with the point form', () => {
    expect(() => compile('1e-4*(1 + 0,5*x)')).toThrow('Write 0.5; between the arguments');
  });

  it('names what is allowed and never passes on a message of the library', () => {
    expect(() => compile('sinus(x)')).toThrow(/"sinus" is not allowed here\. Allowed are numbers, x, y/);
    expect(() => compile('x + * 2')).toThrow(
      /cannot be read near character \d+\. It follows the syntax of the mathjs/,
    );
  });

  it('refuses or computes any text, and runs none of it', () => {
    const pieces = fc.constantFrom(
      'x',
      'y',
      '1',
      '(',
      ')',
      '+',
      '-',
      '^',
      ' ',
      'sin',
      '.',
      '[',
      ']',
      '"',
      '=',
      ';',
      'this',
      'e',
      ',',
    );
    fc.assert(
      fc.property(fc.array(pieces, { maxLength: 12 }), (parts) => {
        let value: unknown = 0;
        try {
          value = at(parts.join(''), 1, 1);
        } catch (error) {
          expect(String(error)).toContain('EXPRESSION_REFUSED');
        }
        expect(typeof value).toBe('number');
      }),
      { seed: 32, numRuns: 500 },
    );
  });
});

describe('conditions', () => {
  it('knows comparisons, and, or, not and chains', () => {
    expect(holds('x < 0.5 and y >= 0.1', 0.4, 0.1)).toBe(true);
    expect(holds('x < 0.5 and y >= 0.1', 0.6, 0.1)).toBe(false);
    expect(holds('x > 1 or not (y > 1)', 0, 0)).toBe(true);
    expect(holds('not (x > 1 or y > 1)', 0, 2)).toBe(false);
    expect(holds('1 <= x < 2', 1)).toBe(true);
    expect(holds('1 <= x < 2', 2)).toBe(false);
    expect(holds('x ≤ 1', 1)).toBe(true);
    expect(holds('x^2 + y^2 < 1', 0.6, 0.6)).toBe(true);
  });

  it('takes == within the tolerance', () => {
    expect(holds('x == 1', 1.0005, 0, 1e-3)).toBe(true);
    expect(holds('x == 1', 1.0005, 0, 1e-4)).toBe(false);
    expect(holds('0 == x', -1e-10)).toBe(true);
  });

  it.each([
    'x',
    'x + 1',
    '1',
    'true',
    '(x < 1) + 1',
    'x < (y < 1)',
    'x = 1',
    'x != 1',
    'x < "a"',
    'f(x) < 1 and',
  ])('refuses %j', (text) => {
    expect(() => holds(text)).toThrow('EXPRESSION_REFUSED k:');
  });
});
