import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { root } from '../support/run-tarry.ts';

/** Names of the same shape that are not codes of ours: systems' and libraries'. */
const foreign = /^(EADDRINUSE|ERR_|FST_|SIG)/;

it('every code that the source can give stands in README.md, and no other does', () => {
  const inSource = new Set<string>();
  for (const folder of ['mesher', 'solver', 'src']) {
    for (const file of readdirSync(join(root, folder), { recursive: true, encoding: 'utf8' })) {
      if (!file.endsWith('.ts')) continue;
      const text = readFileSync(join(root, folder, file), 'utf8');
      for (const [, code] of text.matchAll(/'([A-Z]+(?:_[A-Z]+)+)'/g)) {
        if (code !== undefined && !foreign.test(code)) inSource.add(code);
      }
      if (/'STOPPED'/.test(text)) inSource.add('STOPPED');
    }
  }
  const readme = readFileSync(join(root, 'README.md'), 'utf8');
  const inReadme = [...readme.matchAll(/^\| `([A-Z_]+)` \|/gm)].map(([, code]) => code);
  expect(inSource.size).toBeGreaterThan(40);
  expect([...inSource].sort()).toEqual([...inReadme].sort());
});

it('the version in the code is the one of package.json', () => {
  const { version } = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8')) as { version: string };
  expect(readFileSync(join(root, 'src/run/version.ts'), 'utf8')).toContain(`'${version}'`);
});
