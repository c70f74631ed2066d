/** A coefficient as a function of place; lengths in the case's length unit. */
export type Coefficient =
  | { readonly kind: 'constant'; readonly value: number }
  | { readonly kind: 'varying'; readonly at: (x: number, y: number) => number };

/** A symmetric diffusion tensor, entries xx, xy, yy in length²/time, positive definite everywhere. */
export type Tensor =
  | { readonly kind: 'constant'; readonly value: readonly [xx: number, xy: number, yy: number] }
  | {
      readonly kind: 'varying';
      readonly at: (x: number, y: number) => readonly [xx: number, xy: number, yy: number];
      /** ∇·D, length/time. Without it, and only under Itô, it is found by central differences. */
      readonly divergence?: (x: number, y: number) => readonly [x: number, y: number];
    };

/**
 * What pushes the particle, in the stated noise convention; the noise-induced α∇D is added by the operator.
 *
 * - `components`: b, length/time.
 * - `potential`: V in units of kT, b = −D∇V.
 */
export type Drift =
  | { readonly kind: 'components'; readonly x: Coefficient; readonly y: Coefficient }
  | { readonly kind: 'potential'; readonly value: Coefficient };

/** How dX = b dt + √(2D) dW is read when D varies: α = 0, ½ or 1 (METHODS 1). */
export type NoiseConvention = 'ito' | 'stratonovich' | 'isothermal';

/** What the particle meets in one part of the compartment. */
export interface Medium {
  /** D, length²/time, > 0. */
  readonly diffusion: Coefficient;
  /** Takes the place of `diffusion` where diffusion depends on direction. */
  readonly tensor?: Tensor;
  readonly drift?: Drift;
  /** c, 1/time, ≥ 0: the chance per time to be lost for good. */
  readonly loss?: Coefficient;
  /** Capture by the floor with reactivity κ (length/time), counted as an exit; needs the problem's `depth`. */
  readonly floor?: { readonly kappa: number; readonly exit: number };
}

/**
 * What a wall does. `exit` numbers the exits from 0; pieces that belong to one named wall share a number.
 *
 * absorbing: u = 0; reflecting: n·D∇u = 0; partly absorbing: n·D∇u + κu = 0, κ > 0 in length/time; permeable (inner
 * walls only): n·D∇u = P(u₂ − u₁) on both sides, P > 0 in length/time.
 */
export type Wall =
  | { readonly kind: 'absorbing'; readonly exit: number }
  | { readonly kind: 'reflecting' }
  | { readonly kind: 'partlyAbsorbing'; readonly kappa: number; readonly exit: number }
  | { readonly kind: 'permeable'; readonly permeability: number };

/** The physics on a mesh: the backward operator L and its wall conditions. */
export interface Problem {
  readonly noise: NoiseConvention;
  /** One per entry of `mesh.regionSets`. */
  readonly media: readonly Medium[];
  /** By tag of the wall segments. */
  readonly walls: ReadonlyMap<number, Wall>;
  readonly exitCount: number;
  /** Depth h of the compartment in the length unit, > 0; conductivity and mass are multiplied by it. Default 1. */
  readonly depth?: Coefficient;
}
