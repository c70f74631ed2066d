import { sideKind, type WallSides } from './wall-sides.ts';

/** A way from every triangle to a wall that catches, or to a triangle with loss. */
export interface DrainTree {
  /** Triangles, each after the one its way leads through. */
  readonly order: Int32Array;
  /** Side through which the way leaves; −1 where it ends in a triangle with loss. */
  readonly side: Int32Array;
  /** The same side as seen from the next triangle; −1 where the way ends at a wall. */
  readonly onto: Int32Array;
}

/**
 * Breadth-first from the walls; also through permeable walls, whose two sides carry the same flux.
 *
 * @param leastLoss smallest ĉ per triangle
 */
export function drainTree(
  { across, kind, exchangeOf, exchanges }: WallSides,
  leastLoss: Float64Array | undefined,
): DrainTree {
  const count = kind.length / 3;
  const order = new Int32Array(count);
  const side = new Int32Array(count).fill(-1);
  const onto = new Int32Array(count).fill(-1);
  const reached = new Uint8Array(count);
  let length = 0;
  const reach = (t: number): void => {
    reached[t] = 1;
    order[length++] = t;
  };
  for (let s = 0; s < kind.length; s++) {
    const t = (s / 3) | 0;
    const w = exchangeOf[s];
    const catches = kind[s] === sideKind.absorbing || (w >= 0 && exchanges.behind[w] < 0);
    if (!catches || reached[t]) continue;
    side[t] = s;
    reach(t);
  }
  let head = 0;
  const grow = (): void => {
    for (; head < length; head++) {
      const t = order[head];
      for (let s = 3 * t; s < 3 * t + 3; s++) {
        const w = exchangeOf[s];
        const other = w < 0 ? across[s] : exchanges.side[w] === s ? exchanges.behind[w] : exchanges.side[w];
        if (other < 0) continue;
        const next = (other / 3) | 0;
        if (reached[next]) continue;
        side[next] = other;
        onto[next] = s;
        reach(next);
      }
    }
  };
  grow();
  for (let t = 0; t < count; t++) {
    if (reached[t] || !(leastLoss && leastLoss[t] > 0)) continue;
    reach(t);
    grow();
  }
  return { order: order.slice(0, length), side, onto };
}
