import { runScripts } from '../support/run-scripts.ts';

/** `npm run outside -- NAME`: comparisons with other programs whose file name contains NAME; all without it. */
await runScripts(import.meta.dirname, '.outside.js', process.argv[2] ?? '');
