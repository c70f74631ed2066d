import { type BoxTree, boxTree, deepestTree } from './box-tree.ts';
import { boxDistance2 } from './chord-tree.ts';

/**
 * Corners of reflecting walls behind which a walker cannot see: where the wall turns away from the compartment, and
 * free ends of inner walls. A corner is a rim for a walker that sees the one side of it and not the other
 * (a silhouette point, Sawhney et al. 2023).
 */
export class RimTree {
  readonly #tree: BoxTree;
  /** 6 per corner: where it is, then the corner before and the corner after along the wall. */
  readonly #corners: Float64Array;
  readonly #stack = new Int32Array(deepestTree);

  /** @param corners 6 per corner; a free end has itself as one of its neighbours */
  constructor(corners: Float64Array) {
    this.#corners = corners;
    const boxes = new Float64Array((corners.length / 6) * 4);
    for (let i = 0; i < boxes.length / 4; i++) {
      const x = corners[6 * i];
      const y = corners[6 * i + 1];
      boxes.set([x, y, x, y], 4 * i);
    }
    this.#tree = boxTree(boxes);
  }

  /** Distance of the nearest rim, or `within` when none is nearer. */
  nearest(x: number, y: number, within: number): number {
    const corners = this.#corners;
    if (corners.length === 0) return within;
    const { boxes, second, first, count, items } = this.#tree;
    const stack = this.#stack;
    let best = within * within;
    let top = 0;
    stack[top++] = 0;
    while (top > 0) {
      const node = stack[--top];
      if (boxDistance2(boxes, node, x, y) >= best) continue;
      const far = second[node];
      if (far >= 0) {
        const nearFirst = boxDistance2(boxes, node + 1, x, y) <= boxDistance2(boxes, far, x, y);
        stack[top++] = nearFirst ? far : node + 1;
        stack[top++] = nearFirst ? node + 1 : far;
        continue;
      }
      for (let p = first[node], end = p + count[node]; p < end; p++) {
        const c = 6 * items[p];
        const dx = x - corners[c];
        const dy = y - corners[c + 1];
        const d2 = dx * dx + dy * dy;
        if (d2 >= best) continue;
        const before = (corners[c] - corners[c + 2]) * dy - (corners[c + 1] - corners[c + 3]) * dx;
        const after = (corners[c + 4] - corners[c]) * dy - (corners[c + 5] - corners[c + 1]) * dx;
        if (before * after <= 0) best = d2;
      }
    }
    return Math.sqrt(best);
  }
}
