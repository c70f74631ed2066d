import type { Chain, Mesh } from '../../mesher/index.ts';
import type { CaseUnits } from '../case/case.ts';
import type { LayoutDomain, WallPiece } from '../case/layout-domain.ts';

/** Wall of one kind and name without a break, as chords of the mesh with the compartment on the left. */
export interface Stretch {
  loop: string;
  name?: string;
  kind: 'absorbing' | 'reflecting' | 'partlyAbsorbing';
  /** Reactivity with its unit. */
  kappa?: string;
  /** For an inner wall that lets particles through: with kind 'reflecting', as it catches none. */
  permeability?: string;
  /** Arc length on the loop where the stretch begins and ends; `from` > `to` runs over the mark or back along it. */
  from: number;
  to: number;
  points: [number, number][];
}

export interface Stretches {
  readonly walls: Stretch[];
  /** Per stretch: its wall segments in the order of its points, one fewer than those. */
  readonly segmentsOf: readonly (readonly number[])[];
}

/** Wall segments of one piece that face one side, in the order of the way along that side. */
interface Side {
  readonly piece: WallPiece;
  readonly from: number;
  readonly to: number;
  readonly segments: readonly number[];
}

/**
 * Joins the wall segments of a mesh to stretches of one loop, name and kind. An inner wall gives one per side.
 *
 * @param units for the reactivity's unit
 */
export function stretches(
  mesh: Mesh,
  domain: Pick<LayoutDomain, 'domain' | 'pieces'>,
  units: CaseUnits,
): Stretches {
  const { outline, holes, innerWalls } = domain.domain;
  const byTag = segmentsByTag(mesh);
  const runs: Side[][] = [];
  for (const chain of [outline, ...holes])
    runs.push(...joinSides(sides(mesh, domain, chain, byTag, 1), mesh));
  for (const chain of innerWalls) {
    runs.push(...joinSides(sides(mesh, domain, chain, byTag, 1), mesh));
    runs.push(...joinSides(sides(mesh, domain, chain, byTag, -1), mesh));
  }
  const segmentsOf = runs.map((run) => run.flatMap((side) => side.segments));
  const walls = runs.map((run, r) => stretchOf(mesh, run, segmentsOf[r] ?? [], units));
  return { walls, segmentsOf };
}

function segmentsByTag(mesh: Mesh): Map<number, number[]> {
  const byTag = new Map<number, number[]>();
  mesh.segmentTag.forEach((tag, s) => {
    const list = byTag.get(tag);
    if (list === undefined) byTag.set(tag, [s]);
    else list.push(s);
  });
  return byTag;
}

/** The pieces of a chain in the order of the way along one side: 1 with the chain, −1 against it. */
function sides(
  mesh: Mesh,
  domain: Pick<LayoutDomain, 'pieces'>,
  chain: Chain,
  byTag: ReadonlyMap<number, readonly number[]>,
  way: 1 | -1,
): Side[] {
  const span = mesh.segmentSpan;
  const list = chain.pieces.flatMap(({ tag }): Side[] => {
    const piece = domain.pieces.get(tag);
    if (piece === undefined) return [];
    const start = (s: number): number => span[2 * s] ?? 0;
    const segments = (byTag.get(tag) ?? [])
      .filter((s) => ((span[2 * s + 1] ?? 0) - start(s)) * way > 0)
      .sort((a, b) => way * (start(a) - start(b)));
    if (segments.length === 0) return [];
    return way > 0
      ? [{ piece, from: piece.from, to: piece.to, segments }]
      : [{ piece, from: piece.to, to: piece.from, segments }];
  });
  return way > 0 ? list : list.reverse();
}

/** Neighbours of one name and kind become one run, over the mark of a closed loop too. */
function joinSides(list: readonly Side[], mesh: Mesh): Side[][] {
  const runs: Side[][] = [];
  for (const side of list) {
    const run = runs.at(-1);
    const last = run?.at(-1);
    if (run !== undefined && last !== undefined && follows(mesh, last, side)) run.push(side);
    else runs.push([side]);
  }
  const first = runs[0];
  const last = runs.at(-1);
  if (runs.length > 1 && first?.[0] !== undefined && last !== undefined) {
    const end = last.at(-1);
    if (end !== undefined && follows(mesh, end, first[0])) {
      runs.shift();
      last.push(...first);
    }
  }
  return runs;
}

function follows(mesh: Mesh, before: Side, after: Side): boolean {
  const a = before.piece;
  const b = after.piece;
  const lastSegment = before.segments.at(-1) ?? 0;
  const firstSegment = after.segments[0] ?? 0;
  return (
    a.wall === b.wall &&
    a.physics.kind === b.physics.kind &&
    coefficientOf(a) === coefficientOf(b) &&
    mesh.segments[2 * lastSegment + 1] === mesh.segments[2 * firstSegment]
  );
}

function coefficientOf({ physics }: WallPiece): number | undefined {
  if (physics.kind === 'partlyAbsorbing') return physics.kappa;
  return physics.kind === 'permeable' ? physics.permeability : undefined;
}

function stretchOf(mesh: Mesh, run: readonly Side[], segments: readonly number[], units: CaseUnits): Stretch {
  const first = run[0];
  const last = run.at(-1);
  if (first === undefined || last === undefined) throw new Error('A stretch has at least one piece.');
  const { piece } = first;
  const { physics } = piece;
  const unit = units.length === '' ? '' : ` ${units.length}/${units.time}`;
  const node = (n: number): [number, number] => [mesh.nodes[2 * n] ?? 0, mesh.nodes[2 * n + 1] ?? 0];
  const points = segments.map((s) => node(mesh.segments[2 * s] ?? 0));
  points.push(node(mesh.segments[2 * (segments.at(-1) ?? 0) + 1] ?? 0));
  return {
    loop: piece.loop,
    ...(piece.wall !== undefined && { name: piece.wall }),
    kind: physics.kind === 'permeable' ? 'reflecting' : physics.kind,
    ...(physics.kind === 'partlyAbsorbing' && { kappa: `${physics.kappa}${unit}` }),
    ...(physics.kind === 'permeable' && { permeability: `${physics.permeability}${unit}` }),
    from: first.from,
    to: last.to,
    points,
  };
}
