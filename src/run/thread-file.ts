/**
 * Where the compiled file of a thread lies. Threads run compiled JavaScript only, so from source (vitest reads .ts)
 * it is looked for in `dist/`, which `npm test` builds first.
 *
 * @param name path below `src/`, with the ending `.js`, e.g. 'run/solve-thread.js'
 */
export function threadFile(name: string): URL {
  const here = import.meta.url;
  return new URL(name, new URL(here.endsWith('.ts') ? '../../dist/src/' : '../', here));
}
