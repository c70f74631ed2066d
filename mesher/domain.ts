/** A place in the plane, in the case's length unit, y upwards. */
export type Point = readonly [x: number, y: number];

/**
 * One smooth piece of a line in the drawing. Ends are stored, not computed, so that neighbours meet exactly.
 *
 * - `arc`: part of an ellipse, centre + R(turned)·(radii[0] cos θ, radii[1] sin θ), θ from `start` over `sweep`
 *   (radians, counter-clockwise positive; a full turn is allowed).
 * - `cubic`: Bézier curve with the two inner control points.
 */
export type Curve =
  | { readonly kind: 'line'; readonly from: Point; readonly to: Point }
  | {
      readonly kind: 'arc';
      readonly from: Point;
      readonly to: Point;
      readonly centre: Point;
      readonly radii: readonly [number, number];
      readonly turned: number;
      readonly start: number;
      readonly sweep: number;
    }
  | {
      readonly kind: 'cubic';
      readonly from: Point;
      readonly to: Point;
      readonly controls: readonly [Point, Point];
    };

/** A curve with the number its wall segments will carry. What the number means is the caller's business. */
export interface Piece {
  readonly curve: Curve;
  /** Integer ≥ 0, unique per piece within a domain. */
  readonly tag: number;
}

/** A chain of pieces, each starting where the one before ended. */
export interface Chain {
  readonly name: string;
  readonly pieces: readonly Piece[];
}

/** A flat compartment: what lies inside the outline and outside every hole. */
export interface Domain {
  /** Closed. After {@link healDomain} counter-clockwise: the compartment lies on the left. */
  readonly outline: Chain;
  /** Closed. After {@link healDomain} clockwise: the compartment lies on the left. */
  readonly holes: readonly Chain[];
  /** Open or closed lines inside the compartment; both sides become wall segments with their own nodes. */
  readonly innerWalls: readonly Chain[];
  /** Closed lines that divide the compartment; tags unused. They may reach beyond the outline: the part inside counts. */
  readonly regions: readonly Chain[];
  /** Gaps up to this length are closed, points nearer than this are one; in the length unit. */
  readonly tolerance: number;
}

/** One thing that was put right, told to the user. */
export interface Healing {
  /** In words: 'repeated point', 'orientation', 'split where inner walls cross', … */
  readonly what: string;
  readonly loop: string;
  readonly at: Point;
  /** For a loop that was left out as a repeat: the name of the one that stands for both. */
  readonly keptAs?: string;
}
