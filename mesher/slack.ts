/**
 * Margins, relative, that settle ties the same way however a drawing is turned, moved or scaled.
 *
 * Equal lengths, sizes met exactly and right angles are common in drawings; rounding makes each of them a little more
 * or a little less. These are choices between equally good ways to go on: signs that must be right are exact.
 */

/** Lengths this near to each other count as equal. */
export const tieSlack = 1e-9;

/** A corner this near to a right angle (cosine) counts as lying in the diametral circle it is near. */
export const rightAngleSlack = 1e-10;
