import { locate, type Mesh, type MeshQuality, meshDomain, meshQuality } from '../../mesher/index.ts';
import { assemble } from '../../solver/index.ts';
import type { Case, Layout } from '../case/case.ts';
import { layoutDomain } from '../case/layout-domain.ts';
import { meshOptions } from './mesh-options.ts';
import { inCaseTerms } from './name-places.ts';
import { isAnswerable, startWeights } from './start-weights.ts';

export interface ExamineOptions {
  readonly stop?: () => boolean;
  readonly progress?: (doing: string, done: number) => void;
  /** Multiplies every size of the first mesh; 1 for the mesh that `solve` uses. */
  readonly scale: number;
}

export interface ExaminedLayout {
  readonly mesh: Mesh;
  readonly quality: MeshQuality;
}

/**
 * Meshes one layout and puts its physics together without solving anything: D positive everywhere, a way out of
 * every part, starts and pins inside.
 *
 * @throws {CaseError} with the first thing that is wrong
 */
export function examineLayout(theCase: Case, layout: Layout, options: ExamineOptions): ExaminedLayout {
  const { stop, progress } = options;
  const domain = layoutDomain(theCase, layout);
  return inCaseTerms(theCase, layout, domain, () => {
    const hooks = {
      ...(stop && { stop }),
      ...(progress && { progress: (done: number) => progress(`${layout.name}: triangulating`, done) }),
    };
    const mesh = meshDomain(domain.domain, {
      ...meshOptions(domain, theCase.accuracy.nodes, options.scale),
      ...hooks,
    });
    assemble(mesh, domain.problem(mesh.regionSets), stop ? { stop } : {});
    const places = locate(mesh);
    for (const start of theCase.starts.filter(isAnswerable))
      startWeights(theCase, domain, mesh, places, start);
    for (const { name, at } of theCase.pins) {
      startWeights(theCase, domain, mesh, places, { kind: 'point', name, at }, 'pins');
    }
    return { mesh, quality: meshQuality(mesh) };
  });
}
