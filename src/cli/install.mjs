// Plain JavaScript without dependencies: it runs before anything is installed.
import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import process from 'node:process';
import { fileURLToPath } from 'node:url';

export const root = fileURLToPath(new URL('../..', import.meta.url));

/** Runs one program with its output on this terminal; ends this process with its status when it fails. */
export function run(program, args, options = {}) {
  const { status, error } = spawnSync(program, args, { cwd: root, stdio: 'inherit', ...options });
  if (error) {
    process.stderr.write(`tarry: ${program} could not be started (${error.message}). Is it installed?\n`);
    process.exit(1);
  }
  if (status !== 0) process.exit(status ?? 1);
}

/** The lock file as it was when node_modules was last installed from it. */
function lockHash() {
  return createHash('sha256')
    .update(readFileSync(join(root, 'package-lock.json')))
    .digest('hex');
}

/** Installs the packages of the lock file unless that was done before. */
export function installIfNeeded() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major < 20 || (major === 20 && minor < 19)) {
    process.stderr.write(`tarry needs Node 20.19 or newer; this is ${process.versions.node}.\n`);
    process.exit(1);
  }
  const stamp = join(root, 'node_modules', '.tarry-installed');
  if (existsSync(stamp) && readFileSync(stamp, 'utf8') === lockHash()) return;
  process.stderr.write('Installing packages …\n');
  run('npm', ['ci', '--no-audit', '--no-fund', '--loglevel=error'], { stdio: ['ignore', 2, 2] });
  writeFileSync(stamp, lockHash());
}

const bin = (name) => join(root, 'node_modules', '.bin', name);
const onlyMessages = { stdio: ['ignore', 2, 2] };

/** Compiles one project and those it builds on, or all; quick when nothing changed. */
export function compile(project = '.') {
  run(bin('tsc'), ['-b', project], onlyMessages);
}

/** Builds the page into dist/page. */
export function buildPage() {
  run(bin('vite'), ['build', '--config', 'viewer/vite.config.ts', '--logLevel', 'error'], onlyMessages);
}

/** Runs a program that an installed package brings. */
export function runInstalled(name, args) {
  run(bin(name), args);
}
