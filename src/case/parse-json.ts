import { CaseError } from './errors.ts';
import { joinKey, splitKey } from './key-path.ts';

/** A JSON text with the line of each key. */
export interface JsonText {
  readonly value: unknown;
  /** Line (from 1) on which the key or entry at this path starts; the nearest parent that is there, else 1. */
  readonly lineOf: (key: string) => number;
}

/** Deepest nesting that is read: no case needs more, and a deeper one would exhaust the stack. */
const maxDepth = 64;

const isObject = (value: unknown): value is Record<string, unknown> =>
  typeof value === 'object' && value !== null;

/**
 * Reads JSON (RFC 8259) and keeps the line of every key. A key given twice is refused, as are nesting deeper than 64,
 * numbers beyond the range of a double, and the key `__proto__`.
 *
 * @param file named in messages
 * @throws {CaseError} CASE_NOT_JSON with line and column, CASE_KEY_TWICE
 */
export function parseJson(text: string, file?: string): JsonText {
  const reader = new JsonReader(text, file);
  const value = reader.readDocument();
  return { value, lineOf: (key) => reader.lineOfKey(value, splitKey(key), key) };
}

class JsonReader {
  private at: number;
  private readonly text: string;
  private readonly file: string | undefined;
  private readonly offsets = new WeakMap<object, Map<string, number>>();
  private lineStarts: number[] | undefined;

  constructor(text: string, file: string | undefined) {
    this.text = text;
    this.file = file;
    this.at = text.startsWith('\uFEFF') ? 1 : 0;
  }

  readDocument(): unknown {
    const nul = this.text.indexOf('\0');
    if (nul >= 0) this.refuse(nul, 'this is not text but binary data', 'Give a case file: one JSON object');
    this.skipSpace();
    if (this.at === this.text.length) this.refuse(this.at, 'the case is empty', 'Give one JSON object');
    const value = this.readValue(0, '');
    this.skipSpace();
    if (this.at < this.text.length) this.refuseHere('the end of the text');
    return value;
  }

  lineOfKey(root: unknown, parts: readonly string[], key: string): number {
    let line = this.lineAt(this.text.search(/[^\s\uFEFF]/)).line;
    let value = root;
    let rest = key;
    for (let i = 0; i < parts.length && isObject(value); i++) {
      // A caller may have joined a name with a dot in it by hand: then the rest as a whole is tried too.
      const known = this.offsets.get(value);
      const name = [parts[i] ?? '', rest].find((each) => known?.has(each));
      const offset = name === undefined ? undefined : known?.get(name);
      if (name === undefined || offset === undefined) break;
      line = this.lineAt(offset).line;
      value = value[name];
      rest = parts.slice(i + 1).join('.');
    }
    return line;
  }

  private readValue(depth: number, key: string): unknown {
    if (depth > maxDepth) {
      this.refuse(
        this.at,
        `nested deeper than ${maxDepth}`,
        'Give the case in fewer levels; the deepest it needs is 8',
      );
    }
    const next = this.text[this.at];
    if (next === '{') return this.readObject(depth, key);
    if (next === '[') return this.readArray(depth, key);
    if (next === '"') return this.readString();
    for (const [word, value] of [
      ['true', true],
      ['false', false],
      ['null', null],
    ] as const) {
      if (this.text.startsWith(word, this.at)) {
        this.at += word.length;
        return value;
      }
    }
    return this.readNumber();
  }

  private readObject(depth: number, key: string): Record<string, unknown> {
    const result: Record<string, unknown> = {};
    const offsets = new Map<string, number>();
    this.offsets.set(result, offsets);
    this.at++;
    this.skipSpace();
    if (this.take('}')) return result;
    for (;;) {
      this.skipSpace();
      const start = this.at;
      if (this.text[start] !== '"') this.refuseHere('a key in double quotes');
      const name = this.readString();
      const path = joinKey(key, name);
      if (name === '__proto__')
        this.refuse(start, 'the name __proto__ cannot be used', 'Choose another name');
      if (offsets.has(name)) {
        const first = this.lineAt(offsets.get(name) ?? 0).line;
        throw new CaseError(
          'CASE_KEY_TWICE',
          `the key is given twice, first in line ${first}`,
          this.place(start, path),
          'Keep one of the two',
        );
      }
      offsets.set(name, start);
      this.skipSpace();
      if (!this.take(':')) this.refuseHere('":" after the key');
      this.skipSpace();
      result[name] = this.readValue(depth + 1, path);
      this.skipSpace();
      if (this.take('}')) return result;
      if (!this.take(',')) this.refuseHere('"," or "}"');
    }
  }

  private readArray(depth: number, key: string): unknown[] {
    const result: unknown[] = [];
    const offsets = new Map<string, number>();
    this.at++;
    this.skipSpace();
    if (this.take(']')) return result;
    for (;;) {
      this.skipSpace();
      const start = this.at;
      const value = this.readValue(depth + 1, key);
      // Lines are kept for entries that hold something; a list of numbers would cost more than it helps.
      if (typeof value !== 'number') offsets.set(String(result.length), start);
      result.push(value);
      this.skipSpace();
      if (this.take(']')) break;
      if (!this.take(',')) this.refuseHere('"," or "]"');
    }
    if (offsets.size > 0) this.offsets.set(result, offsets);
    return result;
  }

  private readString(): string {
    let end = this.at + 1;
    for (; end < this.text.length && this.text[end] !== '"'; end++) if (this.text[end] === '\\') end++;
    try {
      const value = String(JSON.parse(this.text.slice(this.at, end + 1)));
      this.at = end + 1;
      return value;
    } catch {
      return this.refuse(
        this.at,
        'a text in double quotes is not closed or holds a line break or a wrong escape',
        'Close it on its line; write \\" for a quote and \\\\ for a backslash',
      );
    }
  }

  private readNumber(): number {
    const pattern = /-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?(?![\w.])/y;
    pattern.lastIndex = this.at;
    const found = pattern.exec(this.text)?.[0];
    if (found === undefined)
      this.refuseHere('a value: a number, a text in double quotes, an object or a list');
    const value = Number(found);
    if (!Number.isFinite(value)) {
      this.refuse(this.at, `${found} is too large to be finite`, 'Give a number below 1.8e308');
    }
    this.at += found.length;
    return value;
  }

  private take(character: string): boolean {
    if (this.text[this.at] !== character) return false;
    this.at++;
    return true;
  }

  private skipSpace(): void {
    for (; this.at < this.text.length; this.at++) {
      const code = this.text.charCodeAt(this.at);
      if (code !== 0x20 && code !== 0x0a && code !== 0x0d && code !== 0x09) return;
    }
  }

  private lineAt(offset: number): { line: number; column: number } {
    this.lineStarts ??= [
      0,
      ...[...this.text.matchAll(/\r\n|\n|\r/g)].map((end) => end.index + end[0].length),
    ];
    let low = 0;
    let high = this.lineStarts.length;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if ((this.lineStarts[middle] ?? 0) <= offset) low = middle;
      else high = middle;
    }
    return { line: low + 1, column: Math.max(offset, 0) - (this.lineStarts[low] ?? 0) + 1 };
  }

  private place(offset: number, key?: string) {
    return {
      line: this.lineAt(offset).line,
      ...(this.file === undefined ? {} : { file: this.file }),
      ...(key === undefined ? {} : { key }),
    };
  }

  private refuseHere(expected: string): never {
    const found = this.text.slice(this.at, this.at + 12).split(/\s/)[0] ?? '';
    const commaTooMany =
      /^[}\]]/.test(found) && /,\s*$/.test(this.text.slice(Math.max(0, this.at - 200), this.at));
    this.refuse(
      this.at,
      `not JSON: ${expected} is expected, ${found === '' ? 'the text ends' : `${JSON.stringify(found)} is there`}`,
      commaTooMany
        ? 'Take away the comma before it: JSON has none after the last entry'
        : 'Check brackets, commas and quotes near this place; JSON knows no comments',
    );
  }

  private refuse(offset: number, what: string, remedy: string): never {
    const { column } = this.lineAt(offset);
    throw new CaseError('CASE_NOT_JSON', `column ${column}: ${what}`, this.place(offset), remedy);
  }
}
