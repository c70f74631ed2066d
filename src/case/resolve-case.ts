import { joinKey } from './key-path.ts';

/**
 * A case as it was understood: notes and sources left out, texts with units replaced by numbers in the case's units.
 *
 * @param resolved values converted, by key
 */
export function resolveValues(raw: unknown, resolved: ReadonlyMap<string, unknown>, key = ''): unknown {
  if (typeof raw === 'string') return resolved.has(key) ? resolved.get(key) : raw;
  if (Array.isArray(raw)) {
    return resolved.get(key) ?? raw.map((entry, i) => resolveValues(entry, resolved, joinKey(key, i)));
  }
  if (typeof raw !== 'object' || raw === null) return raw;
  const entries = Object.entries(raw)
    .filter(([name]) => !isAside(name))
    .map(([name, entry]) => [name, resolveValues(entry, resolved, joinKey(key, name))] as const);
  const plain = Object.fromEntries(entries);
  const names = Object.keys(plain);
  // { "value": 5 } without a range says no more than 5.
  return names.length === 1 && typeof plain['value'] === 'number' ? plain['value'] : plain;
}

/** What bears on no answer. */
const isAside = (name: string): boolean => name === 'note' || name === 'source' || name === '$schema';

/** The value without the notes and sources anywhere in it. */
export function withoutNotes<T>(raw: T): T {
  return resolveValues(raw, new Map()) as T;
}
