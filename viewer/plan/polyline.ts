/** Polylines in px: points x, y, page downwards. */

export type Px = readonly [number, number];

/** Length along the line at each of its points. */
export function lengthsAlong(points: readonly Px[]): number[] {
  const lengths: number[] = [];
  let sum = 0;
  let before: Px | undefined;
  for (const point of points) {
    if (before !== undefined) sum += Math.hypot(point[0] - before[0], point[1] - before[1]);
    lengths.push(sum);
    before = point;
  }
  return lengths;
}

export interface Place {
  readonly at: Px;
  /** Unit vector along the line. */
  readonly along: Px;
}

/** The point and direction at each of some ascending lengths along the line. */
export function placesAt(points: readonly Px[], wanted: readonly number[]): Place[] {
  const lengths = lengthsAlong(points);
  const places: Place[] = [];
  let i = 1;
  for (const length of wanted) {
    while (i < points.length - 1 && (lengths[i] ?? 0) < length) i++;
    const [from, to] = [points[i - 1], points[i]];
    if (from === undefined || to === undefined) break;
    const span = (lengths[i] ?? 0) - (lengths[i - 1] ?? 0);
    const part = span > 0 ? Math.min(1, Math.max(0, (length - (lengths[i - 1] ?? 0)) / span)) : 0;
    const size = span > 0 ? span : 1;
    places.push({
      at: [from[0] + part * (to[0] - from[0]), from[1] + part * (to[1] - from[1])],
      along: [(to[0] - from[0]) / size, (to[1] - from[1]) / size],
    });
  }
  return places;
}

/** The same line with no step longer than `most`; works on any coordinates. */
export function refined(points: readonly Px[], most: number): Px[] {
  const fine: Px[] = [];
  let before: Px | undefined;
  for (const point of points) {
    if (before !== undefined) {
      const n = Math.ceil(Math.hypot(point[0] - before[0], point[1] - before[1]) / most);
      for (let i = 1; i < n; i++) {
        fine.push([
          before[0] + ((point[0] - before[0]) * i) / n,
          before[1] + ((point[1] - before[1]) * i) / n,
        ]);
      }
    }
    fine.push(point);
    before = point;
  }
  return fine;
}

/** SVG path data of one line, to a tenth of a px. */
export function pathOf(points: readonly Px[], closed = false): string {
  const text = points.map(([x, y]) => `${Math.round(x * 10) / 10} ${Math.round(y * 10) / 10}`);
  return text.length === 0 ? '' : `M${text.join('L')}${closed ? 'Z' : ''}`;
}
