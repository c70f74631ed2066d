import type { Locator } from './locate.ts';
import type { Projection } from './projection.ts';

/** Tells whether the lifted surface stands between a point and the eye; what is hidden is not drawn over it. */
export type Hidden = (x: number, y: number, height: number) => boolean;

const STEPS = 72;

/**
 * @param top height of the highest point of the surface, length units
 */
export function hiddenBy(locator: Locator, view: Projection, top: number): Hidden {
  if (view.lift === 0 || top <= 0) return () => false;
  const [ex, ey, ez] = view.eye;
  return (x, y, height) => {
    const reach = (top - height) / ez;
    // A glyph of the back wall floats just outside the box; its line of sight enters it on the way to the eye.
    let entered = false;
    // The first step is short: a wall at the back is covered by the surface right beside it.
    for (let step = 0.35; step <= STEPS; step++) {
      const t = (step * reach) / STEPS;
      if (!locator.inBox(x + t * ex, y + t * ey)) {
        if (entered) return false;
        continue;
      }
      entered = true;
      const value = locator.valueAt(x + t * ex, y + t * ey);
      if (value * view.rise > height + t * ez + 0.004 * top) return true;
    }
    return false;
  };
}
