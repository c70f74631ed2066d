/**
 * Paths of keys in a case file. Joined by dots as the JSON of a refusal gives them (`drawing.holes.post 1`); a part
 * that holds a dot or a quote itself is put in quotes. In messages every part with a space is in quotes too.
 */

const joinPart = (part: string): string => (/[."]/.test(part) || part === '' ? JSON.stringify(part) : part);
const showPart = (part: string): string => (/^[\w$-]+$/.test(part) ? part : JSON.stringify(part));

/** Joins keys and array indices to one path, leaving out empty parents: `joinKey('', 'a', 0)` is `a.0`. */
export const joinKey = (parent: string, ...parts: readonly (string | number)[]): string =>
  [...(parent === '' ? [] : [parent]), ...parts.map((part) => joinPart(String(part)))].join('.');

/** Takes a path apart into its keys; what `joinKey` made comes back as it was. */
export function splitKey(key: string): string[] {
  if (key === '') return [];
  const parts: string[] = [];
  const pattern = /("(?:[^"\\]|\\.)*"|[^.]*)(?:\.|$)/y;
  while (pattern.lastIndex <= key.length) {
    const found = pattern.exec(key)?.[1];
    if (found === undefined) return key.split('.');
    parts.push(found.startsWith('"') ? unquote(found) : found);
    if (pattern.lastIndex === key.length && !key.endsWith('.')) break;
  }
  return parts;
}

function unquote(part: string): string {
  try {
    return String(JSON.parse(part));
  } catch {
    return part;
  }
}

/** The path as messages print it: `layouts."coated post"."coat 1"`. */
export const showKey = (key: string): string => splitKey(key).map(showPart).join('.');
