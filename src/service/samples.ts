import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';

/** A case that comes with the program. */
export interface Sample {
  readonly name: string;
  readonly title: string;
  /** Name of its case file. */
  readonly file: string;
  readonly text: string;
  /** The drawing files it names. */
  readonly files: Readonly<Record<string, string>>;
}

const ENDING = '.case.json';

/**
 * The sample cases of a folder by name, read once: later requests only look names up here, so none reaches the file
 * system. An empty or missing folder gives none.
 */
export function findSamples(folder: string): ReadonlyMap<string, Sample> {
  const samples = new Map<string, Sample>();
  const there = listFiles(folder);
  for (const file of there) {
    if (!file.endsWith(ENDING)) continue;
    const text = readFileSync(join(folder, file), 'utf8');
    const name = file.slice(0, -ENDING.length);
    const { title, drawing } = summary(text);
    const files =
      drawing !== undefined && there.includes(drawing)
        ? { [drawing]: readFileSync(join(folder, drawing), 'utf8') }
        : {};
    samples.set(name, { name, title: title ?? name, file, text, files });
  }
  return samples;
}

function listFiles(folder: string): string[] {
  try {
    return readdirSync(folder).sort();
  } catch {
    return [];
  }
}

/** Title and drawing file of a case, as far as they can be seen without reading it as one. */
function summary(text: string): { title?: string; drawing?: string } {
  let parsed: unknown;
  try {
    parsed = JSON.parse(text);
  } catch {
    return {};
  }
  const { title, drawing } = keysOf(parsed);
  const { file } = keysOf(drawing);
  return {
    ...(typeof title === 'string' && { title }),
    ...(typeof file === 'string' && { drawing: file }),
  };
}

function keysOf(value: unknown): Record<string, unknown> {
  return typeof value === 'object' && value !== null ? { ...value } : {};
}
