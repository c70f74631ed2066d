import type { Chain, Domain, MeshOptions, Point } from '../../mesher/index.ts';

/** A domain with straight walls, what to ask of its mesh, and a point in each hole for meshers that need one. */
export interface BenchDomain {
  readonly name: string;
  readonly domain: Domain;
  readonly options: MeshOptions & { readonly maxSize: number; readonly growth: number };
  readonly seeds: readonly Point[];
}

let tag = 0;

function polygon(name: string, points: readonly Point[]): Chain {
  return {
    name,
    pieces: points.map((from, i) => ({
      tag: tag++,
      curve: { kind: 'line', from, to: points[(i + 1) % points.length] ?? from },
    })),
  };
}

function ring([x, y]: Point, radius: number, count: number): Point[] {
  return Array.from({ length: count }, (_, i) => {
    const angle = (2 * Math.PI * i) / count;
    return [x + radius * Math.cos(angle), y + radius * Math.sin(angle)];
  });
}

const square: readonly Point[] = [
  [0, 0],
  [1, 0],
  [1, 1],
  [0, 1],
];

const notched: readonly Point[] = [
  [0, 0],
  [2, 0],
  [2, 1],
  [1.2, 1],
  [1.2, 0.6],
  [0.8, 0.6],
  [0.8, 1],
  [0, 1],
];

/** Twelve slots cut into the top of the square, from right to left. */
const comb: readonly Point[] = [
  [0, 0],
  [1, 0],
  [1, 1],
  ...Array.from({ length: 12 }, (_, i) => i).flatMap((i): Point[] => [
    [1 - (i + 0.25) / 12, 1],
    [1 - (i + 0.25) / 12, 0.2],
    [1 - (i + 0.75) / 12, 0.2],
    [1 - (i + 0.75) / 12, 1],
  ]),
  [0, 1],
];

/** Compartments with an even size; `size` is the longest edge. */
export function sized(name: 'square' | 'notched' | 'comb', size: number): BenchDomain {
  const options = { maxSize: size, growth: 0.2, maxNodes: 5_000_000 };
  const make = (outline: readonly Point[], posts: readonly [Point, number][]): BenchDomain => ({
    name: `${name}, even size ${size}`,
    domain: {
      outline: polygon('outline', outline),
      holes: posts.map(([at, r], i) => polygon(`post ${i + 1}`, ring(at, r, 48))),
      innerWalls: [],
      regions: [],
      tolerance: 1e-12,
    },
    options,
    seeds: posts.map(([at]) => at),
  });
  if (name === 'square') return make(square, []);
  if (name === 'comb') return make(comb, []);
  return make(notched, [
    [[0.4, 0.4], 0.15],
    [[1.5, 0.5], 0.2],
    [[1, 0.25], 0.1],
  ]);
}

/** Graded from 1e-7 at re-entrant corners and places where the kind of a wall may change. */
export function graded(growth: number): BenchDomain {
  const base = sized('notched', 0.05);
  const at: Point[] = [
    [1.2, 0.6],
    [0.8, 0.6],
    [0, 0.5],
    [0.3, 0],
    [2, 0.3],
  ];
  return {
    ...base,
    name: `notched, graded by ${growth} from 1e-7 at five places`,
    options: { ...base.options, growth, sources: at.map((p) => ({ at: p, size: 1e-7 })) },
  };
}
