import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';

/** Runs every compiled bench whose file name contains the argument, one after the other; all without an argument. */
const wanted = process.argv[2] ?? '';
const ending = '.bench.js';
const names = readdirSync(import.meta.dirname)
  .filter((name) => name.endsWith(ending))
  .map((name) => name.slice(0, -ending.length))
  .sort();
const chosen = names.filter((name) => name.includes(wanted));
if (chosen.length === 0) {
  console.error(`No bench is called like "${wanted}". There are: ${names.join(', ') || 'none yet'}.`);
  process.exitCode = 2;
}
for (const name of chosen) {
  console.log(`\n== ${name}`);
  await import(pathToFileURL(join(import.meta.dirname, `${name}${ending}`)).href);
}
