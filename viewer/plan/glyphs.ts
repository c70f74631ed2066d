import { lengthsAlong, type Place, type Px, placesAt } from './polyline.ts';

/** The wall glyphs of the design: what a stretch of wall does, readable without colour. All sizes in px. */

export interface GlyphSizes {
  /** Line of wall that turns back. */
  readonly turnsBack: number;
  /** Line of wall that catches. */
  readonly catches: number;
  readonly dot: number;
  readonly dotPitch: number;
  /** From the middle of the line to the feet of a chevron. */
  readonly gap: number;
  readonly halfWidth: number;
  readonly height: number;
  readonly stroke: number;
  readonly pitch: number;
  /** How much wider than the line the casing under it is. */
  readonly casing: number;
}

/** Scale factors k of the glyphs by where they stand. */
export const GLYPH_SCALE = { strip: 1.15, plan: 1.25, lifted: 1.3 } as const;

export function glyphSizes(k: number): GlyphSizes {
  const kDot = Math.max(k, 0.8);
  return {
    turnsBack: 2.4 * k,
    catches: Math.max(1.1 * k, 0.9),
    dot: 2.3 * kDot,
    dotPitch: 4.4 * kDot,
    gap: 2.2 * k + 0.3,
    halfWidth: Math.max(2.5 * k, 1.9),
    height: Math.max(2.7 * k, 2.1),
    stroke: Math.max(1.25 * k, 1),
    pitch: Math.max(7.2 * k, 5.4),
    casing: 2.6 * k,
  };
}

export interface Chevron {
  readonly feet: readonly [Px, Px];
  readonly apex: Px;
}

export interface ChevronOptions {
  /** Catches weakly: twice the pitch. */
  readonly weak: boolean;
  /** A whole post: at least 8 chevrons, 4 if weak; small ones on a post of radius under 8 px. */
  readonly post: boolean;
}

/** How many chevrons stand on a stretch of this length. */
export function chevronCount(length: number, sizes: GlyphSizes, options: ChevronOptions): number {
  const least = options.post ? (options.weak ? 4 : 8) : 1;
  return Math.max(least, Math.round(length / (sizes.pitch * (options.weak ? 2 : 1))));
}

/**
 * Chevrons along a stretch given in px of the page, compartment on the left of the way. They float outside the wall,
 * apex away from the compartment: on the page, whose y points down, outside is the way turned by +90°.
 */
export function chevrons(points: readonly Px[], sizes: GlyphSizes, options: ChevronOptions): Chevron[] {
  const length = lengthsAlong(points).at(-1) ?? 0;
  const small = options.post && length / (2 * Math.PI) < 8;
  const [gap, half, height] = small ? [1.5, 1.5, 1.5] : [sizes.gap, sizes.halfWidth, sizes.height];
  const n = chevronCount(length, sizes, options);
  const wanted = Array.from({ length: n }, (_, i) => ((i + 0.5) / n) * length);
  return placesAt(points, wanted).map(({ at, along }) => {
    const out: Px = [-along[1], along[0]];
    const foot = (side: number): Px => [
      at[0] + gap * out[0] + side * half * along[0],
      at[1] + gap * out[1] + side * half * along[1],
    ];
    return {
      feet: [foot(-1), foot(1)],
      apex: [at[0] + (gap + height) * out[0], at[1] + (gap + height) * out[1]],
    };
  });
}

/** Path data of some chevrons. */
export function chevronPath(list: readonly Chevron[]): string {
  const pair = ([x, y]: Px) => `${x.toFixed(1)} ${y.toFixed(1)}`;
  return list.map(({ feet, apex }) => `M${pair(feet[0])}L${pair(apex)}L${pair(feet[1])}`).join('');
}

/** Middles of the round dots of a weakly catching stretch: evenly, near the pitch of the design. */
export function dotPlaces(points: readonly Px[], sizes: GlyphSizes): Place[] {
  const length = lengthsAlong(points).at(-1) ?? 0;
  const n = Math.max(1, Math.round(length / sizes.dotPitch));
  return placesAt(
    points,
    Array.from({ length: n }, (_, i) => ((i + 0.5) / n) * length),
  );
}

/** The cross-stroke of s = 0: both ends, from inside to outside of the wall. */
export function markStroke(at: Px, out: Px, k: number, post: boolean): readonly [Px, Px] {
  const [inside, outside] = post ? [5, 5] : [5 * k + 1, 6 * k + 2];
  return [
    [at[0] - inside * out[0], at[1] - inside * out[1]],
    [at[0] + outside * out[0], at[1] + outside * out[1]],
  ];
}
