import type { MeshOptions, SizeSource } from './options.ts';

/** Edge length wanted at a place. */
export type SizeField = (x: number, y: number) => number;

/**
 * The size field of the options: the least of `maxSize`, `size(x, y)` and what each source asks for.
 *
 * @param fallback largest size when the options give none
 * @returns a number when the field is the same everywhere
 */
export function makeSizeField(options: MeshOptions, fallback: number): SizeField | number {
  const most = options.maxSize ?? fallback;
  const growth = options.growth ?? 0.2;
  const sources = options.sources ?? [];
  const near = sources.length > 0 ? fieldOf(sources, growth, most) : undefined;
  const own = options.size;
  if (!near && !own) return most;
  return (x, y) => {
    let h = near ? near(x, y) : most;
    if (own) {
      const wanted = own(x, y);
      if (wanted < h) h = wanted;
    }
    return h;
  };
}

/** Up to this many sources looking at each is quicker than a tree. */
const fewSources = 16;

function fieldOf(sources: readonly SizeSource[], growth: number, most: number): SizeField {
  if (sources.length > fewSources) return fromSources(sources, growth, most);
  const list = Float64Array.from(sources.flatMap(({ at, size }) => [at[0], at[1], size]));
  return (x, y) => {
    let h = most;
    for (let i = 0; i < list.length; i += 3) {
      const dx = x - list[i];
      const dy = y - list[i + 1];
      const here = list[i + 2] + growth * Math.sqrt(dx * dx + dy * dy);
      if (here < h) h = here;
    }
    return h;
  };
}

/**
 * Least of size_i + growth·|p − p_i|, by a k-d tree that knows the smallest size below each node, so that whole
 * branches are passed over (branch and bound as in nearest-neighbour search, Friedman, Bentley & Finkel 1977).
 */
function fromSources(sources: readonly SizeSource[], growth: number, most: number): SizeField {
  const n = sources.length;
  const xs = new Float64Array(n);
  const ys = new Float64Array(n);
  const hs = new Float64Array(n);
  const least = new Float64Array(n);
  const order = Int32Array.from(sources, (_, i) => i);
  const build = (low: number, high: number, axis: 0 | 1): number => {
    if (low >= high) return Number.POSITIVE_INFINITY;
    order.subarray(low, high).sort((i, j) => sources[i].at[axis] - sources[j].at[axis] || i - j);
    const middle = (low + high) >> 1;
    const other = axis === 0 ? 1 : 0;
    const { at, size } = sources[order[middle]];
    xs[middle] = at[0];
    ys[middle] = at[1];
    hs[middle] = size;
    const below = build(low, middle, other);
    const above = build(middle + 1, high, other);
    least[middle] = Math.min(size, below, above);
    return least[middle];
  };
  build(0, n, 0);
  let best = most;
  const visit = (low: number, high: number, axis: 0 | 1, x: number, y: number): void => {
    if (low >= high) return;
    const middle = (low + high) >> 1;
    if (least[middle] >= best) return;
    const dx = x - xs[middle];
    const dy = y - ys[middle];
    const here = hs[middle] + growth * Math.sqrt(dx * dx + dy * dy);
    if (here < best) best = here;
    const across = axis === 0 ? dx : dy;
    const other = axis === 0 ? 1 : 0;
    const far = growth * Math.abs(across);
    if (across < 0) {
      visit(low, middle, other, x, y);
      if (leastOf(middle + 1, high) + far < best) visit(middle + 1, high, other, x, y);
    } else {
      visit(middle + 1, high, other, x, y);
      if (leastOf(low, middle) + far < best) visit(low, middle, other, x, y);
    }
  };
  const leastOf = (low: number, high: number): number =>
    low < high ? least[(low + high) >> 1] : Number.POSITIVE_INFINITY;
  return (x, y) => {
    best = most;
    visit(0, n, 0, x, y);
    return best;
  };
}
