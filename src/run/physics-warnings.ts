import type { Locator, Mesh, Point } from '../../mesher/index.ts';
import type { Coefficient, Cycle, Problem, System } from '../../solver/index.ts';
import type { Case } from '../case/case.ts';
import { formatNumber } from '../case/format-quantity.ts';

/**
 * What a person should know of the physics before trusting the numbers: why the process is irreversible, rates below
 * zero, walls and potentials that mean something other than one may think.
 *
 * @param system assembled from `problem` on `mesh`
 */
export function physicsWarnings(
  theCase: Case,
  mesh: Mesh,
  places: Locator,
  problem: Problem,
  system: System,
): string[] {
  const at = (place: Point): string => placeWords(theCase, place);
  const { cycle, negativeRates, unequalPermeableAt } = system;
  const warnings: string[] = [];
  if (cycle) {
    warnings.push(cycleWords(theCase, mesh, places, cycle));
  }
  if (negativeRates.count > 0) {
    const place = negativeRates.at ? `, the largest of them at ${at(negativeRates.at)}` : '';
    warnings.push(
      `${negativeRates.count} of the mesh's edges have a rate below zero${place}: the triangles there are too flat for this diffusion tensor. Shares may leave the range from 0 to 1 a little and times be off there`,
    );
  }
  if (unequalPermeableAt) {
    warnings.push(
      `D differs on the two sides of a permeable wall at ${at(unequalPermeableAt)}: what passes is taken as J·n = P m̄ (p₁/m₁ − p₂/m₂), m the equilibrium density under the stated noise and m̄ its mean over both sides`,
    );
  }
  const jump = potentialJump(mesh, problem);
  if (jump) {
    warnings.push(
      `the potential jumps by ${formatNumber(jump.by)} kT between two regions at ${at(jump.at)}: only its slope inside each region drives the particle, the jump itself is not felt`,
    );
  }
  return warnings;
}

/** A place as the case writes it. */
export function placeWords({ drawing }: Case, [x, y]: Point): string {
  return `(${formatNumber(x)}, ${formatNumber(drawing.writtenDown ? 0 - y : y)})`;
}

function cycleWords(theCase: Case, mesh: Mesh, places: Locator, cycle: Cycle): string {
  const { at, work } = cycle;
  const place = placeWords(theCase, at);
  const way = (): string => {
    switch (cycle.around) {
      case 'triangle': {
        const set = mesh.regionSet[places.find(...at)?.triangle ?? -1] ?? -1;
        return `round a small closed way ${inRegions(theCase, mesh.regionSets[set] ?? [])} at ${place}`;
      }
      case 'border': {
        const beside = mesh.regionSets.filter((_, set) => touches(mesh, set, at));
        return `round a closed way across the border ${regionsBeside(theCase, beside)} at ${place}`;
      }
      case 'hole':
        return `round a hole, or through a permeable wall and back, on a way that closes at ${place}`;
    }
  };
  return `not reversible: ${way()} the drift does work, ${formatNumber(work)} kT, so drift over D is not the slope of one potential there. The figures are estimates that no guaranteed bracket can stand behind`;
}

function inRegions(theCase: Case, set: readonly number[]): string {
  const names = set.map((region) => `"${theCase.drawing.regions[region]?.name ?? region}"`);
  return names.length === 0 ? 'outside every region' : `in ${names.join(' and ')}`;
}

function regionsBeside(theCase: Case, sets: readonly (readonly number[])[]): string {
  const shared = new Set(sets[0]?.filter((region) => sets.every((set) => set.includes(region))));
  const names = new Set(sets.flat().filter((region) => !shared.has(region)));
  const list = [...names].map((region) => `"${theCase.drawing.regions[region]?.name ?? region}"`);
  return list.length === 0 ? 'between two media' : `of ${list.join(' and ')}`;
}

/** Whether a triangle of the set has the place in the middle of one of its sides. */
function touches(mesh: Mesh, set: number, [x, y]: Point): boolean {
  const { nodes, triangles, regionSet } = mesh;
  const middle = (a: number, b: number, axis: 0 | 1): number =>
    ((nodes[2 * a + axis] ?? 0) + (nodes[2 * b + axis] ?? 0)) / 2;
  for (let side = 0; side < triangles.length; side++) {
    if (regionSet[Math.floor(side / 3)] !== set) continue;
    const a = triangles[side] ?? 0;
    const b = triangles[side % 3 === 2 ? side - 2 : side + 1] ?? 0;
    const near = 1e-12 * (Math.abs(x) + Math.abs(y));
    if (Math.abs(middle(a, b, 0) - x) <= near && Math.abs(middle(a, b, 1) - y) <= near) return true;
  }
  return false;
}

/** The largest difference between two media's potentials at a node of both. */
function potentialJump(
  mesh: Mesh,
  { media }: Problem,
): { readonly by: number; readonly at: Point } | undefined {
  const potentials = media.map(({ drift }) => (drift?.kind === 'potential' ? drift.value : undefined));
  if (new Set(potentials.filter((one) => one !== undefined)).size < 2) return undefined;
  const { nodes, triangles, regionSet } = mesh;
  const first = new Map<number, Coefficient>();
  let size = 0;
  let found: { readonly by: number; readonly at: Point } | undefined;
  for (let p = 0; p < triangles.length; p++) {
    const potential = potentials[regionSet[Math.floor(p / 3)] ?? 0];
    const node = triangles[p] ?? 0;
    const other = first.get(node);
    if (!potential || other === potential) continue;
    if (!other) {
      first.set(node, potential);
      continue;
    }
    const at: Point = [nodes[2 * node] ?? 0, nodes[2 * node + 1] ?? 0];
    const [here, there] = [valueAt(potential, at), valueAt(other, at)];
    size = Math.max(size, Math.abs(here), Math.abs(there));
    const by = Math.abs(here - there);
    if (!found || by > found.by) found = { by, at };
  }
  return found && found.by > 1e-9 * size ? found : undefined;
}

function valueAt(c: Coefficient, [x, y]: Point): number {
  return c.kind === 'constant' ? c.value : c.at(x, y);
}
