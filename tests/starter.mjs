// `npm test`: installs what is missing, gets a browser, builds, lints, type-checks and runs every test.
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import process from 'node:process';
import { buildPage, compile, installIfNeeded, runInstalled } from '../src/cli/install.mjs';

/** A Chromium for the browser tests: one that is there, else Debian's where this is root, else the packaged one. */
function getBrowser() {
  if (process.env.TARRY_BROWSER || existsSync('/usr/bin/chromium')) return;
  if (process.getuid?.() !== 0) return; // tests/support/browser.ts unpacks @sparticuz/chromium then
  const apt = (...args) =>
    spawnSync('apt-get', args, {
      stdio: ['ignore', 'ignore', 2],
      env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' },
    });
  process.stderr.write('Installing a browser for the browser tests …\n');
  apt('update', '-qq');
  apt('install', '-y', '-qq', '--no-install-recommends', 'chromium', 'fonts-liberation');
}

installIfNeeded();
getBrowser();
compile();
buildPage();
runInstalled('biome', ['ci', '.', '--diagnostic-level=error']);
runInstalled('vitest', ['run', '--config', 'tests/vitest.config.ts', ...process.argv.slice(2)]);
