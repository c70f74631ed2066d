import type { Mesh, Point } from '../../mesher/index.ts';
import type { Csr } from '../linear/csr.ts';
import type { Cycle } from './reversibility.ts';

/** Where particles end, entry by entry: from a free row, at a mesh node, through an exit, at a rate. */
export interface Sinks {
  readonly row: Int32Array;
  readonly node: Int32Array;
  /** −1 for loss on the way. */
  readonly exit: Int32Array;
  readonly rate: Float64Array;
}

/**
 * The discrete backward operator as a Markov jump process on the free nodes (METHODS 4): for row i
 *
 *     (A u)_i = Σ_j rates_ij (u_i − u_j) + slack_i u_i,   A u = load for the mean exit time.
 *
 * Absorbing nodes are eliminated; slack_i is the sum of the rates of row i's sinks. Every row, its load and its sinks
 * are scaled alike: by M_i, and when `symmetric` also by e^ψ_i.
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
  /** Off-diagonal rates, no diagonal. */
  readonly rates: Csr;
  readonly slack: Float64Array;
  /** Row sums of the rates plus slack. */
  readonly diagonal: Float64Array;
  /** ∫ m φ_i per free node, in the row's scaling. */
  readonly load: Float64Array;
  readonly sinks: Sinks;
  /** Absorbing nodes, the exits they belong to, and the part that belongs to each. */
  readonly absorbing: { readonly node: Int32Array; readonly exit: Int32Array; readonly part: Float64Array };
  /** Whether the stored rates are symmetric. A reversible process with ψ ranging over more than 600 is not stored so. */
  readonly symmetric: boolean;
  /** ψ per mesh node where b/D = ∇ψ, largest value 0 in each piece; absent without drift or when irreversible. */
  readonly psi?: Float64Array;
  /** Present when the process is irreversible: a closed way on which the drift does work. */
  readonly cycle?: Cycle;
  /** Links with a negative rate (a mesh that is not Delaunay in the metric of a tensor): how many, and one place. */
  readonly negativeRates: { readonly count: number; readonly at?: Point };
  /** A place on a permeable wall with different m on its sides: J·n = P m̄ (p₁/m₁ − p₂/m₂) is solved there. */
  readonly unequalPermeableAt?: Point;
}
