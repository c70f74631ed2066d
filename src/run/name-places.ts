import { MesherError, type Point } from '../../mesher/index.ts';
import { SolverError } from '../../solver/index.ts';
import type { Case, Layout } from '../case/case.ts';
import { CaseError } from '../case/errors.ts';
import { joinKey } from '../case/key-path.ts';
import type { LayoutDomain } from '../case/layout-domain.ts';
import { placeWords } from './physics-warnings.ts';

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
        asWritten(theCase, error.what, error.where.at),
        {
          ...(error.where.at && { at: writtenPlaces(theCase, error.where.at) }),
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
        `${asWritten(theCase, error.what, error.where.at)}${walls}`,
        {
          ...(error.where.at && { at: writtenPlaces(theCase, error.where.at) }),
          key: physicsKey(theCase, error.code) ?? joinKey('layouts', layout.name),
        },
        error.remedy,
        error,
      );
    }
    throw error;
  }
}

/** Places as the case writes them, y downwards where it does. */
function writtenPlaces({ drawing }: Case, at: readonly Point[]): readonly Point[] {
  return drawing.writtenDown ? at.map(([x, y]) => [x, 0 - y]) : at;
}

/** A message of a kernel with its places in print: as the case writes them, four digits. */
function asWritten(theCase: Case, what: string, at: readonly Point[] = []): string {
  return at.reduce(
    (text, place) => text.replace(`(${place[0]}, ${place[1]})`, placeWords(theCase, place)),
    what,
  );
}

/** Where the case states what the solver finds wrong at some place; undefined for what lies in the layout. */
function physicsKey({ particle }: Case, code: string): string | undefined {
  const stated = (name: 'diffusion' | 'drift' | 'loss'): string =>
    particle[`${name}In`].size > 0 ? 'particle' : `particle.${name}`;
  switch (code) {
    case 'DIFFUSION_NOT_POSITIVE':
      return stated('diffusion');
    case 'DRIFT_NOT_FINITE':
      return stated('drift');
    case 'LOSS_NEGATIVE':
      return stated('loss');
    case 'TENSOR_CONVENTION':
      return 'particle.noise';
    case 'DEPTH_NOT_POSITIVE':
      return 'drawing.depth';
  }
  return undefined;
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
