/** A coefficient as a function of place; lengths in the case's length unit. */
export type Coefficient =
  | { readonly kind: 'constant'; readonly value: number }
  | { readonly kind: 'varying'; readonly at: (x: number, y: number) => number };

/** How dX = b dt + √(2D) dW is read when D varies: α = 0, ½ or 1 (METHODS 1). */
export type NoiseConvention = 'ito' | 'stratonovich' | 'isothermal';

/** What the particle meets in one part of the compartment. */
export interface Medium {
  /** D, length²/time, > 0. */
  readonly diffusion: Coefficient;
}

/**
 * What a wall does. `exit` numbers the exits from 0; pieces that belong to one named wall share a number.
 *
 * absorbing: u = 0; reflecting: n·D∇u = 0; partly absorbing: n·D∇u + κu = 0, κ > 0 in length/time.
 */
export type Wall =
  | { readonly kind: 'absorbing'; readonly exit: number }
  | { readonly kind: 'reflecting' }
  | { readonly kind: 'partlyAbsorbing'; readonly kappa: number; readonly exit: number };

/** The physics on a mesh: the backward operator L and its wall conditions. */
export interface Problem {
  readonly noise: NoiseConvention;
  /** One per entry of `mesh.regionSets`. */
  readonly media: readonly Medium[];
  /** By tag of the wall segments. */
  readonly walls: ReadonlyMap<number, Wall>;
  readonly exitCount: number;
}
