import type { Point } from '../../mesher/index.ts';
import type { DrawingContext } from '../../src/case/drawing-context.ts';
import { CaseError } from '../../src/case/errors.ts';
import { parseQuantity } from '../../src/case/units.ts';

/** Reading of a drawing in millimetres without a case around it; `files` stand for those beside the case. */
export function drawingContext(files: Readonly<Record<string, string>> = {}): DrawingContext {
  const units = { length: 'mm', time: 's' };
  const fail = (code: string, what: string, key: string, remedy: string, at?: readonly Point[]): never => {
    throw new CaseError(code, what, { key, ...(at ? { at } : {}) }, remedy);
  };
  return {
    units,
    fail,
    quantity: (raw, dimension, key) =>
      typeof raw === 'number'
        ? raw
        : parseQuantity(String(raw), dimension, units, (code, what, remedy) => fail(code, what, key, remedy)),
    readFile: (name) => files[name] ?? fail('FILE_NOT_READ', 'not there', 'drawing.file', 'Give it'),
  };
}

/** The refusal that a call ends in. */
export function refusalOf(run: () => unknown): CaseError {
  try {
    run();
  } catch (error) {
    if (error instanceof CaseError) return error;
    throw error;
  }
  throw new Error('was not refused');
}
