import type { Hooks, Mesh } from '../../mesher/index.ts';
import { csrOfPairs } from '../linear/csr.ts';
import { stopIfAsked } from '../linear/stopping.ts';
import type { Problem } from '../problem/problem.ts';
import { edgeWeightsOf } from './edge-weights.ts';
import { type EdgeList, listEdges } from './edges.ts';
import { lumpedMass } from './lumped-mass.ts';
import { segmentTriangles } from './segment-triangles.ts';
import type { Sinks, System } from './system.ts';
import { type AbsorbingNodes, absorbingNodes, partlyAbsorbingRates, type WallRates } from './wall-terms.ts';
import { requireWayOut } from './way-out.ts';

/**
 * Puts the physics on a mesh: the edge-averaged P1 operator with lumped mass and lumped wall terms, absorbing walls
 * eliminated (METHODS 2 and 4).
 *
 * @throws {SolverError} DIFFUSION_NOT_POSITIVE, WALL_COEFFICIENT_NOT_POSITIVE, WALL_NOT_DESCRIBED, NO_WAY_OUT,
 *   SOLVING_STOPPED
 */
export function assemble(mesh: Mesh, problem: Problem, hooks: Hooks = {}): System {
  const nodeCount = mesh.nodes.length / 2;
  const edges = listEdges(mesh.triangles, nodeCount);
  stopIfAsked(hooks);
  const weight = edgeWeightsOf(mesh, problem, edges);
  stopIfAsked(hooks);
  const mass = lumpedMass(mesh, problem);
  const absorbing = absorbingNodes(mesh, problem);
  const partly = partlyAbsorbingRates(mesh, problem, segmentTriangles(mesh, edges));
  checkWayOut(mesh, edges, absorbing, partly);
  stopIfAsked(hooks);

  const { nodeOf, freeOf } = numberFreeNodes(nodeCount, absorbing);
  const size = nodeOf.length;
  const a = edges.first.map((node) => freeOf[node]);
  const b = edges.second.map((node) => freeOf[node]);
  const rates = csrOfPairs(size, a, b, weight, weight);
  const sinks = collectSinks(edges, weight, freeOf, absorbing, partly);
  const slack = new Float64Array(size);
  for (let s = 0; s < sinks.row.length; s++) slack[sinks.row[s]] += sinks.rate[s];
  const diagonal = slack.slice();
  for (let i = 0; i < size; i++) {
    for (let p = rates.start[i]; p < rates.start[i + 1]; p++) diagonal[i] += rates.value[p];
  }
  const load = new Float64Array(size);
  for (let i = 0; i < size; i++) load[i] = mass[nodeOf[i]];
  return {
    ...{ mesh, exitCount: problem.exitCount, size, nodeOf, freeOf, rates, slack, diagonal, load, sinks },
    absorbing: partsOfExits(absorbing),
  };
}

function numberFreeNodes(nodeCount: number, absorbing: AbsorbingNodes) {
  const freeOf = new Int32Array(nodeCount);
  const nodeOf = new Int32Array(nodeCount - absorbing.size);
  let size = 0;
  for (let node = 0; node < nodeCount; node++) {
    freeOf[node] = absorbing.has(node) ? -1 : size;
    if (freeOf[node] >= 0) nodeOf[size++] = node;
  }
  return { nodeOf, freeOf };
}

function checkWayOut(mesh: Mesh, edges: EdgeList, absorbing: AbsorbingNodes, partly: WallRates): void {
  const leads = new Uint8Array(mesh.nodes.length / 2);
  for (const node of absorbing.keys()) leads[node] = 1;
  for (const node of partly.node) leads[node] = 1;
  const pairs = new Int32Array(2 * edges.count);
  for (let e = 0; e < edges.count; e++) {
    pairs[2 * e] = edges.first[e];
    pairs[2 * e + 1] = edges.second[e];
  }
  requireWayOut(mesh, [pairs], leads);
}

/** A row's ways out: to each absorbing neighbour (in parts where two exits touch), and through its own partly absorbing wall. */
function collectSinks(
  edges: EdgeList,
  weight: Float64Array,
  freeOf: Int32Array,
  absorbing: AbsorbingNodes,
  partly: WallRates,
): Sinks {
  const row: number[] = [];
  const node: number[] = [];
  const exit: number[] = [];
  const rate: number[] = [];
  const add = (from: number, at: number, to: number, r: number): void => {
    row.push(from);
    node.push(at);
    exit.push(to);
    rate.push(r);
  };
  for (let e = 0; e < edges.count; e++) {
    const a = edges.first[e];
    const b = edges.second[e];
    if (freeOf[a] >= 0 === freeOf[b] >= 0) continue;
    const wallNode = freeOf[a] < 0 ? a : b;
    const exits = absorbing.get(wallNode) ?? [];
    for (const to of exits) add(freeOf[a + b - wallNode], wallNode, to, weight[e] / exits.length);
  }
  for (let p = 0; p < partly.node.length; p++) {
    const at = partly.node[p];
    if (freeOf[at] >= 0) add(freeOf[at], at, partly.exit[p], partly.rate[p]);
  }
  return {
    ...{ row: Int32Array.from(row), node: Int32Array.from(node), exit: Int32Array.from(exit) },
    rate: Float64Array.from(rate),
  };
}

function partsOfExits(absorbing: AbsorbingNodes): System['absorbing'] {
  const node: number[] = [];
  const exit: number[] = [];
  const part: number[] = [];
  for (const [at, exits] of absorbing) {
    for (const to of exits) {
      node.push(at);
      exit.push(to);
      part.push(1 / exits.length);
    }
  }
  return { node: Int32Array.from(node), exit: Int32Array.from(exit), part: Float64Array.from(part) };
}
