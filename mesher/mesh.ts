/**
 * A conforming triangulation. Arrays are read-only by agreement.
 *
 * Walls: each wall segment is listed once per side that faces the compartment, so an inner wall gives two, each with
 * its own nodes (free tips are shared). A corner where the compartment only touches itself in a point has one node
 * per part of the compartment that meets there.
 */
export interface Mesh {
  /** 2 per node: x, y in the length unit. */
  readonly nodes: Float64Array;
  /** 3 node numbers per triangle, counter-clockwise. */
  readonly triangles: Int32Array;
  /** Per triangle: index into `regionSets`. */
  readonly regionSet: Int32Array;
  /** Which regions of the domain (by index, ascending) a triangle with that number lies in; the first is always []. */
  readonly regionSets: readonly (readonly number[])[];
  /** 2 node numbers per wall segment, compartment on the left of the way from first to second. */
  readonly segments: Int32Array;
  /** Per wall segment: the tag of the piece it lies on. */
  readonly segmentTag: Int32Array;
  /** 2 per wall segment: curve parameters (0..1 on its piece) of its first and second node. */
  readonly segmentSpan: Float64Array;
  /** Per wall segment: the segment on the other side of an inner wall, else −1. */
  readonly segmentTwin: Int32Array;
  /** Largest distance between a wall curve and its chord, in the length unit. */
  readonly chordError: number;
}
