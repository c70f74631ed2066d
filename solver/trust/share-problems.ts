import type { ConsistentSystem } from './consistent-system.ts';
import { coefficientSource, type ElementSource, noSource } from './element-sources.ts';
import type { GalerkinProblem } from './galerkin-solution.ts';
import { sideKind } from './wall-sides.ts';

/**
 * Problems whose solutions lie above and below the chance to leave by an exit; the same one where no absorbing wall of
 * the exit touches one of another.
 */
export interface ShareProblems {
  readonly below: GalerkinProblem;
  readonly above: GalerkinProblem;
}

/** Over how many edges, and at most what length, wall values go from 0 to 1. */
export interface Ramp {
  readonly edges: number;
  readonly length: number;
}

/**
 * Where two absorbing exits touch, the share jumps from 0 to 1 and its energy is infinite. By the maximum principle it lies
 * between the solutions with wall values that go from 0 to 1 within a few edges on one side of the touching place, or
 * on the other; those have finite energy.
 *
 * @param exit number of the exit, or −1 for what is lost on the way
 * Source: maximum principle (Protter & Weinberger 1967).
 */
export function shareProblems(base: ConsistentSystem, exit: number, ramp: Ramp): ShareProblems {
  const { system, sides, geometry } = base;
  const own = new Uint8Array(system.freeOf.length);
  const others = new Uint8Array(system.freeOf.length);
  const { absorbing } = system;
  for (let q = 0; q < absorbing.node.length; q++) {
    if (absorbing.exit[q] === exit) own[absorbing.node[q]] = 1;
    else others[absorbing.node[q]] = 1;
  }
  const common = {
    source: shareSource(base, exit) ?? noSource(geometry),
    exchangeValues: Float64Array.from(sides.exchanges.exit, (to) => (to >= 0 && to === exit ? 1 : 0)),
  };
  const full = Float64Array.from(own);
  const touches = full.some((_, i) => own[i] && others[i]);
  if (!touches) return { below: { ...common, wallValues: full }, above: { ...common, wallValues: full } };
  const way = alongWalls(base, (i) => own[i] === 1 && others[i] === 1, ramp);
  const above = full.map((_, i) => (own[i] ? 1 : others[i] ? 1 - way[i] : 0));
  const below = full.map((_, i) => (others[i] ? 0 : own[i] ? way[i] : 0));
  return { below: { ...common, wallValues: below }, above: { ...common, wallValues: above } };
}

/**
 * How far along absorbing walls each node is from the nearest of the given nodes: 0 there, 1 (and no more) after
 * `ramp.edges` edges or the length `ramp.length`, whichever comes first.
 */
function alongWalls(
  { system, sides }: ConsistentSystem,
  from: (node: number) => boolean,
  ramp: Ramp,
): Float64Array {
  const { triangles, nodes } = system.mesh;
  const steps = new Float64Array(system.freeOf.length).fill(ramp.edges);
  const length = new Float64Array(steps.length).fill(ramp.length);
  for (let i = 0; i < steps.length; i++) if (from(i)) steps[i] = 0;
  for (let i = 0; i < steps.length; i++) if (steps[i] === 0) length[i] = 0;
  for (let round = 1; round < ramp.edges; round++) {
    for (let side = 0; side < sides.kind.length; side++) {
      if (sides.kind[side] !== sideKind.absorbing) continue;
      const a = triangles[side % 3 === 2 ? side - 2 : side + 1];
      const b = triangles[side % 3 === 0 ? side + 2 : side - 1];
      const edge = Math.hypot(nodes[2 * a] - nodes[2 * b], nodes[2 * a + 1] - nodes[2 * b + 1]);
      for (const [near, far] of [
        [a, b],
        [b, a],
      ]) {
        if (steps[near] !== round - 1 || steps[far] <= round) continue;
        steps[far] = round;
        length[far] = Math.min(ramp.length, length[near] + edge);
      }
    }
  }
  return steps.map((step, i) => Math.max(step / ramp.edges, length[i] / ramp.length));
}

/** What is caught by the exit's floors, or lost for good. */
function shareSource(
  { system, geometry, coefficients }: ConsistentSystem,
  exit: number,
): ElementSource | undefined {
  const { loss, floor, floorExit, per } = coefficients;
  if (!loss) return undefined;
  if (exit < 0) {
    const lost = floor ? loss.map((rate, q) => Math.max(0, rate - floor[q])) : loss;
    return coefficientSource(system.mesh, geometry, coefficients, lost);
  }
  if (!floor || !floorExit.includes(exit)) return undefined;
  const { regionSet } = system.mesh;
  const caught = floor.map((rate, q) => (floorExit[regionSet[Math.floor(q / per)]] === exit ? rate : 0));
  return coefficientSource(system.mesh, geometry, coefficients, caught);
}
