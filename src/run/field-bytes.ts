/** First four bytes of a field as the page reads it. */
export const FIELD_MAGIC = 'TRY1';

const HEAD_BYTES = 16;

/**
 * The mean exit time on its mesh as bytes: 'TRY1', uint32 node count n, uint32 triangle count t, uint32 0,
 * float64[2n] nodes, float64[n] mean exit time, int32[3t] triangles; little endian.
 *
 * @param nodes x, y per node
 * @param triangles 3 node numbers per triangle
 * @param values one per node
 */
export function fieldBytes(nodes: Float64Array, triangles: Int32Array, values: Float64Array): ArrayBuffer {
  const bytes = new ArrayBuffer(HEAD_BYTES + nodes.byteLength + values.byteLength + triangles.byteLength);
  const view = new DataView(bytes);
  for (let i = 0; i < FIELD_MAGIC.length; i++) view.setUint8(i, FIELD_MAGIC.charCodeAt(i));
  view.setUint32(4, values.length, true);
  view.setUint32(8, triangles.length / 3, true);
  let at = HEAD_BYTES;
  for (let i = 0; i < nodes.length; i++, at += 8) view.setFloat64(at, nodes[i] ?? 0, true);
  for (let i = 0; i < values.length; i++, at += 8) view.setFloat64(at, values[i] ?? 0, true);
  for (let i = 0; i < triangles.length; i++, at += 4) view.setInt32(at, triangles[i] ?? 0, true);
  return bytes;
}
