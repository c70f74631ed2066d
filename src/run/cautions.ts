/** What every answer carries with it: what the numbers assume, and what they must not be used for alone. */
export const cautions: readonly string[] = [
  'Flat or shallow compartment: with a flow, depth-averaged speed holds only where depth²/D is much shorter than length/speed.',
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
