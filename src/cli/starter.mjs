// `npm start`: installs and builds what is missing, answers the demo case in the terminal, serves the page.
import { join } from 'node:path';
import process from 'node:process';
import { pathToFileURL } from 'node:url';
import { buildPage, compile, installIfNeeded, root } from './install.mjs';

const serve = !process.argv.includes('--no-serve');
installIfNeeded();
compile('viewer');
if (serve) buildPage();

const { main } = await import(pathToFileURL(join(root, 'dist/src/cli/main.js')).href);
const status = await main(['solve', join(root, 'meshes/capture-chamber.case.json'), '--start', 'inlet bay']);
process.exitCode = status;
if (status === 0 && serve) process.exitCode = await main(['serve']);
