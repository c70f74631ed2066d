import type { Mesh } from '../../mesher/index.ts';

/** What element integrals need of the triangles; 3 entries per triangle where a vertex is meant. */
export interface ElementGeometry {
  /** Number of triangles. */
  readonly count: number;
  readonly area: Float64Array;
  /** ∇φ of each vertex, 1/length. */
  readonly gradX: Float64Array;
  readonly gradY: Float64Array;
  /** Vertex less centroid. */
  readonly offX: Float64Array;
  readonly offY: Float64Array;
  /** Longest side. */
  readonly diameter: Float64Array;
}

/** Areas, gradients and diameters of all triangles. */
export function elementGeometry(mesh: Mesh): ElementGeometry {
  const { nodes, triangles } = mesh;
  const count = triangles.length / 3;
  const area = new Float64Array(count);
  const diameter = new Float64Array(count);
  const gradX = new Float64Array(3 * count);
  const gradY = new Float64Array(3 * count);
  const offX = new Float64Array(3 * count);
  const offY = new Float64Array(3 * count);
  for (let t = 0; t < count; t++) {
    const a = 2 * triangles[3 * t];
    const b = 2 * triangles[3 * t + 1];
    const c = 2 * triangles[3 * t + 2];
    const bx = nodes[b] - nodes[a];
    const by = nodes[b + 1] - nodes[a + 1];
    const cx = nodes[c] - nodes[a];
    const cy = nodes[c + 1] - nodes[a + 1];
    const twice = bx * cy - by * cx;
    area[t] = twice / 2;
    const q = 3 * t;
    gradX[q] = (by - cy) / twice;
    gradY[q] = (cx - bx) / twice;
    gradX[q + 1] = cy / twice;
    gradY[q + 1] = -cx / twice;
    gradX[q + 2] = -by / twice;
    gradY[q + 2] = bx / twice;
    const mx = (bx + cx) / 3;
    const my = (by + cy) / 3;
    offX[q] = -mx;
    offY[q] = -my;
    offX[q + 1] = bx - mx;
    offY[q + 1] = by - my;
    offX[q + 2] = cx - mx;
    offY[q + 2] = cy - my;
    diameter[t] = Math.sqrt(
      Math.max(bx * bx + by * by, cx * cx + cy * cy, (cx - bx) * (cx - bx) + (cy - by) * (cy - by)),
    );
  }
  return { count, area, gradX, gradY, offX, offY, diameter };
}
