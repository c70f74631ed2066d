import type { Mesh } from '../../mesher/index.ts';
import type { Csr } from '../linear/csr.ts';

/** Where particles are caught, entry by entry: from a free row, at a mesh node, through an exit, at a rate. */
export interface Sinks {
  readonly row: Int32Array;
  readonly node: Int32Array;
  readonly exit: Int32Array;
  readonly rate: Float64Array;
}

/**
 * The discrete backward operator as a Markov jump process on the free nodes (METHODS 4): for row i
 *
 *     (A u)_i = Σ_j rates_ij (u_i − u_j) + slack_i u_i,   A u = load for the mean exit time.
 *
 * Absorbing nodes are eliminated; slack_i is the sum of the rates of row i's sinks.
 */
export interface System {
  readonly mesh: Mesh;
  readonly exitCount: number;
  /** Number of free nodes. */
  readonly size: number;
  /** Mesh node per free node. */
  readonly nodeOf: Int32Array;
  /** Free node per mesh node, −1 on absorbing walls. */
  readonly freeOf: Int32Array;
  /** Off-diagonal rates, no diagonal; symmetric. */
  readonly rates: Csr;
  readonly slack: Float64Array;
  /** Row sums of the rates plus slack. */
  readonly diagonal: Float64Array;
  /** Lumped ∫ m φ_i per free node. */
  readonly load: Float64Array;
  readonly sinks: Sinks;
  /** Absorbing nodes, the exits they belong to, and the part that belongs to each. */
  readonly absorbing: { readonly node: Int32Array; readonly exit: Int32Array; readonly part: Float64Array };
}
