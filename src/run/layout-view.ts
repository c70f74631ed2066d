import { type Chain, type Curve, directionAt, type Mesh, type Point, pointAt } from '../../mesher/index.ts';
import type { Case, Start } from '../case/case.ts';
import type { LayoutDomain } from '../case/layout-domain.ts';
import type { Answers } from './answers.ts';
import { type Stretch, stretches } from './wall-stretches.ts';

/** A place as JSON carries it. */
export type Place = [x: number, y: number];

/** A layout domain without its functions: what crosses a thread. */
export type PlainDomain = Omit<LayoutDomain, 'problem'>;

/** What a page draws of one solved layout; everything in the case's units, y upwards. */
export interface LayoutPicture {
  layout: string;
  answers: Answers[];
  loops: {
    name: string;
    role: 'outline' | 'hole' | 'inner wall';
    length: number;
    mark: Place;
    outward: Place;
  }[];
  walls: Stretch[];
  /** Per start (in the order of `answers`) and stretch: share caught per length of each chord; undefined where none is. */
  flux: (number[] | undefined)[][];
  regions: { name: string; lines: Place[][] }[];
  starts: { name: string; at?: Place; region?: string }[];
  pins: { name: string; at: Place }[];
  bounds: { low: Place; high: Place };
  longest: { value: number; at: Place };
}

/** A solved layout as plain data. */
export interface PlainLayoutAnswer {
  readonly answers: readonly Answers[];
  readonly mesh: Mesh;
  readonly domain: PlainDomain;
  /** Per node, in the case's time unit. */
  readonly meanExitTime: Float64Array;
  /** Per start and node: share of the particles caught at that node. */
  readonly caughtAt: readonly Float64Array[];
}

/**
 * What a page draws of a solved layout.
 *
 * @param layout name of the layout that was solved
 */
export function layoutView(theCase: Case, layout: string, answer: PlainLayoutAnswer): LayoutPicture {
  const { mesh, domain } = answer;
  const { walls, segmentsOf } = stretches(mesh, domain, theCase.units);
  return {
    layout,
    answers: [...answer.answers],
    loops: loopViews(domain),
    walls,
    flux: answer.caughtAt.map((caught) => {
      const density = catchingDensity(mesh, domain, caught);
      return segmentsOf.map((segments, w) =>
        walls[w]?.kind === 'reflecting' ? undefined : segments.map((s) => density[s] ?? 0),
      );
    }),
    regions: theCase.drawing.regions.map((region) => ({ name: region.name, lines: [polyline(region)] })),
    starts: theCase.starts.map((start) => startView(theCase, start)),
    pins: theCase.pins.map(({ name, at }) => ({ name, at: place(at) })),
    bounds: bounds(mesh.nodes),
    longest: longest(mesh.nodes, answer.meanExitTime),
  };
}

/**
 * Share caught per length on each wall segment, 0 on reflecting ones. A node's share is spread evenly over the catching
 * segments at it, so that Σ density·length = Σ caught: nothing is lost in drawing it.
 *
 * @param caught per node; what a catching floor takes beside a wall is drawn with the wall
 */
function catchingDensity(mesh: Mesh, domain: PlainDomain, caught: Float64Array): Float64Array {
  const { nodes, segments, segmentTag } = mesh;
  const count = segmentTag.length;
  const catching = (s: number): boolean => {
    const kind = domain.pieces.get(segmentTag[s] ?? -1)?.physics.kind;
    return kind === 'absorbing' || kind === 'partlyAbsorbing';
  };
  const lengthAt = new Float64Array(nodes.length / 2);
  for (let s = 0; s < count; s++) {
    if (!catching(s)) continue;
    const a = segments[2 * s] ?? 0;
    const b = segments[2 * s + 1] ?? 0;
    const length = Math.hypot(
      (nodes[2 * b] ?? 0) - (nodes[2 * a] ?? 0),
      (nodes[2 * b + 1] ?? 0) - (nodes[2 * a + 1] ?? 0),
    );
    lengthAt[a] = (lengthAt[a] ?? 0) + length;
    lengthAt[b] = (lengthAt[b] ?? 0) + length;
  }
  const density = new Float64Array(count);
  for (let s = 0; s < count; s++) {
    if (!catching(s)) continue;
    const a = segments[2 * s] ?? 0;
    const b = segments[2 * s + 1] ?? 0;
    density[s] = (caught[a] ?? 0) / (lengthAt[a] ?? 1) + (caught[b] ?? 0) / (lengthAt[b] ?? 1);
  }
  return density;
}

function loopViews(domain: PlainDomain): LayoutPicture['loops'] {
  const { outline, holes, innerWalls } = domain.domain;
  const lengths = new Map<string, number>();
  for (const { loop, from, to } of domain.pieces.values()) {
    lengths.set(loop, Math.max(lengths.get(loop) ?? 0, from, to));
  }
  const view = (chain: Chain, role: LayoutPicture['loops'][number]['role']) => {
    const first = chain.pieces.find(({ tag }) => domain.pieces.get(tag)?.from === 0) ?? chain.pieces[0];
    if (first === undefined) return [];
    const [dx, dy] = directionAt(first.curve, 0);
    const size = Math.hypot(dx, dy) || 1;
    return [
      {
        name: chain.name,
        role,
        length: lengths.get(chain.name) ?? 0,
        mark: place(first.curve.from),
        // The compartment is on the left of the way, so out of it is to the right.
        outward: [dy / size, -dx / size] as Place,
      },
    ];
  };
  return [
    ...view(outline, 'outline'),
    ...holes.flatMap((hole) => view(hole, 'hole')),
    ...innerWalls.flatMap((wall) => view(wall, 'inner wall')),
  ];
}

function startView(theCase: Case, start: Start): LayoutPicture['starts'][number] {
  const { name } = start;
  if (start.kind === 'point' || start.kind === 'spot') return { name, at: place(start.at) };
  if (start.kind === 'notYet' || start.region === 'everywhere') return { name };
  const region = theCase.drawing.regions[start.region];
  return region === undefined ? { name } : { name, region: region.name };
}

/** Chords of a chain that the eye takes for its curves. */
function polyline(chain: Chain): Place[] {
  const first = chain.pieces[0];
  if (first === undefined) return [];
  const points: Place[] = [place(first.curve.from)];
  for (const { curve } of chain.pieces) {
    const steps = chords(curve);
    for (let i = 1; i < steps; i++) points.push(place(pointAt(curve, i / steps)));
    points.push(place(curve.to));
  }
  return points;
}

function chords(curve: Curve): number {
  switch (curve.kind) {
    case 'line':
      return 1;
    case 'cubic':
      return 24;
    case 'arc':
      return Math.max(1, Math.ceil(Math.abs(curve.sweep) / (Math.PI / 36)));
  }
}

function bounds(nodes: Float64Array): LayoutPicture['bounds'] {
  const low: Place = [Number.POSITIVE_INFINITY, Number.POSITIVE_INFINITY];
  const high: Place = [Number.NEGATIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (let i = 0; i < nodes.length; i += 2) {
    const x = nodes[i] ?? 0;
    const y = nodes[i + 1] ?? 0;
    low[0] = Math.min(low[0], x);
    low[1] = Math.min(low[1], y);
    high[0] = Math.max(high[0], x);
    high[1] = Math.max(high[1], y);
  }
  return { low, high };
}

function longest(nodes: Float64Array, time: Float64Array): LayoutPicture['longest'] {
  let at = 0;
  for (let i = 1; i < time.length; i++) if ((time[i] ?? 0) > (time[at] ?? 0)) at = i;
  return { value: time[at] ?? 0, at: [nodes[2 * at] ?? 0, nodes[2 * at + 1] ?? 0] };
}

function place([x, y]: Point): Place {
  return [x, y];
}
