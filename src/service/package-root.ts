import { fileURLToPath } from 'node:url';

/** Folder of the package, with a separator at its end, whether this runs compiled (dist/src/service) or from source. */
export function packageRoot(): string {
  const here = import.meta.url;
  return fileURLToPath(new URL(here.endsWith('.ts') ? '../../' : '../../../', here));
}
