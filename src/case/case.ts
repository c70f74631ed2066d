import type { Chain, Healing, Point } from '../../mesher/index.ts';
import type { Coefficient, Drift, NoiseConvention, Tensor } from '../../solver/index.ts';

/** A value that the case states, converted to the case's own units, with how well it is known and where it is from. */
export interface Stated {
  readonly value: number;
  /** Range of the input in the same unit, where the case gives one. */
  readonly within?: readonly [low: number, high: number];
  readonly source?: string;
}

/** Names of the case's units as printed; both empty for `"units": "none"`. */
export interface CaseUnits {
  readonly length: string;
  readonly time: string;
}

/** The drawing after healing, in the case's length unit, y upwards. Pieces carry no meaning in their tags yet. */
export interface Drawing {
  /** Closed, counter-clockwise; s = 0 at the first point of its first piece. */
  readonly outline: Chain;
  /** Closed, clockwise (compartment on the left). */
  readonly holes: readonly Chain[];
  readonly innerWalls: readonly Chain[];
  readonly regions: readonly Chain[];
  readonly tolerance: number;
  readonly healed: readonly Healing[];
  /** What was taken from a drawing file and as what, in words; empty for typed shapes. */
  readonly taken: readonly string[];
  readonly leftOut: readonly string[];
  /** What a person should look at, e.g. an outline that was only proposed. */
  readonly warnings?: readonly string[];
  /**
   * Set when the case writes y downwards: every y in the case (points, expressions, conditions) is −y here, so that
   * the drawing looks as drawn. Angles are counter-clockwise as seen, either way.
   */
  readonly writtenDown?: true;
  /** Loops that were drawn twice: the second name means the loop that was kept. */
  readonly sameAs?: ReadonlyMap<string, string>;
}

/** What a wall does in a layout; coefficients in the case's units. */
export type WallKind =
  | { readonly kind: 'absorbing' }
  | { readonly kind: 'reflecting' }
  | { readonly kind: 'partlyAbsorbing'; readonly kappa: Stated }
  | { readonly kind: 'permeable'; readonly permeability: Stated };

/** Part of a loop by arc length s along it; `from` > `to` runs over the mark. */
export interface Span {
  readonly from: number;
  readonly to: number;
}

/** A named wall: parts of one or more loops. */
export interface NamedWall {
  readonly name: string;
  readonly as: 'pad' | 'opening';
  readonly parts: readonly { readonly loop: string; readonly spans: readonly Span[] | 'whole' }[];
}

/** What one named wall does in one layout, and on which part of it (the rest reflects). */
export interface Assignment {
  readonly wall: NamedWall;
  readonly kind: WallKind;
}

export interface Layout {
  readonly name: string;
  readonly assignments: readonly Assignment[];
  /** Holes left out in this layout. */
  readonly without: readonly string[];
  /** Regions that catch from below. */
  readonly floors?: readonly { readonly region: string; readonly kappa: Stated }[];
  /** Why this version cannot solve this layout, in words; absent when it can. */
  readonly notAvailable?: readonly string[];
}

export type Start =
  | {
      readonly kind: 'evenIn';
      readonly name: string;
      /** Index of a region, or everywhere. */
      readonly region: number | 'everywhere';
      readonly notAvailable?: undefined;
    }
  | { readonly kind: 'point'; readonly name: string; readonly at: Point; readonly notAvailable?: undefined }
  | {
      readonly kind: 'spot';
      readonly name: string;
      readonly at: Point;
      readonly radius: number;
      readonly notAvailable?: undefined;
    }
  /** A start that this version cannot answer, and why. */
  | { readonly kind: 'notYet'; readonly name: string; readonly notAvailable: readonly string[] };

/** D: one coefficient, or a tensor where diffusion depends on direction. */
export type Diffusion = Coefficient | { readonly kind: 'tensor'; readonly tensor: Tensor };

/** What the particle does in the compartment; coefficients in the case's units, of places with y upwards. */
export interface Particle {
  /** Isothermal where D is the same everywhere: then the three readings are one process. */
  readonly noise: NoiseConvention;
  /** D outside every region that has its own. */
  readonly diffusion: Diffusion;
  /** By region index, as the other maps. */
  readonly diffusionIn: ReadonlyMap<number, Diffusion>;
  readonly drift?: Drift;
  readonly driftIn: ReadonlyMap<number, Drift>;
  /** Rate of being lost for good. */
  readonly loss?: Coefficient;
  readonly lossIn: ReadonlyMap<number, Coefficient>;
  /** D as stated, where it is a plain value: with its range and source. */
  readonly stated?: Stated;
}

/** What is asked of a layout; times in the case's time unit, fractions 0..1. */
export type Figure =
  | { readonly kind: 'mean' }
  | { readonly kind: 'standard deviation' }
  | { readonly kind: 'median' }
  | { readonly kind: 'time to'; readonly fraction: number }
  | { readonly kind: 'share'; readonly wall: string; readonly by?: number }
  | { readonly kind: 'time to leave by'; readonly wall: string; readonly fraction: number }
  | { readonly kind: 'still inside'; readonly at: number }
  | { readonly kind: 'time in'; readonly region: string }
  | { readonly kind: 'decay time' };

export interface Asked {
  /** As written in the case. */
  readonly text: string;
  readonly figure: Figure;
  readonly start: string;
  /** Counts those that are caught, not those that are lost; absent: whatever ends first. */
  readonly counts?: 'caught';
  readonly limit?: { readonly kind: 'under' | 'atLeast'; readonly value: number; readonly text: string };
}

/** What the answers are to hold beside what is always given. */
export interface Report {
  readonly survivalAt: readonly number[];
  readonly occupationOf: readonly string[];
  readonly moments: number;
  readonly field: readonly Figure[];
}

export interface Accuracy {
  /** Relative width of the bracket asked for. */
  readonly bracket: number;
  readonly nodes: number;
  readonly seconds: number;
  readonly paths: number;
  readonly seed: number;
}

/** A case, checked and converted: right by construction, not checked again inside. */
export interface Case {
  readonly title: string;
  readonly units: CaseUnits;
  readonly drawing: Drawing;
  readonly particle: Particle;
  /** Depth of the compartment in the length unit; absent where the case gives none. */
  readonly depth?: Coefficient;
  readonly walls: readonly NamedWall[];
  readonly layouts: readonly Layout[];
  readonly reference: string;
  readonly starts: readonly Start[];
  readonly pins: readonly { readonly name: string; readonly at: Point }[];
  readonly asked: readonly Asked[];
  readonly accuracy: Accuracy;
  readonly report?: Report;
  /** What the case asks for and this version does not compute yet, in words; told, never faked. */
  readonly notAvailable: readonly string[];
  readonly warnings: readonly string[];
  /** SHA-256 of the resolved case (RFC 8785 form). */
  readonly hash: string;
}
