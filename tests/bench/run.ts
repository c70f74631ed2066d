import { runScripts } from '../support/run-scripts.ts';

/** `npm run bench -- NAME`: every bench whose file name contains NAME; all without it. */
await runScripts(import.meta.dirname, '.bench.js', process.argv[2] ?? '');
