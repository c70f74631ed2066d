/**
 * One parallel view for both the plan and the lifted surface. At lift 0 it looks straight down; as it rises the view
 * tilts and turns a little, and the mesh grows by its times. Lines that stand on the sheet stay vertical and equally
 * long, as in a drawn oblique view, so heights can be compared anywhere on the page.
 */

/** A rectangle of the page in px. */
export interface Rect {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}

export interface Projection {
  readonly lift: number;
  /** px per length unit. */
  readonly scale: number;
  /** Length units of height per unit of time at this lift. */
  readonly rise: number;
  /** Column-major 4 × 4: (x, y, height, 1) to clip space of a canvas of the given size. */
  readonly clip: Float32Array;
  /** Unit vector (x, y, height) towards the eye. */
  readonly eye: readonly [number, number, number];
  /** Where a point of the case lands on the page, px. `height` in length units. */
  at(x: number, y: number, height: number): [number, number];
  /** Where a px lies on the sheet (height 0). */
  back(px: number, py: number): [number, number];
  /** The rectangle all of it covers, px. */
  readonly covers: Rect;
}

/** What must fit: 2 numbers per point and its time. */
export interface Extent {
  readonly nodes: Float64Array;
  readonly values: Float64Array;
  /** Length units of height of the longest time when fully lifted, over the longest time. */
  readonly fullRise: number;
}

const TURN = (-17 * Math.PI) / 180;
const TILT = (33 * Math.PI) / 180;

/** The view at a lift from 0 to 1, fitted into `room` of a canvas of `size` px. */
export function project(
  extent: Extent,
  lift: number,
  room: Rect,
  size: readonly [number, number],
): Projection {
  const turn = TURN * lift;
  const elevation = Math.PI / 2 + (TILT - Math.PI / 2) * lift;
  const [ct, st] = [Math.cos(turn), Math.sin(turn)];
  // Exactly straight down at rest: cos(π/2) is not 0 in floating point.
  const [ce, se] = lift === 0 ? [0, 1] : [Math.cos(elevation), Math.sin(elevation)];
  const rise = extent.fullRise * lift;
  let [x0, x1, y0, y1, d0, d1] = [Infinity, -Infinity, Infinity, -Infinity, Infinity, -Infinity];
  const { nodes, values } = extent;
  for (let i = 0; i < values.length; i++) {
    const x = nodes[2 * i] ?? 0;
    const y = nodes[2 * i + 1] ?? 0;
    const h = rise * (values[i] ?? 0);
    const across = x * ct - y * st;
    const away = x * st + y * ct;
    x0 = Math.min(x0, across);
    x1 = Math.max(x1, across);
    y0 = Math.min(y0, away * se);
    y1 = Math.max(y1, away * se + h * ce);
    d0 = Math.min(d0, -away * ce);
    d1 = Math.max(d1, h * se - away * ce);
  }
  const scale = Math.min(
    (room.right - room.left) / Math.max(x1 - x0, Number.MIN_VALUE),
    (room.bottom - room.top) / Math.max(y1 - y0, Number.MIN_VALUE),
  );
  const ox = (room.left + room.right) / 2 - (scale * (x0 + x1)) / 2;
  const oy = (room.top + room.bottom) / 2 + (scale * (y0 + y1)) / 2;
  const deep = Math.max(d1 - d0, 1e-9 * Math.max(x1 - x0, y1 - y0)) * 0.55;
  const [w, h] = size;
  const [kx, ky, kd] = [(2 * scale) / w, (2 * scale) / h, -1 / deep];
  // biome-ignore format: one line per column of the matrix
  const clip = new Float32Array([
    kx * ct, ky * st * se, kd * -st * ce, 0,
    kx * -st, ky * ct * se, kd * -ct * ce, 0,
    0, ky * ce, kd * se, 0,
    (2 * ox) / w - 1, 1 - (2 * oy) / h, (-kd * (d0 + d1)) / 2, 1,
  ]);
  return {
    lift,
    scale,
    rise,
    clip,
    eye: [-st * ce, -ct * ce, se],
    at: (x, y, height) => [
      ox + scale * (x * ct - y * st),
      oy - scale * ((x * st + y * ct) * se + height * ce),
    ],
    back: (px, py) => {
      const across = (px - ox) / scale;
      const away = (oy - py) / scale / se;
      return [across * ct + away * st, away * ct - across * st];
    },
    covers: {
      left: ox + scale * x0,
      right: ox + scale * x1,
      top: oy - scale * y1,
      bottom: oy - scale * y0,
    },
  };
}
