import type { Chain } from '../../mesher/index.ts';
import type { Wall } from '../../solver/index.ts';
import { pointAtLength, type Ruler, rulerOf } from './arc-length.ts';
import type { Assignment, Case, Layout } from './case.ts';
import { CaseError } from './errors.ts';
import { joinKey } from './key-path.ts';
import { type Intervals, intervalsOf } from './spans.ts';

/** What one wall of a layout does on one loop. */
export interface Claim {
  readonly wall: string;
  readonly loop: string;
  readonly intervals: Intervals;
  readonly physics: Wall;
}

/**
 * What the layout's walls do on the loops that are there; numbers the exits by adding their names to `exits`.
 *
 * @throws {CaseError} WALL_KIND_NOT_POSSIBLE
 */
export function claimsOf(layout: Layout, chains: readonly Chain[], exits: string[]): Claim[] {
  const rulers = new Map(chains.map((chain) => [chain.name, rulerOf(chain)]));
  return layout.assignments.flatMap((assignment) => {
    const { wall, kind } = assignment;
    const there = wall.parts.filter(({ loop }) => rulers.has(loop));
    if (there.length === 0 && kind.kind !== 'reflecting') {
      const loops = [...new Set(wall.parts.map(({ loop }) => `"${loop}"`))].join(', ');
      throw impossible(
        layout,
        assignment,
        `it lies on ${loops}, which this layout leaves out`,
        'Take it out of the layout, or do not leave the hole out',
      );
    }
    const physics = physicsOf(assignment, exits);
    return there.map(({ loop, spans }) => ({
      wall: wall.name,
      loop,
      intervals: intervalsOf(spans, rulers.get(loop)?.length ?? 0),
      physics,
    }));
  });
}

function physicsOf({ kind, wall }: Assignment, exits: string[]): Wall {
  switch (kind.kind) {
    case 'reflecting':
      return { kind: 'reflecting' };
    case 'absorbing':
      return { kind: 'absorbing', exit: exits.push(wall.name) - 1 };
    case 'partlyAbsorbing':
      return { kind: 'partlyAbsorbing', kappa: kind.kappa.value, exit: exits.push(wall.name) - 1 };
    case 'permeable':
      return { kind: 'permeable', permeability: kind.permeability.value };
  }
}

/**
 * The claim at arc length `s` of a loop, if any.
 *
 * @throws {CaseError} WALL_KINDS_OVERLAP with the place and both names, unless both turn back
 */
export function claimAt(
  claims: readonly Claim[],
  s: number,
  ruler: Ruler,
  layout: Layout,
  theCase: Case,
): Claim | undefined {
  const here = claims.filter(({ intervals }) => intervals.some(([from, to]) => from < s && s < to));
  const [first, ...others] = here;
  const other = others.find(
    (each) => first?.physics.kind !== 'reflecting' || each.physics.kind !== 'reflecting',
  );
  if (!first || !other) return first;
  const [x, y] = pointAtLength(ruler, s);
  const written = theCase.drawing.writtenDown ? -y : y;
  const place = `(${Number(x.toPrecision(6))}, ${Number(written.toPrecision(6))})`;
  throw new CaseError(
    'WALL_KINDS_OVERLAP',
    `"${first.wall}" and "${other.wall}" both lie on "${ruler.chain.name}" at s = ${Number(s.toPrecision(6))}, ${place}`,
    { at: [[x, written]], key: joinKey('layouts', layout.name, other.wall) },
    'Shorten one of them, or take it out of this layout: a stretch of wall has one kind',
  );
}

function impossible(layout: Layout, { wall }: Assignment, why: string, remedy: string): CaseError {
  const key = joinKey('layouts', layout.name, wall.name);
  return new CaseError('WALL_KIND_NOT_POSSIBLE', `"${wall.name}": ${why}`, { key }, remedy);
}
