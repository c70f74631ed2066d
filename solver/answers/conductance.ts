import type { System } from '../operator/system.ts';

/**
 * Conductance of an exit: ∫k|∇p|² of its share field p, with ∫κ(p − δ)² on partly absorbing walls: the rate through it
 * with everything at it kept at 1 and at the other exits at 0 (with D = 1 the handbook's conduction shape factor).
 *
 * Summed as the flow out of the exit, Σ rate (value there − p): by A p = rhs this equals the energy, and it subtracts
 * nothing large. Edges that join two exits directly, where the conductance has no bound, are left out.
 *
 * @param share the exit's field from `exitShares`, one entry per mesh node
 * @returns in length²/time (times length with a depth); undefined with drift, where it depends on the zero of ψ
 * Source: energy identity, Evans 2010, section 2.2.5 (recalled); Incropera et al., table 4.1.
 */
export function conductance(system: System, exit: number, share: Float64Array): number | undefined {
  if (system.psi || system.cycle) return undefined;
  const { sinks, absorbing, nodeOf } = system;
  const valueAt = new Map<number, number>();
  for (let q = 0; q < absorbing.node.length; q++) {
    if (absorbing.exit[q] === exit) valueAt.set(absorbing.node[q], absorbing.part[q]);
  }
  let flow = 0;
  for (let s = 0; s < sinks.row.length; s++) {
    if (sinks.exit[s] !== exit) continue;
    flow += sinks.rate[s] * ((valueAt.get(sinks.node[s]) ?? 1) - share[nodeOf[sinks.row[s]]]);
  }
  return flow;
}
