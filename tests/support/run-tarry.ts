import { spawnSync } from 'node:child_process';
import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** Root of the repository. */
export const root = fileURLToPath(new URL('../..', import.meta.url));

export interface Ran {
  readonly status: number | null;
  readonly out: string;
  readonly err: string;
}

/** Runs the built command line as a child process; `npm test` builds it first. */
export function runTarry(words: readonly string[], input?: string): Ran {
  const { status, stdout, stderr } = spawnSync(
    process.execPath,
    [join(root, 'dist/src/cli/main.js'), ...words],
    { encoding: 'utf8', timeout: 60_000, ...(input !== undefined && { input }) },
  );
  return { status, out: stdout, err: stderr };
}

/** Writes one file into a fresh folder and returns its path. */
export function temporaryFile(name: string, content: string | Uint8Array): string {
  const path = join(mkdtempSync(join(tmpdir(), 'tarry-')), name);
  writeFileSync(path, content);
  return path;
}

/** A small whole case: unit square, D = 1, left side absorbing; `change` alters a copy of it. */
export function squareCase(change: (theCase: Record<string, unknown>) => void = () => undefined): string {
  const theCase: Record<string, unknown> = {
    tarry: 1,
    title: 'square',
    units: { length: 'mm', time: 's' },
    drawing: { outline: { rectangle: [0, 0, 1, 1] } },
    particle: { diffusion: '1 mm^2/s' },
    walls: { left: { on: 'outline', from: 3, to: 4 } },
    layouts: { one: { left: 'absorbing' } },
  };
  change(theCase);
  return JSON.stringify(theCase, undefined, 2);
}
