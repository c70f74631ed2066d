/** The field of mean exit times as the service sends it, and the flow of its border. */

export interface Field {
  readonly nodeCount: number;
  readonly triangleCount: number;
  /** 2 per node: x, y in the case's length unit. */
  readonly nodes: Float64Array;
  /** One per node, in the case's time unit. */
  readonly values: Float64Array;
  /** 3 node numbers per triangle, counter-clockwise. */
  readonly triangles: Int32Array;
}

const HEADER = 16;

/**
 * Reads the binary answer of `…/field`: 'TRY1', node count, triangle count, 0, then x y per node, value per node,
 * three node numbers per triangle; little endian.
 *
 * @throws {TypeError} when the bytes are not such a field
 */
export function readField(bytes: ArrayBuffer): Field {
  const view = new DataView(bytes);
  if (bytes.byteLength < HEADER || view.getUint32(0, false) !== 0x54525931) {
    throw new TypeError('the field does not start with TRY1');
  }
  const nodeCount = view.getUint32(4, true);
  const triangleCount = view.getUint32(8, true);
  const expected = HEADER + 24 * nodeCount + 12 * triangleCount;
  if (bytes.byteLength !== expected) {
    throw new TypeError(`the field is ${bytes.byteLength} bytes long, not ${expected}`);
  }
  const nodes = new Float64Array(bytes, HEADER, 2 * nodeCount);
  const values = new Float64Array(bytes, HEADER + 16 * nodeCount, nodeCount);
  const triangles = new Int32Array(bytes, HEADER + 24 * nodeCount, 3 * triangleCount);
  for (const node of triangles) {
    if (node < 0 || node >= nodeCount) throw new TypeError(`the field names node ${node} of ${nodeCount}`);
  }
  return { nodeCount, triangleCount, nodes, values, triangles };
}

/** Node numbers along each closed border of the mesh, compartment on the left; the first is not repeated. */
export function borderLoops(field: Field): number[][] {
  const { triangles, nodeCount } = field;
  const twin = new Map<number, number>();
  for (let i = 0; i < triangles.length; i++) {
    const from = triangles[i] ?? 0;
    const to = triangles[i % 3 === 2 ? i - 2 : i + 1] ?? 0;
    const back = to * nodeCount + from;
    if (twin.has(back)) twin.delete(back);
    else twin.set(from * nodeCount + to, to);
  }
  const next = new Map<number, number[]>();
  for (const [key, to] of twin) {
    const from = (key - to) / nodeCount;
    const list = next.get(from);
    if (list === undefined) next.set(from, [to]);
    else list.push(to);
  }
  const loops: number[][] = [];
  for (const start of next.keys()) {
    for (let to = next.get(start)?.pop(); to !== undefined; to = next.get(start)?.pop()) {
      const loop = [start];
      for (let at: number | undefined = to; at !== undefined && at !== start; at = next.get(at)?.pop()) {
        loop.push(at);
      }
      loops.push(loop);
    }
  }
  return loops;
}

/** Gradient of the field per node (2 per node): mean over the triangles around it, weighted by area. */
export function nodeGradients(field: Field): Float32Array {
  const { nodes, values, triangles, nodeCount } = field;
  const sum = new Float64Array(2 * nodeCount);
  const weight = new Float64Array(nodeCount);
  for (let t = 0; t < triangles.length; t += 3) {
    const a = triangles[t] ?? 0;
    const b = triangles[t + 1] ?? 0;
    const c = triangles[t + 2] ?? 0;
    const abx = (nodes[2 * b] ?? 0) - (nodes[2 * a] ?? 0);
    const aby = (nodes[2 * b + 1] ?? 0) - (nodes[2 * a + 1] ?? 0);
    const acx = (nodes[2 * c] ?? 0) - (nodes[2 * a] ?? 0);
    const acy = (nodes[2 * c + 1] ?? 0) - (nodes[2 * a + 1] ?? 0);
    const area2 = abx * acy - aby * acx;
    const ub = (values[b] ?? 0) - (values[a] ?? 0);
    const uc = (values[c] ?? 0) - (values[a] ?? 0);
    // Area times gradient, so the division by the area cancels against the weight.
    const gx = ub * acy - uc * aby;
    const gy = uc * abx - ub * acx;
    for (const node of [a, b, c]) {
      sum[2 * node] = (sum[2 * node] ?? 0) + gx;
      sum[2 * node + 1] = (sum[2 * node + 1] ?? 0) + gy;
      weight[node] = (weight[node] ?? 0) + area2;
    }
  }
  const gradients = new Float32Array(2 * nodeCount);
  for (let i = 0; i < 2 * nodeCount; i++) {
    const w = weight[i >> 1] ?? 0;
    gradients[i] = w > 0 ? (sum[i] ?? 0) / w : 0;
  }
  return gradients;
}
