import { type Hooks, locate, type Mesh } from '../../mesher/index.ts';
import type { Bracketed } from './bracketed.ts';
import { sizesFromShares } from './size-from-shares.ts';

/** What one round found on its mesh. */
export interface Measured {
  /** The figure that decides. */
  readonly bracket: Bracketed;
  /** What each triangle adds to the bracket's width. */
  readonly shares: Float64Array;
}

/** How meshes are made and measured; the caller's business, so that it may also keep what each round computed. */
export interface AdaptSteps<M extends Measured> {
  readonly measure: (mesh: Mesh) => M;
  /** A mesh with about these edge lengths, of at most so many nodes. */
  readonly refine: (mesh: Mesh, size: (x: number, y: number) => number, maxNodes: number) => Mesh;
}

/** When adapting ends. */
export interface AdaptOptions extends Hooks {
  /** Half the bracket's width relative to its middle. */
  readonly tolerance?: number;
  readonly maxNodes?: number;
  readonly maxRounds?: number;
  /** Largest change of edge lengths per distance. */
  readonly growth?: number;
  /** Told after every round. */
  readonly onRound?: (round: AdaptRound) => void;
}

export const adaptDefaults = { tolerance: 1e-3, maxNodes: 250_000, maxRounds: 10, growth: 0.25 } as const;

/** One line of the record. */
export interface AdaptRound {
  readonly nodes: number;
  readonly bracket: Bracketed;
}

/** Why it ended, and the last mesh with what was found on it. */
export interface Adapted<M extends Measured> {
  readonly outcome: 'within tolerance' | 'node limit' | 'round limit' | 'stopped';
  readonly mesh: Mesh;
  readonly measured: M;
  readonly rounds: readonly AdaptRound[];
}

/** The share of the way (in width) that one round may go; beyond that shares near corners are no guide. */
const widthPerRound = 1 / 8;
/** A round aims this far below what it wants, for meshes that come out a little coarse. */
const safety = 0.85;

/**
 * Refines until the bracket is within tolerance or a limit is met, keeping the best so far.
 *
 * A stop asked for in or before the first round throws; later it ends the work with the last finished round.
 *
 * @throws whatever the steps throw, but for MESHING_STOPPED, SOLVING_STOPPED and TOO_MANY_TRIANGLES after the first round
 * Source: METHODS 6, Adaptivity.
 */
export function adaptUntil<M extends Measured>(
  first: Mesh,
  steps: AdaptSteps<M>,
  options: AdaptOptions = {},
): Adapted<M> {
  const { tolerance, maxNodes, maxRounds, growth } = { ...adaptDefaults, ...options };
  const rounds: AdaptRound[] = [];
  let mesh = first;
  let measured = steps.measure(mesh);
  for (;;) {
    const { bracket, shares } = measured;
    const nodes = mesh.nodes.length / 2;
    const round = { nodes, bracket };
    rounds.push(round);
    options.onRound?.(round);
    const width = bracket.high - bracket.low;
    const wanted = 2 * tolerance * Math.abs(bracket.value);
    const end = (outcome: Adapted<M>['outcome']): Adapted<M> => ({ outcome, mesh, measured, rounds });
    if (width <= wanted) return end('within tolerance');
    if (rounds.length >= maxRounds) return end('round limit');
    if (nodes >= 0.8 * maxNodes) return end('node limit');
    if (options.stop?.()) return end('stopped');
    options.progress?.(progressOf(rounds, wanted));
    try {
      const goal = safety * Math.max(wanted, widthPerRound * width) * (sumOf(shares) / width);
      const finer = refineWithin(steps, mesh, shares, { goal, growth, maxNodes });
      if (finer.nodes.length <= mesh.nodes.length) return end('node limit');
      measured = steps.measure(finer);
      mesh = finer;
    } catch (error) {
      const code = codeOf(error);
      if (code === 'TOO_MANY_TRIANGLES' || code === 'MEMORY_LIMIT') return end('node limit');
      if (code === 'MESHING_STOPPED' || code === 'SOLVING_STOPPED') return end('stopped');
      throw error;
    }
  }
}

/** Parts of the nodes allowed that are tried in turn: the mesher counts differently, and refuses what may exceed them. */
const partsOfLimit = [0.9, 0.6];

function refineWithin<M extends Measured>(
  steps: AdaptSteps<M>,
  mesh: Mesh,
  shares: Float64Array,
  { goal, growth, maxNodes }: { readonly goal: number; readonly growth: number; readonly maxNodes: number },
): Mesh {
  let refused: unknown;
  for (const part of partsOfLimit) {
    const { atNode } = sizesFromShares(mesh, shares, goal, growth, 2 * part * maxNodes);
    try {
      return steps.refine(mesh, sizeField(mesh, atNode), maxNodes);
    } catch (error) {
      if (codeOf(error) !== 'TOO_MANY_TRIANGLES') throw error;
      refused = error;
    }
  }
  throw refused;
}

/** How far the widths have come, by their logarithms. */
function progressOf(rounds: readonly AdaptRound[], wanted: number): number {
  const widths = rounds.map(({ bracket }) => bracket.high - bracket.low);
  const [first, now] = [widths[0], widths[widths.length - 1]];
  const all = Math.log(first / wanted);
  return all > 0 ? Math.min(0.95, Math.max(0, Math.log(first / now) / all)) : 0;
}

function sumOf(values: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i];
  return sum;
}

function codeOf(error: unknown): unknown {
  return typeof error === 'object' && error !== null && 'code' in error ? error.code : undefined;
}

/** The sizes between the nodes of a mesh; outside of it those of the last place found. */
export function sizeField(mesh: Mesh, atNode: Float64Array): (x: number, y: number) => number {
  const locator = locate(mesh);
  const { triangles } = mesh;
  let last = atNode[0];
  return (x, y) => {
    const found = locator.find(x, y);
    if (!found) return last;
    const { triangle, weights } = found;
    last = 0;
    for (let v = 0; v < 3; v++) last += weights[v as 0 | 1 | 2] * atNode[triangles[3 * triangle + v]];
    return last;
  };
}
