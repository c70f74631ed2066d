import type { Mesh } from '../../mesher/index.ts';

/**
 * Puts an inner wall along the vertical mesh line at `x`, from its upper end down to `y` (the tip keeps one node).
 * Both sides get their own nodes and segments, twins of each other.
 */
export function cutMesh(mesh: Mesh, x: number, y: number, tag: number): Mesh {
  const near = (a: number | undefined, b: number): boolean => Math.abs((a ?? Number.NaN) - b) < 1e-9;
  const count = mesh.nodes.length / 2;
  const line = [...Array(count).keys()]
    .filter((i) => near(mesh.nodes[2 * i], x) && (mesh.nodes[2 * i + 1] ?? 0) > y - 1e-9)
    .sort((a, b) => (mesh.nodes[2 * a + 1] ?? 0) - (mesh.nodes[2 * b + 1] ?? 0));
  const copies = new Map<number, number>();
  const nodes = [...mesh.nodes];
  for (const node of line) {
    const wholeHeight = near(mesh.nodes[1], y);
    if (node === line[0] && !wholeHeight) continue;
    copies.set(node, nodes.length / 2);
    nodes.push(mesh.nodes[2 * node] ?? 0, mesh.nodes[2 * node + 1] ?? 0);
  }
  const toRight = (node: number): number => copies.get(node) ?? node;
  const triangles = mesh.triangles.slice();
  for (let t = 0; t < triangles.length; t += 3) {
    const own = [...triangles.subarray(t, t + 3)];
    const right = own.some((node) => (mesh.nodes[2 * node] ?? 0) > x + 1e-9);
    if (right) triangles.set(own.map(toRight), t);
  }
  const segments = [...mesh.segments];
  for (let s = 0; s < segments.length; s += 2) {
    const own = segments.slice(s, s + 2);
    if (!own.some((node) => (mesh.nodes[2 * node] ?? 0) > x + 1e-9)) continue;
    segments[s] = toRight(own[0] ?? 0);
    segments[s + 1] = toRight(own[1] ?? 0);
  }
  const tags = [...mesh.segmentTag];
  const twins = [...mesh.segmentTwin];
  for (let i = 0; i + 1 < line.length; i++) {
    const [below, above] = [line[i] ?? 0, line[i + 1] ?? 0];
    segments.push(below, above, toRight(above), toRight(below)); // compartment on the left: up on the left side, down on the right
    twins.push(tags.length + 1, tags.length);
    tags.push(tag, tag);
  }
  return {
    ...mesh,
    nodes: Float64Array.from(nodes),
    triangles,
    segments: Int32Array.from(segments),
    segmentTag: Int32Array.from(tags),
    segmentTwin: Int32Array.from(twins),
    segmentSpan: Float64Array.from({ length: segments.length }, (_, q) => q % 2),
  };
}
