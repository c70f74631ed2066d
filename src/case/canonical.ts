import { createHash } from 'node:crypto';

/**
 * JSON in the canonical form of RFC 8785: keys sorted by UTF-16 code units, numbers and texts as ECMAScript prints
 * them, no space. Entries that are undefined are left out.
 *
 * @throws {RangeError} for numbers that are not finite and for values that JSON does not have
 */
export function canonicalJson(value: unknown): string {
  if (value === null || typeof value === 'boolean') return String(value);
  if (typeof value === 'string') return JSON.stringify(value);
  if (typeof value === 'number') {
    if (!Number.isFinite(value)) throw new RangeError('a number in a case is not finite');
    return JSON.stringify(value);
  }
  if (Array.isArray(value)) return `[${value.map(canonicalJson).join(',')}]`;
  if (typeof value !== 'object') throw new RangeError(`JSON has no ${typeof value}`);
  const entries = Object.entries(value).filter(([, entry]) => entry !== undefined);
  entries.sort(([a], [b]) => (a < b ? -1 : 1));
  return `{${entries.map(([name, entry]) => `${JSON.stringify(name)}:${canonicalJson(entry)}`).join(',')}}`;
}

/** SHA-256 in lower-case hexadecimal digits. */
export const sha256 = (content: string | Uint8Array): string =>
  createHash('sha256').update(content).digest('hex');

/** Hash of a resolved case: SHA-256 of its canonical form with the hash of each file it uses. */
export const caseHash = (resolved: unknown, files: ReadonlyMap<string, string>): string =>
  sha256(canonicalJson({ case: resolved, files: Object.fromEntries(files) }));
