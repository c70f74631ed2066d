import Flatbush from 'flatbush';
import { type Crossing, type Cut, comparePair, type Round } from './compare-chords.ts';
import type { Domain, Healing } from './domain.ts';
import type { PointIndex } from './point-index.ts';
import { type Chord, makeChord, makeChords } from './strands.ts';

/** The drawing cut so that its chords meet only in their ends, but for the wall crossings listed. */
export interface Arrangement {
  readonly chords: readonly Chord[];
  readonly points: PointIndex;
  readonly crossings: readonly Crossing[];
  readonly healed: readonly Healing[];
}

/**
 * Cuts all lines where they meet, and curves where their chords come near other lines, until nothing changes.
 *
 * Contacts within the tolerance become common points. Lines that may cross (inner walls, region borders) are cut
 * there; crossings of outline and holes are listed. Near-linear: only chords whose boxes overlap are compared, and
 * after the first round only those with a new one.
 */
export function arrange(domain: Domain): Arrangement {
  const start = makeChords(domain);
  const points = start.points;
  let chords: readonly Chord[] = start.chords;
  let fresh = new Set(chords);
  const crossings = new Map<string, Crossing>();
  const healed: Healing[] = [];
  for (let round = 0; round < 100 && fresh.size > 0; round++) {
    const state: Round = { points, tolerance: domain.tolerance, cuts: new Map(), crossings, healed };
    comparePairs(chords, fresh, state);
    fresh = new Set();
    chords = applyCuts(chords, state.cuts, fresh);
  }
  return { chords, points, crossings: [...crossings.values()], healed };
}

function comparePairs(chords: readonly Chord[], fresh: ReadonlySet<Chord>, round: Round): void {
  const { xy } = round.points;
  const index = new Flatbush(Math.max(1, chords.length));
  const box = (c: Chord): [number, number, number, number] => {
    const pad = 3 * c.sag + round.tolerance;
    const ax = xy[2 * c.a];
    const ay = xy[2 * c.a + 1];
    const bx = xy[2 * c.b];
    const by = xy[2 * c.b + 1];
    return [Math.min(ax, bx) - pad, Math.min(ay, by) - pad, Math.max(ax, bx) + pad, Math.max(ay, by) + pad];
  };
  for (const c of chords) index.add(...box(c));
  index.finish();
  chords.forEach((c, i) => {
    if (!fresh.has(c)) return;
    for (const j of index.search(...box(c))) {
      if (j !== i && (j > i || !fresh.has(chords[j]))) comparePair(c, chords[j], round);
    }
  });
}

function applyCuts(chords: readonly Chord[], cuts: Map<Chord, Cut[]>, fresh: Set<Chord>): readonly Chord[] {
  if (cuts.size === 0) return chords;
  const out: Chord[] = [];
  for (const chord of chords) {
    let t = chord.t0;
    let a = chord.a;
    const own = [...(cuts.get(chord) ?? [])].sort((p, q) => p.t - q.t);
    for (const cut of [...own, { t: chord.t1, vertex: chord.b }]) {
      if (cut.vertex === a && own.length > 0) continue;
      const whole = own.length === 0;
      const part = whole ? chord : makeChord(chord.strand, t, cut.t, a, cut.vertex);
      if (!whole) fresh.add(part);
      out.push(part);
      t = cut.t;
      a = cut.vertex;
    }
  }
  return out;
}
