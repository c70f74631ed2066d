import Flatbush from 'flatbush';
import type { Arrangement } from './arrange.ts';
import type { Point } from './domain.ts';
import { MesherError } from './errors.ts';
import type { LineGraph } from './line-graph.ts';
import { placeText } from './place-text.ts';
import { orient } from './predicates.ts';
import type { Chord } from './strands.ts';

/** Refuses a drawing whose loops cross, overlap, or lie where they cannot; names every place. */
export function judge(arrangement: Arrangement, graph: LineGraph): void {
  refuseOverlaps(graph, arrangement);
  refuseCrossings(arrangement, graph);
  refuseFlatLoops(arrangement);
  refuseMisplaced(graph);
}

const show = placeText;

/** Up to five places in words; all of them are in `where.at`. */
function places(at: readonly Point[]): string {
  const shown = at.slice(0, 5).map(show).join(', ');
  return at.length > 5 ? `${shown} and ${at.length - 5} more` : shown;
}

function unique(names: readonly string[]): string[] {
  return [...new Set(names)];
}

function refuseOverlaps(graph: LineGraph, { points }: Arrangement): void {
  if (graph.doubled.length === 0) return;
  const whole = (c: Chord): boolean => c.t0 === 0 && c.t1 === 1;
  const spikes = graph.doubled.filter(
    ([p, q]) =>
      whole(p) && whole(q) && p.strand.role === 'wall' && p.strand.name === q.strand.name && p.b === q.a,
  );
  if (spikes.length === graph.doubled.length) {
    const at = spikes.map(([p]) => points.at(p.b));
    const loops = unique(spikes.map(([p]) => p.strand.name));
    throw new MesherError(
      'ZERO_WIDTH_SPIKE',
      `${loops.join(', ')} has a zero-width spike with its tip at ${places(at)}`,
      { at, loops },
      'Leave the spike out, or draw it as an inner wall.',
    );
  }
  const at = graph.doubled.flatMap(([p]) => [points.at(p.a), points.at(p.b)]);
  const loops = unique(graph.doubled.flatMap(([p, q]) => [p.strand.name, q.strand.name]));
  throw new MesherError(
    'WALLS_OVERLAP',
    `walls overlap (${loops.join(' and ')}) between ${places(at)}`,
    { at, loops },
    'Which kind a wall drawn twice has cannot be known: draw it once, a hole on a wall as a notch of that wall.',
  );
}

function refuseCrossings(arrangement: Arrangement, graph: LineGraph): void {
  const inner = arrangement.crossings.filter((c) => c.a.role === 'innerWall' || c.b.role === 'innerWall');
  const atPoints = crossingPoints(graph);
  const walls = arrangement.crossings.filter((c) => !inner.includes(c));
  const at = [...walls.map((c) => c.at), ...atPoints.map((c) => c.at)];
  const names = [...walls.flatMap((c) => [c.a.name, c.b.name]), ...atPoints.flatMap((c) => c.loops)];
  if (at.length > 0) {
    const loops = unique(names);
    throw new MesherError(
      'WALLS_CROSS',
      `walls cross (${loops.join(' and ')}) at ${places(at)}`,
      { at, loops },
      'Draw the outline and every hole so that no wall crosses another.',
    );
  }
  if (inner.length > 0) {
    throw innerWallOutside(
      inner.map((c) => c.at),
      unique(inner.map((c) => (c.a.role === 'innerWall' ? c.a.name : c.b.name))),
      'crosses the outline or a hole',
    );
  }
}

function innerWallOutside(at: Point[], loops: string[], how: string): MesherError {
  return new MesherError(
    'INNER_WALL_OUTSIDE',
    `inner wall ${loops.join(', ')} ${how} at ${places(at)}: part of it lies outside the compartment`,
    { at, loops },
    'End it on the wall, or within the tolerance of it.',
  );
}

/** Points where loops that meet there change sides, found from the order of their ends round the point. */
function crossingPoints(graph: LineGraph): { at: Point; loops: string[] }[] {
  const passes = new Map<number, { out: number; into: number; name: string; chain: number }[]>();
  const wallLines = graph.owner.map((c, line) => ({ c, line })).filter(({ c }) => c.strand.role === 'wall');
  const degree = new Map<number, number>();
  for (const { c } of wallLines) degree.set(c.a, (degree.get(c.a) ?? 0) + 1);
  // Chords of a loop come in drawing order, so the one before (cyclically) is the one that leads to this one.
  const byChain = new Map<number, Chord[]>();
  for (const { c } of wallLines) {
    const list = byChain.get(c.strand.chain);
    if (list) list.push(c);
    else byChain.set(c.strand.chain, [c]);
  }
  for (const [chain, chords] of byChain) {
    chords.sort((p, q) => p.strand.place - q.strand.place || p.t0 - q.t0);
    chords.forEach((c, i) => {
      if ((degree.get(c.a) ?? 0) < 2) return;
      const before = chords[(i + chords.length - 1) % chords.length];
      const pass = { out: c.b, into: before.a, name: c.strand.name, chain };
      const list = passes.get(c.a);
      if (list) list.push(pass);
      else passes.set(c.a, [pass]);
    });
  }
  const found: { at: Point; loops: string[] }[] = [];
  for (const [v, list] of passes) {
    const ends = list.flatMap((p) => [p.out, p.into]);
    const order = new Map(sortAround(graph.points, v, ends).map((p, i) => [p, i]));
    const between = (p: number, from: number, to: number): boolean => {
      const n = ends.length;
      const at = ((order.get(p) ?? 0) - (order.get(from) ?? 0) + n) % n;
      return at > 0 && at < ((order.get(to) ?? 0) - (order.get(from) ?? 0) + n) % n;
    };
    for (let i = 0; i < list.length; i++) {
      for (let j = i + 1; j < list.length; j++) {
        const [p, q] = [list[i], list[j]];
        if (between(q.out, p.out, p.into) !== between(q.into, p.out, p.into)) {
          found.push({ at: [graph.points[2 * v], graph.points[2 * v + 1]], loops: [p.name, q.name] });
        }
      }
    }
  }
  return found;
}

/** Points sorted counter-clockwise around `v` from the direction +x, exactly. */
export function sortAround(xy: Float64Array, v: number, ends: readonly number[]): number[] {
  const [vx, vy] = [xy[2 * v], xy[2 * v + 1]];
  const lower = (p: number): number => {
    const dy = xy[2 * p + 1] - vy;
    return dy > 0 || (dy === 0 && xy[2 * p] > vx) ? 0 : 1;
  };
  return [...ends].sort((p, q) => {
    const half = lower(p) - lower(q);
    if (half !== 0) return half;
    return -Math.sign(orient(vx, vy, xy[2 * p], xy[2 * p + 1], xy[2 * q], xy[2 * q + 1]));
  });
}

function refuseFlatLoops(arrangement: Arrangement): void {
  const { chords, points } = arrangement;
  const area = new Map<string, { twice: number; size: number; chord: Chord }>();
  for (const chord of chords) {
    if (chord.strand.role !== 'wall') continue;
    const key = `${chord.strand.chain}`;
    const entry = area.get(key) ?? { twice: 0, size: 0, chord };
    const origin = points.at(entry.chord.a);
    const [a, b] = [points.at(chord.a), points.at(chord.b)];
    const ax = a[0] - origin[0];
    const ay = a[1] - origin[1];
    const bx = b[0] - origin[0];
    const by = b[1] - origin[1];
    entry.twice += ax * by - ay * bx;
    entry.size = Math.max(entry.size, bx * bx + by * by);
    area.set(key, entry);
  }
  for (const { twice, size, chord } of area.values()) {
    if (Math.abs(twice) > 1e-15 * size) continue;
    const { name } = chord.strand;
    throw new MesherError(
      'NO_AREA',
      `${name} has no area`,
      { at: [points.at(chord.a)], loops: [name] },
      'Draw it as a closed shape with an inside.',
    );
  }
}

/** Holes outside the outline or in other holes, inner walls outside the compartment: by exact winding numbers. */
function refuseMisplaced(graph: LineGraph): void {
  const { points: xy, owner } = graph;
  const walls = owner.filter((c) => c.strand.role === 'wall');
  const index = new Flatbush(Math.max(1, walls.length));
  for (const c of walls) {
    const [ax, ay, bx, by] = [xy[2 * c.a], xy[2 * c.a + 1], xy[2 * c.b], xy[2 * c.b + 1]];
    index.add(Math.min(ax, bx), Math.min(ay, by), Math.max(ax, bx), Math.max(ay, by));
  }
  index.finish();
  const onWall = new Map<number, number>();
  for (const c of walls) onWall.set(c.a, onWall.has(c.a) ? -1 : c.strand.chain);
  const done = new Set<number>();
  for (let i = 0; i < walls.length; i++) {
    const c = walls[i];
    if (c.strand.chain === 0 || done.has(c.strand.chain)) continue;
    // A point of this loop alone if it has one, else the middle of a chord: chords meet in ends only.
    const own = onWall.get(c.a) === c.strand.chain;
    const isLast = walls[i + 1]?.strand.chain !== c.strand.chain;
    if (!own && !isLast) continue;
    done.add(c.strand.chain);
    const at: Point = own ? [xy[2 * c.a], xy[2 * c.a + 1]] : middle(xy, c);
    judgeHole(c, at, windings(at, walls, index, xy), walls);
  }
  let inside = false;
  let before: Chord | undefined;
  for (const c of owner) {
    if (c.strand.role !== 'innerWall') continue;
    const goesOn = before !== undefined && before.b === c.a && !onWall.has(c.a);
    if (!goesOn) {
      const w = windings(middle(xy, c), walls, index, xy);
      inside = w.get(0) === 1 && w.size === 1;
    }
    if (!inside) throw innerWallOutside([middle(xy, c)], [c.strand.name], 'lies outside the compartment');
    before = c;
  }
}

function middle(xy: Float64Array, c: Chord): Point {
  return [(xy[2 * c.a] + xy[2 * c.b]) / 2, (xy[2 * c.a + 1] + xy[2 * c.b + 1]) / 2];
}

function judgeHole(c: Chord, at: Point, winding: Map<number, number>, walls: readonly Chord[]): void {
  const { name, chain } = c.strand;
  winding.delete(chain);
  if (!winding.get(0)) {
    throw new MesherError(
      'HOLE_OUTSIDE',
      `${name} lies outside the outline, at ${show(at)}`,
      { at: [at], loops: [name] },
      'Move it inside, or leave it out.',
    );
  }
  winding.delete(0);
  const [other] = winding.keys();
  if (other === undefined) return;
  const otherName = walls.find((w) => w.strand.chain === other)?.strand.name ?? 'another hole';
  throw new MesherError(
    'HOLE_IN_HOLE',
    `${name} lies inside ${otherName.startsWith('hole') ? '' : 'hole '}${otherName}, at ${show(at)}`,
    { at: [at], loops: [name, otherName] },
    'Leave one of them out: what lies inside a hole is not part of the compartment.',
  );
}

/** How often each loop winds round `at` (zeros left out), counted along a ray to the right, exactly. */
function windings(
  at: Point,
  walls: readonly Chord[],
  index: Flatbush,
  xy: Float64Array,
): Map<number, number> {
  const found = new Map<number, number>();
  for (const i of index.search(at[0], at[1], Number.POSITIVE_INFINITY, at[1])) {
    const c = walls[i];
    const [ax, ay, bx, by] = [xy[2 * c.a], xy[2 * c.a + 1], xy[2 * c.b], xy[2 * c.b + 1]];
    const up = ay <= at[1] && by > at[1];
    const down = by <= at[1] && ay > at[1];
    if (!up && !down) continue;
    const side = orient(ax, ay, bx, by, at[0], at[1]);
    const step = up && side > 0 ? 1 : down && side < 0 ? -1 : 0;
    if (step === 0) continue;
    const sum = (found.get(c.strand.chain) ?? 0) + step;
    if (sum === 0) found.delete(c.strand.chain);
    else found.set(c.strand.chain, sum);
  }
  return found;
}
