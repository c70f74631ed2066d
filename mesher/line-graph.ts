import type { Arrangement } from './arrange.ts';
import type { Chord } from './strands.ts';

/** The straight lines a triangulation has to contain, with what they mean. */
export interface LineGraph {
  /** 2 per point: x, y. */
  readonly points: Float64Array;
  /** 2 per line: point numbers, in the direction of the owner's curve. */
  readonly ends: Int32Array;
  /** The chord that each line is: a wall where a wall and a region border share it. */
  readonly owner: readonly Chord[];
  /** Per line: how much more often loops wind round what is on its left than round what is on its right. */
  readonly spin: Int32Array;
  /** The same for each region: [line, region, spin]. */
  readonly regionSpin: readonly (readonly [number, number, number])[];
  readonly regionCount: number;
  /** Pairs of wall chords (outline, holes, inner walls) that share one line; none in a good drawing. */
  readonly doubled: readonly (readonly [Chord, Chord])[];
}

/** Joins chords with the same ends into one line each. */
export function makeLineGraph(arrangement: Arrangement): LineGraph {
  const { chords, points } = arrangement;
  const byEnds = new Map<number, number>();
  const owner: Chord[] = [];
  const spin: number[] = [];
  const regionSpin: [number, number, number][] = [];
  const doubled: [Chord, Chord][] = [];
  let regionCount = 0;
  for (const chord of chords) {
    if (chord.a === chord.b) continue;
    const key = Math.min(chord.a, chord.b) * points.count + Math.max(chord.a, chord.b);
    let line = byEnds.get(key);
    if (line === undefined) {
      line = owner.length;
      byEnds.set(key, line);
      owner.push(chord);
      spin.push(0);
    } else if (owner[line].strand.role !== 'region' && chord.strand.role !== 'region') {
      doubled.push([owner[line], chord]);
      continue;
    } else if (owner[line].strand.role === 'region' && chord.strand.role !== 'region') {
      const turnedRound = owner[line].a !== chord.a;
      owner[line] = chord;
      if (turnedRound) for (const entry of regionSpin) if (entry[0] === line) entry[2] = -entry[2];
    }
    const sense = owner[line].a === chord.a ? 1 : -1;
    if (chord.strand.role === 'wall') spin[line] += sense;
    if (chord.strand.role === 'region') {
      regionSpin.push([line, chord.strand.chain, sense]);
      regionCount = Math.max(regionCount, chord.strand.chain + 1);
    }
  }
  const ends = new Int32Array(2 * owner.length);
  owner.forEach((chord, line) => {
    ends[2 * line] = chord.a;
    ends[2 * line + 1] = chord.b;
  });
  const spins = Int32Array.from(spin);
  const xy = Float64Array.from(points.xy);
  return { points: xy, ends, owner, spin: spins, regionSpin, regionCount, doubled };
}
