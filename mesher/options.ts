import type { Point } from './domain.ts';
import type { Hooks } from './hooks.ts';

/** Where triangles have to be small: `size` at `at`, growing with distance by {@link MeshOptions.growth}. */
export interface SizeSource {
  readonly at: Point;
  /** Edge length wanted there, in the length unit, > 0. */
  readonly size: number;
}

/** What a mesh should be like. Lengths in the domain's length unit, angles in degrees. */
export interface MeshOptions extends Hooks {
  /** Largest edge length wanted anywhere; default: diameter of the drawing / 20. */
  readonly maxSize?: number;
  /** Edge length wanted as a function of place, beside the sources. */
  readonly size?: (x: number, y: number) => number;
  readonly sources?: readonly SizeSource[];
  /** Growth of the size per distance from a source; default 0.2. */
  readonly growth?: number;
  /** Smallest angle wanted; default 28. */
  readonly minAngle?: number;
  /** Refused above this; default 500 000. */
  readonly maxNodes?: number;
  /** Sweeps of guarded smoothing at the end: better angles on the whole, at about the cost of meshing; default 0. */
  readonly smoothing?: number;
}
