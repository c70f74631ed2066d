import type { SharpCorner } from './corners.ts';
import type { Hooks } from './hooks.ts';
import type { SizeField } from './size-field.ts';

/** What refinement works towards. */
export interface RefineGoal extends Hooks {
  /** Longest edge wanted, at a triangle's centroid or a segment's middle. */
  readonly size: SizeField | number;
  /** Degrees. */
  readonly minAngle: number;
  readonly maxVertices: number;
  /** For the progress told: about how many vertices there will be. */
  readonly expected: number;
  readonly corners: readonly SharpCorner[];
  /** Per vertex of the first triangulation: pieces longer than this may be halved at a sharp corner come what may. */
  readonly granted: Float64Array;
}
