import type { Locator, Mesh, Point } from '../../mesher/index.ts';
import { evenStart, pointStart, spotStart } from '../../solver/index.ts';
import type { Case, Start } from '../case/case.ts';
import { CaseError } from '../case/errors.ts';
import { formatNumber, formatQuantity } from '../case/format-quantity.ts';
import { joinKey } from '../case/key-path.ts';
import type { LayoutDomain } from '../case/layout-domain.ts';

/** A start that this version answers. */
export type AnswerableStart = Exclude<Start, { readonly kind: 'notYet' }>;

/** True for starts that this version answers. */
export const isAnswerable = (start: Start): start is AnswerableStart => start.kind !== 'notYet';

/** The start of that name, or a refusal that lists those there are. */
export function findStart(theCase: Case, name: string): Start {
  const start = theCase.starts.find((one) => one.name === name);
  if (start) return start;
  const known = theCase.starts.map((one) => `"${one.name}"`).join(', ');
  throw new CaseError(
    'UNKNOWN_START',
    `no start is called "${name}"`,
    { key: 'starts' },
    `Choose one of ${known}`,
  );
}

/**
 * A start as weights on the mesh nodes, sum 1, so that a mean is their product with the field.
 *
 * @param key where the case states it, for refusals: 'starts' or 'pins'
 * @throws {CaseError} START_OUTSIDE, START_ON_ABSORBING_WALL
 * @throws {SolverError} START_OUTSIDE
 */
export function startWeights(
  theCase: Case,
  domain: LayoutDomain,
  mesh: Mesh,
  places: Locator,
  start: AnswerableStart,
  key: 'starts' | 'pins' = 'starts',
): Float64Array {
  switch (start.kind) {
    case 'evenIn': {
      const { region } = start;
      if (region === 'everywhere') return evenStart(mesh);
      return evenStart(mesh, (set) => mesh.regionSets[set]?.includes(region) ?? false);
    }
    case 'point':
      return placedPoint(theCase, domain, mesh, places, start.at, joinKey(key, start.name));
    case 'spot':
      return spotStart(mesh, start.at[0], start.at[1], start.radius);
  }
}

/**
 * A point inside is where it is; one on a wall that does not absorb, or beyond its chord by no more than the chord
 * error, is moved to the wall; one on an absorbing wall or outside is refused (CASE.md, details).
 */
function placedPoint(
  theCase: Case,
  domain: LayoutDomain,
  mesh: Mesh,
  places: Locator,
  at: Point,
  key: string,
): Float64Array {
  const wall = places.nearestWall(at[0], at[1]);
  const near = theCase.drawing.tolerance;
  const found = places.find(at[0], at[1]);
  const physics = domain.pieces.get(mesh.segmentTag[wall.segment] ?? -1)?.physics;
  const length = (value: number): string => formatQuantity(value, 'length', theCase.units);
  const here = `the point (${formatNumber(at[0])}, ${formatNumber(at[1])})`;
  if (wall.distance <= (found ? near : near + mesh.chordError) && physics?.kind === 'absorbing') {
    throw new CaseError(
      'START_ON_ABSORBING_WALL',
      `${here} lies on an absorbing wall: what starts there is caught at once`,
      { at: [at], key },
      `Move it into the compartment; it is ${length(wall.distance)} from the wall`,
    );
  }
  if (found) return pointStart(mesh, found.triangle, found.weights);
  if (wall.distance <= near + mesh.chordError) return onSegment(mesh, wall.segment, wall.along);
  throw new CaseError(
    'START_OUTSIDE',
    `${here} lies outside the compartment, ${length(wall.distance)} from its nearest wall`,
    { at: [at], key },
    'Move it inside',
  );
}

function onSegment(mesh: Mesh, segment: number, along: number): Float64Array {
  const weights = new Float64Array(mesh.nodes.length / 2);
  weights[mesh.segments[2 * segment] ?? 0] = 1 - along;
  weights[mesh.segments[2 * segment + 1] ?? 0] = along;
  return weights;
}
