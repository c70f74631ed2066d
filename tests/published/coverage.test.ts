import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { listedChecks } from './listed.ts';

/** Checks that no test of this folder makes, each with what stands in the way or where it is made instead. */
const elsewhere: Readonly<Record<string, string>> = {
  'rel-scale-length': 'tests/laws',
  'rel-scale-D': 'tests/laws',
  'rel-rotate': 'tests/laws',
  'rel-positive': 'tests/laws',
  'rel-monotone-wall': 'tests/laws',
  'rel-shares': 'tests/laws',
  'rel-conv': 'tests/bench/rates.bench.ts',
};

it('every listed check is either made in this folder or stands in the list of those that are not, with the reason', () => {
  const files = readdirSync(import.meta.dirname).filter((name) => name.endsWith('.test.ts'));
  const texts = files
    .filter((name) => name !== 'coverage.test.ts' && name !== 'closed-forms.test.ts')
    .map((name) => readFileSync(join(import.meta.dirname, name), 'utf8'));
  const text = texts.join('\n');
  // Families are named by a pattern in the code: `rect-A-${a}` and `tri-iso-${apex}`.
  const made = listedChecks.filter(({ id }) => {
    const family = id.replace(/^(rect-A-|tri-iso-).*/, '$1${');
    const whole = new RegExp(`(?<![\\w.-])${escaped(id)}(?![\\w.-])`);
    return whole.test(text) || (family !== id && text.includes(family));
  });
  expect(texts.length).toBeGreaterThanOrEqual(8);
  expect(listedChecks).toHaveLength(100);
  const ids = made.map(({ id }) => id);
  expect(ids.filter((id) => id in elsewhere)).toEqual([]);
  expect(listedChecks.map(({ id }) => id).filter((id) => !ids.includes(id) && !(id in elsewhere))).toEqual(
    [],
  );
  expect(ids.length + Object.keys(elsewhere).length).toBe(100);
});

function escaped(text: string): string {
  return text.replace(/[.*+?^${}()|[\]\\]/g, '\\$&');
}
