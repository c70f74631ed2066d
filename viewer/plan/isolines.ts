import type { Field } from './field.ts';
import type { Px } from './polyline.ts';

/** Where the numbers of the heavy isolines may stand. The lines themselves are drawn by the graphics card. */

/** One connected isoline: its level and its points, in case coordinates. */
export interface Isoline {
  readonly level: number;
  readonly points: readonly Px[];
}

/** Follows the level through the linear field. An edge whose end lies exactly on the level counts as just above it. */
export function isolines(field: Field, level: number): Isoline[] {
  const { nodes, values, triangles, nodeCount } = field;
  const neighbours = new Map<number, number[]>();
  const edgeOf = (a: number, b: number) => (a < b ? a * nodeCount + b : b * nodeCount + a);
  const link = (from: number, to: number) => {
    const list = neighbours.get(from);
    if (list === undefined) neighbours.set(from, [to]);
    else list.push(to);
  };
  for (let t = 0; t < triangles.length; t += 3) {
    const corner = [triangles[t] ?? 0, triangles[t + 1] ?? 0, triangles[t + 2] ?? 0];
    const cut: number[] = [];
    for (let i = 0; i < 3; i++) {
      const a = corner[i] ?? 0;
      const b = corner[(i + 1) % 3] ?? 0;
      if ((values[a] ?? 0) >= level !== (values[b] ?? 0) >= level) cut.push(edgeOf(a, b));
    }
    const [first, second] = cut;
    if (first === undefined || second === undefined) continue;
    link(first, second);
    link(second, first);
  }
  const pointOn = (edge: number): Px => {
    const a = Math.floor(edge / nodeCount);
    const b = edge % nodeCount;
    const [ua, ub] = [values[a] ?? 0, values[b] ?? 0];
    const part = (level - ua) / (ub - ua);
    const between = (k: 0 | 1) =>
      (nodes[2 * a + k] ?? 0) + part * ((nodes[2 * b + k] ?? 0) - (nodes[2 * a + k] ?? 0));
    return [between(0), between(1)];
  };
  const lines: Isoline[] = [];
  const seen = new Set<number>();
  const follow = (start: number) => {
    const points: Px[] = [];
    let at: number | undefined = start;
    while (at !== undefined && !seen.has(at)) {
      seen.add(at);
      points.push(pointOn(at));
      at = neighbours.get(at)?.find((edge) => !seen.has(edge));
    }
    if (points.length > 1) lines.push({ level, points });
  };
  // Open lines from their ends first, then what is left are rings.
  for (const [edge, list] of neighbours) if (list.length === 1 && !seen.has(edge)) follow(edge);
  for (const edge of neighbours.keys()) if (!seen.has(edge)) follow(edge);
  return lines;
}
