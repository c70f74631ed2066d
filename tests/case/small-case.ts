import type { Case } from '../../src/case/case.ts';
import type { CaseSource } from '../../src/case/case-context.ts';
import { CaseError } from '../../src/case/errors.ts';
import { readCase } from '../../src/case/read-case.ts';

/** A case that is in order: a unit square in mm and s, two walls, one layout. Parts can be replaced. */
export const smallCase = (parts: Readonly<Record<string, unknown>> = {}): Record<string, unknown> => ({
  tarry: 1,
  units: { length: 'mm', time: 's' },
  drawing: {
    outline: { rectangle: [0, 0, 1, 1] },
    holes: { post: { circle: [0.5, 0.5], radius: 0.1 } },
    innerWalls: {
      baffle: {
        line: [
          [0.2, 0.2],
          [0.2, 0.4],
        ],
      },
    },
    regions: { bay: { rectangle: [0.6, 0, 1, 1] } },
  },
  particle: { diffusion: '1e-4 mm^2/s' },
  walls: {
    floor: { on: 'outline', from: 0, to: 1 },
    lid: { on: 'outline', from: 2, to: 3 },
    coat: { on: 'post' },
    baffle: { on: 'baffle' },
  },
  layouts: { first: { floor: 'absorbing' }, second: { lid: 'absorbing' } },
  ...parts,
});

/** Reads a case given as an object, printed with one key a line. */
export const readObject = (raw: unknown, source: CaseSource = {}): Case =>
  readCase(JSON.stringify(raw, null, 1), { file: 'small.json', ...source });

/** What a case is refused with. */
export function refusalOf(raw: unknown, source: CaseSource = {}): CaseError {
  try {
    if (typeof raw === 'string') readCase(raw, { file: 'small.json', ...source });
    else readObject(raw, source);
  } catch (error) {
    if (error instanceof CaseError) return error;
    throw error;
  }
  throw new Error('the case was not refused');
}
