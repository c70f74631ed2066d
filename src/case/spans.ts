import type { NamedWall, Span } from './case.ts';

/** Parts of a loop as intervals of arc length from 0 on, sorted, none over the mark. */
export type Intervals = readonly (readonly [from: number, to: number])[];

type Spans = NamedWall['parts'][number]['spans'];

/** Spans as plain intervals: one that runs over the mark becomes two. */
export function intervalsOf(spans: Spans, length: number): Intervals {
  if (spans === 'whole') return [[0, length]];
  const cut = spans.flatMap(({ from, to }): [number, number][] =>
    from < to
      ? [[from, to]]
      : [
          [0, to],
          [from, length],
        ],
  );
  return cut.filter(([from, to]) => to > from).sort((a, b) => a[0] - b[0]);
}

/** Intervals as spans: neighbours joined, and on a closed loop the last with the first over the mark. */
export function spansOf(intervals: Intervals, length: number, closed: boolean): Spans {
  const joined: [number, number][] = [];
  for (const [from, to] of intervals) {
    const last = joined.at(-1);
    if (last && from <= last[1]) last[1] = Math.max(last[1], to);
    else joined.push([from, to]);
  }
  const first = joined[0];
  const last = joined.at(-1);
  if (!first || !last) return [];
  if (first[0] === 0 && last[1] === length) {
    if (first === last) return 'whole';
    if (closed) return [...joined.slice(1, -1), [last[0], first[1]] as const].map(asSpan);
  }
  return joined.map(asSpan);
}

/** What two sets of intervals have in common. */
export function common(a: Intervals, b: Intervals): Intervals {
  const both: [number, number][] = [];
  for (const [from, to] of a) {
    for (const [start, end] of b) {
      const low = Math.max(from, start);
      const high = Math.min(to, end);
      if (high > low) both.push([low, high]);
    }
  }
  return both.sort((x, y) => x[0] - y[0]);
}

export function totalLength(intervals: Intervals): number {
  return intervals.reduce((sum, [from, to]) => sum + to - from, 0);
}

function asSpan([from, to]: readonly [number, number]): Span {
  return { from, to };
}
