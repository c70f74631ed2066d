import type { Hooks, Mesh } from '../../mesher/index.ts';
import { csrOfPairs } from '../linear/csr.ts';
import { stopIfAsked } from '../linear/stopping.ts';
import { type MediumTerms, mediumTerms } from '../problem/medium-terms.ts';
import type { Problem } from '../problem/problem.ts';
import { requireTensorConvention } from '../problem/tensor-terms.ts';
import { orderAlongCurve } from './curve-order.ts';
import { sideDrift } from './drift.ts';
import { edgeWeightsOf } from './edge-weights.ts';
import { type EdgeList, listEdges } from './edges.ts';
import { type Links, plainLinks, symmetricLinks } from './links.ts';
import { lumpedIntegral } from './lumped-integral.ts';
import { type Bridges, permeableBridges } from './permeable-bridges.ts';
import { type Reversibility, testReversibility } from './reversibility.ts';
import { segmentTriangles } from './segment-triangles.ts';
import { collectSinks, type VolumeRate } from './sinks.ts';
import type { System } from './system.ts';
import { type AbsorbingNodes, absorbingNodes, partlyAbsorbingRates, type WallRates } from './wall-terms.ts';
import { requireWayOut } from './way-out.ts';

/** e^ψ is formed only while it stays far from the smallest number. */
const largestPsiRange = 600;

/**
 * Puts the physics on a mesh: the edge-averaged P1 operator with lumped mass, wall terms and losses, absorbing walls
 * eliminated (METHODS 2 and 4). Reversibility is tested; a reversible process gets symmetric rates.
 *
 * @throws {SolverError} DIFFUSION_NOT_POSITIVE, DEPTH_NOT_POSITIVE, DRIFT_NOT_FINITE, LOSS_NEGATIVE,
 *   FLOOR_WITHOUT_DEPTH, TENSOR_CONVENTION, WALL_COEFFICIENT_NOT_POSITIVE, WALL_NOT_DESCRIBED, WALL_NOT_INNER,
 *   NO_WAY_OUT, SOLVING_STOPPED
 */
export function assemble(given: Mesh, problem: Problem, hooks: Hooks = {}): System {
  requireTensorConvention(problem, given);
  const { mesh, nodeOf: nodeBefore } = orderAlongCurve(given, hooks);
  stopIfAsked(hooks);
  const terms = mediumTerms(problem, sizeOf(mesh.nodes));
  const edges = listEdges(mesh.triangles, nodeBefore.length, hooks);
  stopIfAsked(hooks);
  const triangleOf = segmentTriangles(mesh, edges);
  const weights = edgeWeightsOf(mesh, terms, edges, hooks);
  stopIfAsked(hooks);
  const bridges = permeableBridges(mesh, problem, terms, triangleOf);
  const absorbing = absorbingNodes(mesh, problem);
  const partly = partlyAbsorbingRates(mesh, problem, terms, triangleOf);
  const mass = lumpedIntegral(mesh, (region) => terms[region].mass, hooks);
  const volume = volumeRates(mesh, terms, hooks);
  checkWayOut(mesh, edges, bridges, absorbing, partly, volume);
  stopIfAsked(hooks);

  const drift = sideDrift(mesh, terms, edges, hooks);
  const tested = drift ? testReversibility(mesh, edges, drift, bridges.pairs, hooks) : undefined;
  const plain = drift && (!tested?.reversible || tested.range > largestPsiRange);
  const psi = tested?.reversible ? tested.psi : undefined;
  const links = plain
    ? plainLinks(edges, weights, bridges, drift)
    : symmetricLinks(edges, weights, bridges, psi);
  const rowScale = psi && !plain ? psi.map(Math.exp) : undefined;
  stopIfAsked(hooks);
  const free = numberFreeNodes(mesh, absorbing);
  const sinks = collectSinks({ links, absorbing, partly, volume, rowScale }, free.freeOf);
  stopIfAsked(hooks);
  const load = Float64Array.from(free.nodeOf, (node) => mass[node] * (rowScale ? rowScale[node] : 1));
  const matrix = matrixOf(links, free, sinks, hooks);
  stopIfAsked(hooks);
  return {
    ...{ mesh: given, exitCount: problem.exitCount, ...matrix, load, symmetric: !plain },
    ...numberedAsGiven(given, nodeBefore, free.nodeOf),
    sinks: { ...sinks, node: sinks.node.map((node) => nodeBefore[node]) },
    absorbing: partsOfExits(absorbing, nodeBefore),
    negativeRates: negativeRates(links, mesh),
    ...driftFindings(tested, nodeBefore),
    ...(bridges.unequalAt ? { unequalPermeableAt: bridges.unequalAt } : {}),
  };
}

/** Rates, slack and diagonal of the free rows. */
function matrixOf(links: Links, free: FreeNodes, sinks: System['sinks'], hooks: Hooks) {
  const { freeOf } = free;
  const size = free.nodeOf.length;
  const row = (node: number): number => freeOf[node];
  const first = links.first.map(row);
  const second = links.second.map(row);
  stopIfAsked(hooks);
  const rates = csrOfPairs(size, first, second, links.forth, links.back, hooks);
  const slack = new Float64Array(size);
  for (let s = 0; s < sinks.row.length; s++) slack[sinks.row[s]] += sinks.rate[s];
  const diagonal = slack.slice();
  for (let i = 0; i < size; i++) {
    for (let p = rates.start[i]; p < rates.start[i + 1]; p++) diagonal[i] += rates.value[p];
  }
  return { size, rates, slack, diagonal };
}

interface FreeNodes {
  readonly nodeOf: Int32Array;
  readonly freeOf: Int32Array;
}

/** Every node of a triangle that is not on an absorbing wall gets a row. */
function numberFreeNodes(mesh: Mesh, absorbing: AbsorbingNodes): FreeNodes {
  const freeOf = new Int32Array(mesh.nodes.length / 2).fill(-1);
  for (let p = 0; p < mesh.triangles.length; p++) freeOf[mesh.triangles[p]] = 0;
  for (const node of absorbing.keys()) freeOf[node] = -1;
  let size = 0;
  for (let node = 0; node < freeOf.length; node++) if (freeOf[node] === 0) freeOf[node] = size++;
  const nodeOf = new Int32Array(size);
  for (let node = 0; node < freeOf.length; node++) if (freeOf[node] >= 0) nodeOf[freeOf[node]] = node;
  return { nodeOf, freeOf };
}

/** The numbering of rows against the mesh the caller knows. */
function numberedAsGiven(given: Mesh, nodeBefore: Int32Array, nodeOfRow: Int32Array): FreeNodes {
  const freeOf = new Int32Array(given.nodes.length / 2).fill(-1);
  const nodeOf = nodeOfRow.map((node) => nodeBefore[node]);
  for (let i = 0; i < nodeOf.length; i++) freeOf[nodeOf[i]] = i;
  return { nodeOf, freeOf };
}

function volumeRates(mesh: Mesh, terms: readonly MediumTerms[], hooks: Hooks): VolumeRate[] {
  const volume: VolumeRate[] = [];
  if (terms.some((medium) => medium.loss)) {
    volume.push({ exit: -1, rate: lumpedIntegral(mesh, (region) => terms[region].loss, hooks) });
  }
  for (const exit of new Set(terms.flatMap((medium) => (medium.floor ? [medium.floor.exit] : [])))) {
    const rateOf = (region: number) => {
      const floor = terms[region].floor;
      return floor?.exit === exit ? floor.rate : undefined;
    };
    volume.push({ exit, rate: lumpedIntegral(mesh, rateOf, hooks) });
  }
  return volume;
}

function checkWayOut(
  mesh: Mesh,
  edges: EdgeList,
  bridges: Bridges,
  absorbing: AbsorbingNodes,
  partly: WallRates,
  volume: readonly VolumeRate[],
): void {
  const leads = new Uint8Array(mesh.nodes.length / 2);
  for (const node of absorbing.keys()) leads[node] = 1;
  for (const node of partly.node) leads[node] = 1;
  for (const { rate } of volume) for (let i = 0; i < rate.length; i++) if (rate[i] > 0) leads[i] = 1;
  const pairs = new Int32Array(2 * edges.count);
  for (let e = 0; e < edges.count; e++) {
    pairs[2 * e] = edges.first[e];
    pairs[2 * e + 1] = edges.second[e];
  }
  requireWayOut(mesh, [pairs, bridges.pairs], leads);
}

function partsOfExits(absorbing: AbsorbingNodes, nodeBefore: Int32Array): System['absorbing'] {
  const node: number[] = [];
  const exit: number[] = [];
  const part: number[] = [];
  for (const [at, exits] of absorbing) {
    for (const to of exits) {
      node.push(nodeBefore[at]);
      exit.push(to);
      part.push(1 / exits.length);
    }
  }
  return { node: Int32Array.from(node), exit: Int32Array.from(exit), part: Float64Array.from(part) };
}

function negativeRates(links: Links, mesh: Mesh): System['negativeRates'] {
  const { first, second, forth, back } = links;
  let count = 0;
  let worst = -1;
  for (let l = 0; l < first.length; l++) {
    if (forth[l] >= 0 && back[l] >= 0) continue;
    count++;
    if (worst < 0 || forth[l] < forth[worst]) worst = l;
  }
  if (worst < 0) return { count: 0 };
  const a = 2 * first[worst];
  const b = 2 * second[worst];
  const at = [(mesh.nodes[a] + mesh.nodes[b]) / 2, (mesh.nodes[a + 1] + mesh.nodes[b + 1]) / 2] as const;
  return { count, at };
}

function driftFindings(
  tested: Reversibility | undefined,
  nodeBefore: Int32Array,
): Pick<System, 'psi' | 'cycle'> {
  if (!tested) return {};
  if (!tested.reversible) return { cycle: tested.cycle };
  const psi = new Float64Array(tested.psi.length);
  for (let i = 0; i < psi.length; i++) psi[nodeBefore[i]] = tested.psi[i];
  return { psi };
}

/** Longer side of the nodes' bounding box. */
function sizeOf(nodes: Float64Array): number {
  let lowX = Number.POSITIVE_INFINITY;
  let lowY = Number.POSITIVE_INFINITY;
  let highX = Number.NEGATIVE_INFINITY;
  let highY = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < nodes.length; i += 2) {
    lowX = Math.min(lowX, nodes[i]);
    highX = Math.max(highX, nodes[i]);
    lowY = Math.min(lowY, nodes[i + 1]);
    highY = Math.max(highY, nodes[i + 1]);
  }
  return Math.max(highX - lowX, highY - lowY);
}
