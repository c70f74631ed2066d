import { type ChildProcess, spawn } from 'node:child_process';
import { join } from 'node:path';
import { root } from './run-tarry.ts';

/** A running `tarry serve` on a free port of this machine. */
export interface Serving {
  readonly address: string;
  readonly process: ChildProcess;
  readonly end: () => Promise<void>;
}

/** Starts the built service as a user would and waits until it says where it is. */
export async function startServing(words: readonly string[] = []): Promise<Serving> {
  const child = spawn(
    process.execPath,
    [join(root, 'dist/src/cli/main.js'), 'serve', '--port', '0', ...words],
    {
      stdio: ['ignore', 'pipe', 'pipe'],
    },
  );
  const ended = new Promise<void>((resolve) => child.once('exit', () => resolve()));
  const address = await new Promise<string>((resolve, reject) => {
    let said = '';
    const hear = (part: Buffer): void => {
      said += part.toString();
      const found = /http:\/\/[^\s/]+/.exec(said)?.[0];
      if (found !== undefined) resolve(found);
    };
    child.stdout.on('data', hear);
    child.stderr.on('data', hear);
    child.once('exit', (code) => reject(new Error(`tarry serve ended with status ${code}: ${said}`)));
  });
  const end = async (): Promise<void> => {
    child.kill('SIGINT');
    await ended;
  };
  return { address, process: child, end };
}
