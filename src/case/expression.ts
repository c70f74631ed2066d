import type { MathNode } from 'mathjs';
import math from 'mathjs/lib/browser/math.js';
import type { CaseCode } from './errors.ts';

/**
 * Expressions and conditions in x and y, in the syntax of the mathjs library. The text is parsed by mathjs, its tree
 * is walked against a list of what is allowed, and a function is made from text that is built from the checked tree
 * alone: numbers are printed anew and names come from the table below. Nothing of the user's text is run.
 */

/** Called with what is wrong at a key and what to do; does not come back. */
export type FailAtKey = (code: CaseCode, what: string, key: string, remedy: string) => never;

export interface Expression {
  readonly at: (x: number, y: number) => number;
  /** Whether x or y occurs. */
  readonly varies: boolean;
}

const maxCharacters = 500;

const variables = new Set(['x', 'y']);
const constants: Readonly<Record<string, string>> = { pi: 'Math.PI', e: 'Math.E' };

/** Allowed functions, what they become, and how many arguments they take. */
const functions: Readonly<
  Record<string, { readonly as: string; readonly least: number; readonly most: number }>
> = {
  ...Object.fromEntries(
    [
      ...['sqrt', 'cbrt', 'exp', 'log10', 'log2', 'abs', 'sign', 'sin', 'cos', 'tan', 'asin', 'acos', 'atan'],
      ...['sinh', 'cosh', 'tanh', 'asinh', 'acosh', 'atanh'],
    ].map((name) => [name, { as: `Math.${name}`, least: 1, most: 1 }]),
  ),
  log: { as: 'Math.log', least: 1, most: 1 },
  ln: { as: 'Math.log', least: 1, most: 1 },
  atan2: { as: 'Math.atan2', least: 2, most: 2 },
  hypot: { as: 'Math.hypot', least: 2, most: 2 },
  pow: { as: 'Math.pow', least: 2, most: 2 },
  min: { as: 'Math.min', least: 2, most: 8 },
  max: { as: 'Math.max', least: 2, most: 8 },
};

const arithmetic = new Set(['+', '-', '*', '/']);
const comparisons = new Set(['<', '<=', '>', '>=', '==']);

const allowed = `numbers, x, y, pi, e, + - * / ^ and ${Object.keys(functions).join(' ')}`;

/** What mathjs gives for each kind of node, as far as it is used here. */
interface Node {
  readonly type: string;
  readonly value?: unknown;
  readonly name?: unknown;
  readonly op?: unknown;
  readonly args?: readonly MathNode[];
  readonly params?: readonly MathNode[];
  readonly conditionals?: readonly string[];
  readonly content?: MathNode;
  readonly fn?: { readonly name?: unknown };
}

const look = (node: MathNode): Node => node as unknown as Node;

/** Stops the walk with what is not allowed and what to do. */
class NotAllowed extends Error {
  readonly remedy: string;
  constructor(what: string, remedy = `Allowed are ${allowed}`) {
    super(what);
    this.remedy = remedy;
  }
}

const quote = (node: MathNode): string => JSON.stringify(node.toString().slice(0, 60));

/** Text of a number-valued tree; every part is in brackets, so that no precedence is left to chance. */
function writeNumber(tree: MathNode): string {
  const node = look(tree);
  switch (node.type) {
    case 'ParenthesisNode':
      if (node.content === undefined) break;
      return writeNumber(node.content);
    case 'ConstantNode': {
      if (typeof node.value !== 'number') break;
      if (!Number.isFinite(node.value)) throw new NotAllowed(`${quote(tree)} is not a finite number`);
      return `(${String(node.value)})`;
    }
    case 'SymbolNode': {
      const name = String(node.name);
      if (variables.has(name)) return name;
      if (Object.hasOwn(constants, name)) return constants[name] ?? '';
      throw new NotAllowed(`${JSON.stringify(name)} is not known in an expression`);
    }
    case 'OperatorNode':
      return writeOperator(tree, String(node.op), node.args ?? []);
    case 'FunctionNode': {
      const name = String(node.fn?.name);
      const args = node.args ?? [];
      const known = Object.hasOwn(functions, name) ? functions[name] : undefined;
      if (known === undefined)
        throw new NotAllowed(`the function ${JSON.stringify(name)} is not allowed here`);
      if (args.length < known.least || args.length > known.most) {
        const count = known.least === known.most ? `${known.least}` : `${known.least} to ${known.most}`;
        throw new NotAllowed(
          `${name} takes ${count} arguments and is given ${args.length}`,
          `Give it ${count}`,
        );
      }
      return `${known.as}(${args.map(writeNumber).join(',')})`;
    }
  }
  throw new NotAllowed(`${quote(tree)} is not allowed in an expression`);
}

function writeOperator(tree: MathNode, op: string, args: readonly MathNode[]): string {
  const [a, b] = args;
  if (a !== undefined && b === undefined && (op === '-' || op === '+')) return `(${op}${writeNumber(a)})`;
  if (a !== undefined && b !== undefined && args.length === 2) {
    if (op === '^') return `Math.pow(${writeNumber(a)},${writeNumber(b)})`;
    if (arithmetic.has(op)) return `(${writeNumber(a)}${op}${writeNumber(b)})`;
  }
  if (comparisons.has(op) || op === 'and' || op === 'or' || op === 'not') {
    throw new NotAllowed(`${quote(tree)} is a condition where a number is expected`);
  }
  throw new NotAllowed(`the operator ${JSON.stringify(op)} is not allowed here`);
}

const writeComparison = (op: string, a: string, b: string): string =>
  op === '==' ? `(Math.abs(${a}-${b})<=tolerance)` : `(${a}${op}${b})`;

/** Text of a tree that is true or false. */
function writeCondition(tree: MathNode): string {
  const node = look(tree);
  const args = node.args ?? [];
  const [a, b] = args;
  if (node.type === 'ParenthesisNode' && node.content !== undefined)
    return `(${writeCondition(node.content)})`;
  if (node.type === 'OperatorNode' && a !== undefined) {
    const op = String(node.op);
    if (op === 'not' && b === undefined) return `(!${writeCondition(a)})`;
    if (b !== undefined && (op === 'and' || op === 'or')) {
      return `(${writeCondition(a)}${op === 'and' ? '&&' : '||'}${writeCondition(b)})`;
    }
    if (b !== undefined && comparisons.has(op)) return writeComparison(op, writeNumber(a), writeNumber(b));
  }
  if (node.type === 'RelationalNode') return writeChain(node);
  throw new NotAllowed(
    `${quote(tree)} is not a condition`,
    `Write one such as "x < 0.5 and y >= 0.1": < <= > >= == and or not between ${allowed}`,
  );
}

/** A chain such as 1 <= x < 2: mathjs names its comparisons by words. */
function writeChain(node: Node): string {
  const words: Readonly<Record<string, string>> = {
    smaller: '<',
    smallerEq: '<=',
    larger: '>',
    largerEq: '>=',
    equal: '==',
  };
  const params = (node.params ?? []).map(writeNumber);
  const parts = (node.conditionals ?? []).map((word, i) => {
    const op = words[word];
    const [a, b] = [params[i], params[i + 1]];
    if (op === undefined || a === undefined || b === undefined)
      throw new NotAllowed(`${word} is not allowed here`);
    return writeComparison(op, a, b);
  });
  return `(${parts.join('&&')})`;
}

/** Signs that people copy from print. */
const plainSigns = (text: string): string =>
  text
    .replace(/[−–]/g, '-')
    .replace(/[×·⋅]/g, '*')
    .replace(/²/g, '^2')
    .replace(/³/g, '^3')
    .replace(/π/g, 'pi')
    .replace(/≤/g, '<=')
    .replace(/≥/g, '>=');

function parseText(text: string, key: string, fail: FailAtKey): MathNode {
  const refuse = (what: string, remedy: string) => fail('EXPRESSION_REFUSED', what, key, remedy);
  if (text.length > maxCharacters) {
    refuse(`the expression has ${text.length} characters`, `Shorten it to ${maxCharacters} at most`);
  }
  if (text.trim() === '') refuse('the expression is empty', 'Give one in x and y, such as "1e-4*(1 + x)"');
  const comma = /\d+,\d+/.exec(text)?.[0];
  if (comma !== undefined) {
    const point = comma.replace(',', '.');
    refuse(
      `${JSON.stringify(comma)} in the expression reads like a decimal comma`,
      `Write ${point}; between the arguments of a function put a space after the comma`,
    );
  }
  try {
    return math.parse(plainSigns(text));
  } catch (cause) {
    const at = /\(char (\d+)\)/.exec(cause instanceof Error ? cause.message : '')?.[1];
    return refuse(
      `the expression ${JSON.stringify(text)} cannot be read${at === undefined ? '' : ` near character ${at}`}`,
      'It follows the syntax of the mathjs library: check brackets and operators, e.g. "1e-4*(1 + 2*x)"',
    );
  }
}

function walk(write: (tree: MathNode) => string, text: string, key: string, fail: FailAtKey): string {
  const tree = parseText(text, key, fail);
  try {
    return write(tree);
  } catch (cause) {
    if (!(cause instanceof NotAllowed)) throw cause;
    return fail('EXPRESSION_REFUSED', cause.message, key, cause.remedy);
  }
}

/**
 * Compiles an expression in x and y (case units) such as `1e-4*(1+x)`. `1/2x` means (1/2)·x, as in mathjs.
 *
 * @param text at most 500 characters
 * @param key path in the case, for messages
 * @throws what `fail` throws, with EXPRESSION_REFUSED
 */
export function compileExpression(text: string, key: string, fail: FailAtKey): Expression {
  let varies = false;
  const body = walk(
    (tree) => {
      tree.traverse((node) => {
        if (look(node).type === 'SymbolNode' && variables.has(String(look(node).name))) varies = true;
      });
      return writeNumber(tree);
    },
    text,
    key,
    fail,
  );
  const at = new Function('x', 'y', `"use strict";return ${body};`) as Expression['at'];
  if (!varies && !Number.isFinite(at(0, 0))) {
    fail('EXPRESSION_REFUSED', `${JSON.stringify(text)} is not a finite number`, key, 'Use smaller powers');
  }
  return { at, varies };
}

/**
 * Compiles a condition on x and y (case units) such as `x < 0.5 and not (y > 0.2)`, with < <= > >= == and or not.
 *
 * @param tolerance `==` holds for numbers that differ by at most this
 * @throws what `fail` throws, with EXPRESSION_REFUSED
 */
export function compileCondition(
  text: string,
  key: string,
  fail: FailAtKey,
  tolerance: number,
): (x: number, y: number) => boolean {
  const body = walk(writeCondition, text, key, fail);
  const made = new Function('tolerance', `"use strict";return (x,y)=>${body};`) as (
    tolerance: number,
  ) => (x: number, y: number) => boolean;
  return made(tolerance);
}
