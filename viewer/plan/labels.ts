import type { Px } from './polyline.ts';
import type { Rect } from './projection.ts';

/** Puts writing where nothing else stands yet. */
export class LabelRoom {
  /** How much larger than designed the text is. */
  readonly textScale: number;
  readonly #area: Rect;
  readonly #taken: Rect[] = [];

  constructor(area: Rect, textScale = 1) {
    this.#area = area;
    this.textScale = textScale;
  }

  /** Marks a rectangle as taken without asking. */
  take(rect: Rect): void {
    this.#taken.push(rect);
  }

  /** Whether the rectangle lies inside the area and touches nothing. */
  free(rect: Rect): boolean {
    const { left, top, right, bottom } = this.#area;
    if (rect.left < left || rect.top < top || rect.right > right || rect.bottom > bottom) return false;
    return this.#taken.every(
      (other) =>
        rect.right <= other.left ||
        rect.left >= other.right ||
        rect.bottom <= other.top ||
        rect.top >= other.bottom,
    );
  }

  /** Takes the first free one of some candidates (middle points of a box of the given size). */
  place(candidates: readonly Px[], size: readonly [number, number]): Px | undefined {
    for (const [x, y] of candidates) {
      const rect = {
        left: x - size[0] / 2,
        right: x + size[0] / 2,
        top: y - size[1] / 2,
        bottom: y + size[1] / 2,
      };
      if (this.free(rect)) {
        this.take(rect);
        return [x, y];
      }
    }
    return undefined;
  }
}

/**
 * Middles of boxes outside a rectangle to which a leader from `from` may go, shortest leader first: along the left,
 * right and upper side.
 */
export function placesAround(from: Px, around: Rect, size: readonly [number, number], gap = 22): Px[] {
  const [w, h] = size;
  const found: Px[] = [];
  for (let shift = -240; shift <= 240; shift += 12) {
    found.push([around.left - gap - w / 2, from[1] + shift]);
    found.push([around.right + gap + w / 2, from[1] + shift]);
    found.push([from[0] + shift, around.top - gap - h / 2]);
    found.push([from[0] + shift, around.top - 2.2 * gap - h / 2]);
  }
  const reach = ([x, y]: Px) => Math.hypot(x - from[0], y - from[1]);
  return found.sort((a, b) => reach(a) - reach(b));
}
