/** Boxes in a binary tree, for finding what is near; a node's first child is the node after it. */
export interface BoxTree {
  /** 4 per node: smallest x, y, largest x, y. */
  readonly boxes: Float64Array;
  /** Per node: its second child, or −1 for a leaf. */
  readonly second: Int32Array;
  /** Per leaf: where its items start in `items`, and how many they are. */
  readonly first: Int32Array;
  readonly count: Int32Array;
  /** Item numbers, leaf by leaf. */
  readonly items: Int32Array;
}

/** Items of a leaf. */
const leafSize = 4;

/** Deepest a tree of 2³¹ items gets, with room: the stack of a search needs no more. */
export const deepestTree = 64;

/**
 * Builds the tree by halving at the median along the longer side.
 *
 * @param itemBoxes 4 per item: smallest x, y, largest x, y
 */
export function boxTree(itemBoxes: Float64Array): BoxTree {
  const n = itemBoxes.length / 4;
  const most = Math.max(1, 2 * n);
  const tree = {
    boxes: new Float64Array(4 * most),
    second: new Int32Array(most).fill(-1),
    first: new Int32Array(most),
    count: new Int32Array(most),
    items: Int32Array.from({ length: n }, (_, i) => i),
  };
  let next = 0;
  const build = (from: number, to: number): void => {
    const node = next++;
    const box = [
      Number.POSITIVE_INFINITY,
      Number.POSITIVE_INFINITY,
      Number.NEGATIVE_INFINITY,
      Number.NEGATIVE_INFINITY,
    ];
    for (let p = from; p < to; p++) {
      const i = 4 * tree.items[p];
      box[0] = Math.min(box[0], itemBoxes[i]);
      box[1] = Math.min(box[1], itemBoxes[i + 1]);
      box[2] = Math.max(box[2], itemBoxes[i + 2]);
      box[3] = Math.max(box[3], itemBoxes[i + 3]);
    }
    tree.boxes.set(box, 4 * node);
    if (to - from <= leafSize) {
      tree.first[node] = from;
      tree.count[node] = to - from;
      return;
    }
    const axis = box[2] - box[0] >= box[3] - box[1] ? 0 : 1;
    const middle = (i: number): number => itemBoxes[4 * i + axis] + itemBoxes[4 * i + 2 + axis];
    tree.items.subarray(from, to).sort((a, b) => middle(a) - middle(b) || a - b);
    const half = (from + to) >> 1;
    build(from, half);
    tree.second[node] = next;
    build(half, to);
  };
  build(0, n);
  return tree;
}
