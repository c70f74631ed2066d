import type { EdgeList } from '../operator/edges.ts';
import { edgePoints } from '../operator/quadrature.ts';
import { segmentTriangles } from '../operator/segment-triangles.ts';
import type { System } from '../operator/system.ts';
import { wallOf } from '../operator/wall-terms.ts';
import { type MediumTerms, valueAt } from '../problem/medium-terms.ts';
import type { Problem } from '../problem/problem.ts';
import { psiInside } from './element-coefficients.ts';

/** What lies across a side of a triangle. */
export const sideKind = { inside: 0, reflecting: 1, absorbing: 2, exchanging: 3 } as const;

/** Sides of triangles (3t + v lies opposite to vertex v) and the walls on them. */
export interface WallSides {
  /** The same edge as a side of the neighbour; −1 at walls, also inner ones. */
  readonly across: Int32Array;
  readonly kind: Uint8Array;
  /** Number of the exchanging wall on the side, else −1. */
  readonly exchangeOf: Int32Array;
  readonly exchanges: Exchanges;
}

/** Partly absorbing wall segments, and permeable ones (each once, seen from its first side). */
export interface Exchanges {
  readonly count: number;
  /** The side of a triangle it lies on, and for a permeable one the side behind it, else −1. */
  readonly side: Int32Array;
  readonly behind: Int32Array;
  /** Nodes at its ends, and those opposite to them through a permeable wall (else −1). */
  readonly first: Int32Array;
  readonly second: Int32Array;
  readonly firstBehind: Int32Array;
  readonly secondBehind: Int32Array;
  /** Exit of a partly absorbing wall, −1 for a permeable one. */
  readonly exit: Int32Array;
  readonly length: Float64Array;
  /** κ̂ or P̂ at the Gauss points, {@link perExchange} entries each. */
  readonly rate: Float64Array;
}

export const perExchange = edgePoints.length;

/**
 * Neighbours across sides, and κ̂ = κ m̂ or P̂ = P m̄ on the walls that exchange (METHODS 1 and 2).
 *
 * @throws {SolverError} WALL_NOT_DESCRIBED
 */
export function wallSides(
  system: System,
  problem: Problem,
  terms: readonly MediumTerms[],
  edges: EdgeList,
): WallSides {
  const { mesh } = system;
  const { segments, segmentTwin, triangles } = mesh;
  const sides = triangles.length;
  const kind = new Uint8Array(sides);
  const exchangeOf = new Int32Array(sides).fill(-1);
  const triangleOf = segmentTriangles(mesh, edges);
  const sideOf = triangleOf.map((t, s) => sideFrom(triangles, t, segments[2 * s]));
  const list: number[] = [];
  for (let s = 0; s < triangleOf.length; s++) {
    const wall = wallOf(mesh, problem, s);
    const side = sideOf[s];
    kind[side] =
      wall.kind === 'reflecting'
        ? sideKind.reflecting
        : wall.kind === 'absorbing'
          ? sideKind.absorbing
          : sideKind.exchanging;
    if (kind[side] !== sideKind.exchanging) continue;
    const twin = segmentTwin[s];
    if (wall.kind === 'permeable' && twin < s) {
      exchangeOf[side] = exchangeOf[sideOf[twin]];
    } else {
      exchangeOf[side] = list.length;
      list.push(s);
    }
  }
  return {
    across: neighbours(edges, kind),
    kind,
    exchangeOf,
    exchanges: describe(system, problem, terms, list, sideOf),
  };
}

/** The side of triangle t that starts at a node. */
function sideFrom(triangles: Int32Array, t: number, node: number): number {
  for (let v = 0; v < 3; v++) if (triangles[3 * t + ((v + 1) % 3)] === node) return 3 * t + v;
  return -1;
}

function neighbours(edges: EdgeList, kind: Uint8Array): Int32Array {
  const across = new Int32Array(kind.length).fill(-1);
  const waiting = new Int32Array(edges.count).fill(-1);
  for (let side = 0; side < kind.length; side++) {
    if (kind[side] !== sideKind.inside) continue;
    const edge = edges.ofSide[side];
    const other = waiting[edge];
    waiting[edge] = side;
    if (other < 0) continue;
    across[side] = other;
    across[other] = side;
  }
  return across;
}

function describe(
  system: System,
  problem: Problem,
  terms: readonly MediumTerms[],
  list: readonly number[],
  sideOf: Int32Array,
): Exchanges {
  const { mesh } = system;
  const { nodes, segments, segmentTwin, regionSet } = mesh;
  const psi = psiInside(system, terms);
  const massAt = (side: number, x: number, y: number): number => {
    const t = (side / 3) | 0;
    return valueAt(terms[regionSet[t]].mass, x, y) * (psi ? Math.exp(psi(t, x, y)) : 1);
  };
  const rate = new Float64Array(perExchange * list.length);
  const exit = new Int32Array(list.length).fill(-1);
  const behind = new Int32Array(list.length).fill(-1);
  list.forEach((s, w) => {
    const wall = wallOf(mesh, problem, s);
    if (wall.kind === 'partlyAbsorbing') exit[w] = wall.exit;
    if (wall.kind === 'permeable') behind[w] = sideOf[segmentTwin[s]];
    const factor =
      wall.kind === 'partlyAbsorbing' ? wall.kappa : wall.kind === 'permeable' ? wall.permeability : 0;
    const p = 2 * segments[2 * s];
    const q = 2 * segments[2 * s + 1];
    for (let g = 0; g < perExchange; g++) {
      const x = nodes[p] + edgePoints[g] * (nodes[q] - nodes[p]);
      const y = nodes[p + 1] + edgePoints[g] * (nodes[q + 1] - nodes[p + 1]);
      const here = massAt(sideOf[s], x, y);
      rate[perExchange * w + g] = factor * (behind[w] < 0 ? here : (here + massAt(behind[w], x, y)) / 2);
    }
  });
  const end = (which: 0 | 1) => Int32Array.from(list, (s) => segments[2 * s + which]);
  const endBehind = (which: 0 | 1) =>
    Int32Array.from(list, (s, w) => (behind[w] < 0 ? -1 : segments[2 * segmentTwin[s] + which]));
  const first = end(0);
  const second = end(1);
  return {
    ...{ count: list.length, side: Int32Array.from(list, (s) => sideOf[s]), behind, exit, rate },
    ...{ first, second, firstBehind: endBehind(1), secondBehind: endBehind(0) },
    length: Float64Array.from(list, (_, w) =>
      Math.hypot(
        nodes[2 * first[w]] - nodes[2 * second[w]],
        nodes[2 * first[w] + 1] - nodes[2 * second[w] + 1],
      ),
    ),
  };
}
