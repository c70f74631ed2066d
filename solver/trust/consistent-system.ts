import type { Hooks } from '../../mesher/index.ts';
import { SolverError } from '../errors.ts';
import { conjugateGradients } from '../linear/conjugate-gradients.ts';
import { csrOfPairs } from '../linear/csr.ts';
import { prepare } from '../linear/prepare.ts';
import type { LinearOperator } from '../linear/residual.ts';
import { pollMask, stopIfAsked } from '../linear/stopping.ts';
import { type EdgeList, listEdges } from '../operator/edges.ts';
import { edgePoints, edgeWeights, trianglePoints, triangleWeights } from '../operator/quadrature.ts';
import type { System } from '../operator/system.ts';
import { mediumTerms } from '../problem/medium-terms.ts';
import type { Problem } from '../problem/problem.ts';
import { type DrainTree, drainTree } from './drain-tree.ts';
import { type ElementCoefficients, elementCoefficients, pointCount } from './element-coefficients.ts';
import { type ElementGeometry, elementGeometry } from './element-geometry.ts';
import { type Fans, fansOf } from './fans.ts';
import { perExchange, type WallSides, wallSides } from './wall-sides.ts';

/**
 * The Galerkin P1 system of a(v, w) = ∫k̂∇v·∇w + ∫κ̂vw + ∫ĉvw (+ ∫P̂[v][w] through permeable walls) with consistent wall
 * and loss terms, and what element integrals over it need. Its matrix is no generator of jumps; brackets are made from
 * it, answers are not.
 */
export interface ConsistentSystem {
  /** The edge-averaged system of the same mesh, whose factor is the preconditioner. */
  readonly system: System;
  readonly problem: Problem;
  readonly geometry: ElementGeometry;
  readonly coefficients: ElementCoefficients;
  readonly sides: WallSides;
  readonly fans: Fans;
  readonly tree: DrainTree;
  readonly operator: LinearOperator;
  /** Asked by every loop over the mesh. */
  readonly hooks: Hooks;
}

/**
 * Assembles a(·,·) on the free nodes of a reversible process.
 *
 * @param size of the compartment's drawing, for steps of numerical derivatives of tensors; default 1
 * @throws {SolverError} what the coefficients throw, SOLVING_STOPPED
 * Source: METHODS 6; Ciarlet 1978 (consistent terms, recalled).
 */
export function consistentSystem(system: System, problem: Problem, hooks: Hooks = {}): ConsistentSystem {
  const { mesh } = system;
  const terms = mediumTerms(problem, 1);
  const geometry = elementGeometry(mesh);
  const edges = listEdges(mesh.triangles, mesh.nodes.length / 2, hooks);
  stopIfAsked(hooks);
  const coefficients = elementCoefficients(system, terms, hooks);
  const sides = wallSides(system, problem, terms, edges);
  stopIfAsked(hooks);
  const fans = fansOf(mesh, sides, hooks);
  const operator = assembleOperator(system, geometry, coefficients, sides, edges, hooks);
  const tree = drainTree(sides, coefficients.leastLoss);
  return { system, problem, geometry, coefficients, sides, fans, tree, operator, hooks };
}

/** Mesh node pairs with −a(φ_i, φ_j), and what each row sums to. */
interface Couplings {
  readonly first: Int32Array;
  readonly second: Int32Array;
  readonly value: Float64Array;
  readonly rowSum: Float64Array;
}

function assembleOperator(
  system: System,
  geometry: ElementGeometry,
  coefficients: ElementCoefficients,
  sides: WallSides,
  edges: EdgeList,
  hooks: Hooks,
): LinearOperator {
  const { freeOf, size, mesh } = system;
  const rowSum = new Float64Array(freeOf.length);
  const ofEdge = new Float64Array(edges.count);
  addStiffness(ofEdge, mesh.triangles, geometry, coefficients, edges);
  stopIfAsked(hooks);
  if (coefficients.loss) addLoss(ofEdge, rowSum, mesh.triangles, geometry, coefficients, edges, hooks);
  const { first, second, value } = addExchanges(ofEdge, rowSum, sides, edges, freeOf.length);
  const slack = new Float64Array(size);
  for (let node = 0; node < freeOf.length; node++) if (freeOf[node] >= 0) slack[freeOf[node]] = rowSum[node];
  for (let p = 0; p < value.length; p++) {
    const a = freeOf[first[p]];
    const b = freeOf[second[p]];
    if (a >= 0 && b < 0) slack[a] += value[p];
    if (b >= 0 && a < 0) slack[b] += value[p];
  }
  const row = (node: number): number => freeOf[node];
  const rates = csrOfPairs(size, first.map(row), second.map(row), value, value, hooks);
  const diagonal = slack.slice();
  for (let i = 0; i < size; i++) {
    for (let p = rates.start[i]; p < rates.start[i + 1]; p++) diagonal[i] += rates.value[p];
  }
  return { rates, slack, diagonal };
}

/** ofEdge −= ∫ k̂∇φ_i·∇φ_j. */
function addStiffness(
  ofEdge: Float64Array,
  triangles: Int32Array,
  geometry: ElementGeometry,
  coefficients: ElementCoefficients,
  edges: EdgeList,
): void {
  const { area, gradX, gradY } = geometry;
  const { meanXx, meanXy, meanYy } = coefficients;
  for (let side = 0; side < triangles.length; side++) {
    const t = (side / 3) | 0;
    const p = side % 3 === 2 ? side - 2 : side + 1;
    const q = side % 3 === 0 ? side + 2 : side - 1;
    ofEdge[edges.ofSide[side]] -=
      area[t] *
      (gradX[p] * (meanXx[t] * gradX[q] + meanXy[t] * gradY[q]) +
        gradY[p] * (meanXy[t] * gradX[q] + meanYy[t] * gradY[q]));
  }
}

/** ofEdge −= ∫ ĉφ_iφ_j; rowSum += ∫ ĉφ_i. */
function addLoss(
  ofEdge: Float64Array,
  rowSum: Float64Array,
  triangles: Int32Array,
  { area, count }: ElementGeometry,
  { loss, per, step }: ElementCoefficients,
  edges: EdgeList,
  hooks: Hooks,
): void {
  if (!loss) return;
  for (let t = 0; t < count; t++) {
    if ((t & pollMask) === 0) stopIfAsked(hooks);
    for (let g = 0; g < pointCount; g++) {
      const w = area[t] * triangleWeights[g] * loss[t * per + g * step];
      const a = trianglePoints[3 * g];
      const b = trianglePoints[3 * g + 1];
      const c = trianglePoints[3 * g + 2];
      ofEdge[edges.ofSide[3 * t]] -= w * b * c;
      ofEdge[edges.ofSide[3 * t + 1]] -= w * c * a;
      ofEdge[edges.ofSide[3 * t + 2]] -= w * a * b;
      rowSum[triangles[3 * t]] += w * a;
      rowSum[triangles[3 * t + 1]] += w * b;
      rowSum[triangles[3 * t + 2]] += w * c;
    }
  }
}

/** Adds ∫κ̂φ_iφ_j and ∫P̂[φ_i][φ_j]; the latter also joins nodes that share no edge. */
function addExchanges(
  ofEdge: Float64Array,
  rowSum: Float64Array,
  sides: WallSides,
  edges: EdgeList,
  nodeCount: number,
): Couplings {
  const { exchanges } = sides;
  const extra = new Map<number, number>();
  let edgeOf: Map<number, number> | undefined;
  const add = (a: number, b: number, value: number): void => {
    if (a === b) return;
    const key = Math.min(a, b) * nodeCount + Math.max(a, b);
    edgeOf ??= edgeNumbers(edges, nodeCount);
    const edge = edgeOf.get(key);
    if (edge === undefined) extra.set(key, (extra.get(key) ?? 0) - value);
    else ofEdge[edge] -= value;
  };
  for (let w = 0; w < exchanges.count; w++) {
    const near = [exchanges.first[w], exchanges.second[w]];
    const far = [exchanges.firstBehind[w], exchanges.secondBehind[w]];
    const local = wallMass(exchanges.rate, exchanges.length[w], w);
    if (far[0] < 0) {
      ofEdge[edges.ofSide[exchanges.side[w]]] -= local[1];
      rowSum[near[0]] += local[0] + local[1];
      rowSum[near[1]] += local[1] + local[2];
      continue;
    }
    // ∫P̂(v₁−v₂)(w₁−w₂): the sign is + within a side and − across; rows sum to zero.
    add(near[0], near[1], local[1]);
    add(far[0], far[1], local[1]);
    for (let i = 0; i < 2; i++) for (let j = 0; j < 2; j++) add(near[i], far[j], -local[i + j]);
  }
  const joined = [...extra.keys()];
  const first = new Int32Array(edges.count + joined.length);
  const second = new Int32Array(first.length);
  const value = new Float64Array(first.length);
  first.set(edges.first);
  second.set(edges.second);
  value.set(ofEdge);
  joined.forEach((key, p) => {
    first[edges.count + p] = Math.floor(key / nodeCount);
    second[edges.count + p] = key % nodeCount;
    value[edges.count + p] = extra.get(key) ?? 0;
  });
  return { first, second, value, rowSum };
}

/** Edge by its nodes, lower · nodeCount + higher. */
function edgeNumbers(edges: EdgeList, nodeCount: number): Map<number, number> {
  const numbers = new Map<number, number>();
  for (let e = 0; e < edges.count; e++) numbers.set(edges.first[e] * nodeCount + edges.second[e], e);
  return numbers;
}

/** ∫rate φ₁², ∫rate φ₁φ₂, ∫rate φ₂² along an exchanging segment. */
function wallMass(rate: Float64Array, length: number, w: number): [number, number, number] {
  const local: [number, number, number] = [0, 0, 0];
  for (let g = 0; g < perExchange; g++) {
    const s = edgePoints[g];
    const share = length * edgeWeights[g] * rate[perExchange * w + g];
    local[0] += share * (1 - s) * (1 - s);
    local[1] += share * s * (1 - s);
    local[2] += share * s * s;
  }
  return local;
}

/** What is left over is led to the walls and paid for, so this decides the width, not the truth, of a bracket. */
const galerkinTolerance = 1e-13;

/**
 * Solves the Galerkin system by conjugate gradients, preconditioned by the factor of the edge-averaged one.
 *
 * @param rhs one entry per free node
 * @throws {SolverError} NOT_CONVERGED, MEMORY_LIMIT, SOLVING_STOPPED
 */
export function solveGalerkin(
  { system, operator }: ConsistentSystem,
  rhs: Float64Array,
  hooks: Hooks = {},
): Float64Array {
  const { solve } = prepare(system, hooks);
  const precondition = (y: Float64Array): void => {
    const once = solve(y, { ...hooks, tolerance: 1 });
    if (once.converged) y.set(once.x);
  };
  const solution = conjugateGradients(operator, rhs, precondition, {
    ...hooks,
    tolerance: galerkinTolerance,
  });
  if (solution.converged) return solution.x;
  throw new SolverError(
    'NOT_CONVERGED',
    `The solve for the bracket stopped at a relative residual of ${solution.residual.toExponential(1)}`,
    {},
    'Refine the mesh where coefficients change fast.',
  );
}
