import type { Case } from '../case/case.ts';

/** What every answer of a case carries with it: what the numbers assume, and what they must not be used for alone. */
export function cautionsOf({ particle }: Case): readonly string[] {
  const drifts = [...(particle.drift ? [particle.drift] : []), ...particle.driftIn.values()];
  return drifts.some(({ kind }) => kind === 'components') ? [ofFlow, ...ofAll] : ofAll;
}

const ofFlow =
  'With a flow: a speed averaged over the depth holds only where depth²/D is much shorter than length/speed.';

const ofAll: readonly string[] = [
  'Independent point particles, released sharply at t = 0; a catching wall never fills and never lets go.',
  'D holds for its temperature, medium and particle size.',
  'The figures come from the meshed drawing; errors of inputs are not in them.',
  'A mean is not a bound on any one particle.',
  'Not for evacuation of people, dosing, containment of hazardous substances or any other safety decision without a qualified person’s own analysis under the codes that apply.',
];

/** Published methods behind the figures. */
export const references: readonly string[] = [
  'Xu, J. & Zikatanov, L. (1999), A monotone finite element scheme for convection–diffusion equations, Math. Comp. 68, 1429–1446.',
  'Redner, S. (2001), A Guide to First-Passage Processes, Cambridge University Press.',
  'Gardiner, C. W. (2004), Handbook of Stochastic Methods, 3rd ed., Springer, chapter 5.',
  'Ruppert, J. (1995), A Delaunay refinement algorithm for quality 2-dimensional mesh generation, J. Algorithms 18, 548–585.',
];
