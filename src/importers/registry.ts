import { CaseError } from '../case/errors.ts';
import type { FoundDrawing } from './found-shape.ts';
import { readSvg } from './svg.ts';

type Reader = (text: string, file: string) => FoundDrawing;

/** Which reader reads which kind of drawing, by the end of the file's name. */
const readers: ReadonlyMap<string, Reader> = new Map([['.svg', readSvg]]);

/** Ends of file names that can be read. */
export const drawingKinds: readonly string[] = [...readers.keys()];

/**
 * What a drawing file holds, whatever its format.
 *
 * @param name of the file; its ending says the format
 * @throws {CaseError} DRAWING_NOT_READ, or what the format's reader finds wrong
 */
export function readDrawing(text: string, name: string): FoundDrawing {
  const ending = /\.[a-z0-9]+$/i.exec(name)?.[0].toLowerCase() ?? '';
  const reader = readers.get(ending);
  if (!reader) {
    throw new CaseError(
      'DRAWING_NOT_READ',
      `${name} is no drawing that can be read`,
      { file: name },
      `Give a file that ends in ${drawingKinds.join(' or ')}`,
    );
  }
  return reader(text, name);
}
