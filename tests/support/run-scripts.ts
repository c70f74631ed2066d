import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';

/**
 * Runs compiled scripts of one folder, one after the other: those whose name holds `wanted`, all for ''. Says what
 * there is and sets exit status 2 where none fits.
 *
 * @param ending file ending of the scripts, '.bench.js' for instance
 */
export async function runScripts(folder: string, ending: string, wanted: string): Promise<void> {
  const names = readdirSync(folder)
    .filter((name) => name.endsWith(ending))
    .map((name) => name.slice(0, -ending.length))
    .sort();
  const chosen = names.filter((name) => name.includes(wanted));
  if (chosen.length === 0) {
    process.stderr.write(
      `Nothing here is called like "${wanted}". There are: ${names.join(', ') || 'none yet'}.\n`,
    );
    process.exitCode = 2;
  }
  for (const name of chosen) {
    process.stdout.write(`\n== ${name}\n`);
    await import(pathToFileURL(join(folder, `${name}${ending}`)).href);
  }
}
