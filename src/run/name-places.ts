import { MesherError } from '../../mesher/index.ts';
import { SolverError } from '../../solver/index.ts';
import type { Case, Layout } from '../case/case.ts';
import { CaseError } from '../case/errors.ts';
import type { LayoutDomain } from '../case/layout-domain.ts';

/**
 * Runs work on a layout; what mesher or solver refuse becomes a {@link CaseError} that says which layout and, by
 * their names in the drawing, which loops and walls it is about. Other errors pass through.
 */
export function inCaseTerms<T>(theCase: Case, layout: Layout, domain: LayoutDomain, work: () => T): T {
  try {
    return work();
  } catch (error) {
    if (error instanceof MesherError) {
      throw new CaseError(
        error.code,
        error.what,
        {
          ...(error.where.at && { at: error.where.at }),
          key: loopKey(theCase, error.where.loops?.[0]),
        },
        error.remedy,
        error,
      );
    }
    if (error instanceof SolverError) {
      const names = wallNames(domain, error.where.tags ?? []);
      const walls = names.length > 0 ? ` (its walls: ${names.join(', ')})` : '';
      throw new CaseError(
        error.code,
        `${error.what}${walls}`,
        { ...(error.where.at && { at: error.where.at }), key: `layouts.${layout.name}` },
        error.remedy,
        error,
      );
    }
    throw error;
  }
}

function loopKey(theCase: Case, loop: string | undefined): string {
  if (loop === undefined || loop === theCase.drawing.outline.name) return 'drawing.outline';
  if (theCase.drawing.holes.some((hole) => hole.name === loop)) return `drawing.holes.${loop}`;
  if (theCase.drawing.innerWalls.some((wall) => wall.name === loop)) return `drawing.innerWalls.${loop}`;
  return 'drawing';
}

/** The walls or, where unnamed, the loops that the tags belong to; each once, at most six. */
function wallNames(domain: LayoutDomain, tags: readonly number[]): string[] {
  const names = new Set<string>();
  for (const tag of tags) {
    const piece = domain.pieces.get(tag);
    if (piece) names.add(piece.wall ?? piece.loop);
  }
  const list = [...names];
  return list.length > 6 ? [...list.slice(0, 6), `${list.length - 6} more`] : list;
}
