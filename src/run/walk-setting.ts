import { type WalkGeometry, type WalkStart, walkGeometry } from '../../solver/index.ts';
import type { LayoutDomain } from '../case/layout-domain.ts';
import type { AnswerableStart } from './start-weights.ts';

/**
 * A layout as walkers use it: its curves and its coefficients, nothing of a mesh.
 *
 * @throws {SolverError} WALK_NOT_AVAILABLE
 */
export function layoutGeometry({ domain, problem }: LayoutDomain): WalkGeometry {
  const { media: _none, ...shared } = problem([]);
  return walkGeometry(domain, {
    ...shared,
    medium: (set) => {
      const [medium] = problem([set]).media;
      if (!medium) throw new Error('A layout gave no medium for a set of regions.');
      return medium;
    },
  });
}

/** A case's start as walkers set out from it. */
export function walkStart(start: AnswerableStart): WalkStart {
  switch (start.kind) {
    case 'evenIn':
      return start.region === 'everywhere' ? { kind: 'even' } : { kind: 'even', region: start.region };
    case 'point':
      return { kind: 'point', at: start.at };
    case 'spot':
      return { kind: 'spot', at: start.at, radius: start.radius };
  }
}
