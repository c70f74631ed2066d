import { existsSync } from 'node:fs';
import { type Browser, chromium } from 'playwright-core';

/** Flags under which headless Chromium draws WebGL without a GPU and asks nothing of any network. */
const flags = [
  '--no-sandbox',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
  '--use-angle=swiftshader',
  '--enable-unsafe-swiftshader',
];

/** A headless Chromium: the one named by TARRY_BROWSER, Debian's, or the one that a package carries. */
export async function launchBrowser(): Promise<Browser> {
  return chromium.launch({ executablePath: await browserPath(), headless: true, args: flags });
}

async function browserPath(): Promise<string> {
  const named = process.env['TARRY_BROWSER'];
  if (named !== undefined) return named;
  if (existsSync('/usr/bin/chromium')) return '/usr/bin/chromium';
  const packaged = await import('@sparticuz/chromium');
  return packaged.default.executablePath();
}
