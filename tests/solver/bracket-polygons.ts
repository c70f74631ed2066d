import { type Chain, type Domain, type Mesh, meshDomain, type Point } from '../../mesher/index.ts';
import { listed } from '../published/listed.ts';
import { rectangleAverage } from '../published/rectangle-exit-time.ts';
import { absorbing, constant, partly, problem, reflecting } from '../support/physics.ts';
import {
  all,
  type BracketCase,
  box,
  even,
  mean,
  point,
  rate,
  share,
  straightCases,
} from './bracket-cases.ts';

/** A closed polygon as a chain whose side k has the tag `first` + k. */
function closed(name: string, points: readonly Point[], first = 0): Chain {
  const at = (k: number): Point => points[k % points.length] ?? [0, 0];
  return {
    name,
    pieces: points.map((from, k) => ({ curve: { kind: 'line', from, to: at(k + 1) }, tag: first + k })),
  };
}

function polygonMesh(
  points: readonly Point[],
  singular: readonly Point[] = [],
  holes: readonly Chain[] = [],
): (h: number) => Mesh {
  const domain: Domain = {
    outline: closed('outline', points),
    ...{ holes, innerWalls: [], regions: [], tolerance: 1e-12 },
  };
  return (h) =>
    meshDomain(domain, { maxSize: h, sources: singular.map((at) => ({ at, size: h / 16 })), growth: 0.2 });
}

const lShape: readonly Point[] = [
  [0, 0],
  [1, 0],
  [1, 1],
  [-1, 1],
  [-1, -1],
  [0, -1],
];
const plus: readonly Point[] = [
  ...([
    [1.5, -0.5],
    [1.5, 0.5],
    [0.5, 0.5],
    [0.5, 1.5],
    [-0.5, 1.5],
    [-0.5, 0.5],
  ] as const),
  ...([
    [-1.5, 0.5],
    [-1.5, -0.5],
    [-0.5, -0.5],
    [-0.5, -1.5],
    [0.5, -1.5],
    [0.5, -0.5],
  ] as const),
];
const inner: readonly Point[] = [
  [0.5, 0.5],
  [-0.5, 0.5],
  [-0.5, -0.5],
  [0.5, -0.5],
];
const octagon = Array.from({ length: 8 }, (_, k): Point => {
  const angle = ((2 * k + 1) * Math.PI) / 8;
  const reach = 0.5 / Math.cos(Math.PI / 8);
  return [reach * Math.cos(angle), reach * Math.sin(angle)];
});
const triangle = (b: number): readonly Point[] => [
  [-b, 0],
  [b, 0],
  [0, 1],
];

const corners: readonly BracketCase[] = [
  {
    name: 'L-A',
    ...{ problem: all(6), mesh: polygonMesh(lShape, [[0, 0]]) },
    figures: [
      mean(even, listed('L-A', 'avg')),
      mean(point(-0.5, 0.5), listed('L-A', 'u(-0.5,0.5)')),
      mean(point(0.5, 0.5), listed('L-A', 'u(0.5,0.5)')),
      rate(listed('L-eig', 'rate 1')),
    ],
  },
  {
    name: 'plus-A',
    ...{
      problem: all(12),
      mesh: polygonMesh(
        plus,
        plus.filter(([x, y]) => Math.abs(x) === Math.abs(y)),
      ),
    },
    figures: [
      mean(even, listed('plus-A', 'avg')),
      mean(point(0, 0), listed('plus-A', 'u(centre)')),
      mean(point(1, 0), listed('plus-A', 'u(1,0) arm centre')),
    ],
  },
  {
    name: 'tri-equi-A',
    ...{
      problem: all(3),
      mesh: polygonMesh([
        [0, 0],
        [1, 0],
        [0.5, Math.sqrt(3) / 2],
      ]),
    },
    figures: [mean(even, 1 / 80), mean(point(0.5, Math.sqrt(3) / 6), 1 / 36), rate((16 * Math.PI ** 2) / 3)],
  },
  {
    name: 'tri-right-A',
    ...{
      problem: all(3),
      mesh: polygonMesh([
        [0, 0],
        [1, 0],
        [0, 1],
      ]),
    },
    figures: [mean(even, listed('tri-right-A', 'avg')), rate(5 * Math.PI ** 2)],
  },
  ...[30, 90].map(
    (apex): BracketCase => ({
      name: `tri-iso-${apex}`,
      ...{ problem: all(3), mesh: polygonMesh(triangle(Math.tan((apex * Math.PI) / 360))) },
      figures: [
        mean(even, listed(`tri-iso-${apex}`, 'avg')),
        mean(point(0, 1 / 3), listed(`tri-iso-${apex}`, 'u(0,1/3)')),
      ],
    }),
  ),
  {
    name: 'octagon-A',
    ...{ problem: all(8), mesh: polygonMesh(octagon) },
    figures: [mean(even, listed('octagon-A', 'avg')), mean(point(0, 0), listed('octagon-A', 'u(centre)'))],
  },
  {
    name: 'sqring-inA',
    problem: problem(constant(1), [...Array(4).fill(reflecting), ...Array(4).fill(absorbing())]),
    mesh: polygonMesh(
      [
        [-1, -1],
        [1, -1],
        [1, 1],
        [-1, 1],
      ],
      inner,
      [closed('hole', inner, 4)],
    ),
    figures: [
      mean(even, listed('sqring-inA', 'avg')),
      mean(point(1, 0), listed('sqring-inA', 'u(1,0)')),
      mean(point(1, 1), listed('sqring-inA', 'u(1,1)')),
    ],
  },
];

const windows: readonly BracketCase[] = [
  {
    name: 'sq-window-mid-0.05',
    problem: problem(constant(1), [reflecting, absorbing(), reflecting, reflecting, reflecting, reflecting]),
    mesh: polygonMesh(
      [
        [0, 0],
        [0.45, 0],
        [0.55, 0],
        [1, 0],
        [1, 1],
        [0, 1],
      ],
      [
        [0.45, 0],
        [0.55, 0],
      ],
    ),
    figures: [
      mean(even, listed('sq-window-mid-0.05', 'avg')),
      mean(point(0.5, 0.5), listed('sq-window-mid-0.05', 'u(0.5,0.5)')),
      mean(point(1, 1), listed('sq-window-mid-0.05', 'u(far corner)')),
    ],
  },
  {
    name: 'sq-window-corner-0.1',
    problem: problem(constant(1), [absorbing(), reflecting, reflecting, reflecting, reflecting]),
    mesh: polygonMesh(
      [
        [0, 0],
        [0.1, 0],
        [1, 0],
        [1, 1],
        [0, 1],
      ],
      [[0.1, 0]],
    ),
    figures: [
      mean(even, listed('sq-window-corner-0.1', 'avg')),
      mean(point(0.5, 0.5), listed('sq-window-corner-0.1', 'u(0.5,0.5)')),
      mean(point(1, 1), listed('sq-window-corner-0.1', 'u(1,1)')),
    ],
  },
  {
    name: 'rect-halfbottom',
    problem: problem(constant(1), [absorbing(), reflecting, reflecting, reflecting, reflecting]),
    mesh: polygonMesh(
      [
        [-1, 0],
        [0, 0],
        [1, 0],
        [1, 1],
        [-1, 1],
      ],
      [[0, 0]],
    ),
    figures: [
      mean(even, listed('rect-halfbottom', 'avg')),
      mean(point(0, 0.5), listed('rect-halfbottom', 'u(0,0.5)')),
      mean(point(1, 1), listed('rect-halfbottom', 'u(1,1)')),
    ],
  },
  {
    name: 'motz',
    problem: problem(constant(1), [absorbing(1), reflecting, absorbing(0), reflecting, reflecting]),
    mesh: polygonMesh(
      [
        [-1, 0],
        [0, 0],
        [1, 0],
        [1, 1],
        [-1, 1],
      ],
      [[0, 0]],
    ),
    figures: [
      share(0, point(0, 0.5), listed('motz', 'pA(0,0.5)')),
      share(0, point(-0.5, 0.5), listed('motz', 'pA(-0.5,0.5)')),
      share(0, point(0.5, 0), listed('motz', 'pA(0.5,0)')),
      share(1, point(-1, 1), 1 - listed('motz', 'pA(-1,1)')),
    ],
  },
  {
    name: 'rect-one-side',
    problem: problem(constant(1), [absorbing(0), absorbing(1), absorbing(1), absorbing(1)]),
    mesh: polygonMesh(
      [
        [0, 0],
        [2, 0],
        [2, 1],
        [0, 1],
      ],
      [
        [0, 0],
        [2, 0],
      ],
    ),
    figures: [
      share(0, point(1, 0.5), listed('rect-one-side', 'p(1,0.5)')),
      share(0, point(0.5, 0.25), listed('rect-one-side', 'p(0.5,0.25)')),
      share(1, point(1.9, 0.5), 1 - listed('rect-one-side', 'p(1.9,0.5)')),
    ],
  },
];

const kappaPlate = 750 / 52;
const partlyAbsorbing: readonly BracketCase[] = [
  {
    name: 'square-Rob2',
    problem: problem(constant(1), [partly(2), partly(2), partly(2), partly(2)]),
    mesh: box(1, 1),
    figures: [
      mean(even, listed('square-Rob2', 'avg')),
      mean(point(0.5, 0.5), listed('square-Rob2', 'u(centre)')),
      rate(listed('square-Rob2', 'rate')),
    ],
  },
  {
    name: 'thermal-plate',
    problem: problem(constant(1), [absorbing(0), partly(kappaPlate, 1), partly(kappaPlate, 1), reflecting]),
    mesh: polygonMesh(
      [
        [0, 0],
        [0.6, 0],
        [0.6, 1],
        [0, 1],
      ],
      [[0.6, 0]],
    ),
    figures: [share(0, point(0, 0.5), listed('thermal-plate', 'pA(0,0.5)'))],
  },
  {
    name: 'rect-aniso',
    problem: {
      ...problem(constant(1), [absorbing(), absorbing(), absorbing(), absorbing()]),
      media: [{ diffusion: constant(1), tensor: { kind: 'constant', value: [4, 0, 1] } }],
    },
    mesh: box(1, 1),
    figures: [mean(even, rectangleAverage(0.5, 1)), rate(5 * Math.PI ** 2)],
  },
];

/** Every exact polygonal reversible check, with its source in tests/data/checks.json. */
export const bracketCases: readonly BracketCase[] = [
  ...straightCases,
  ...corners,
  ...windows,
  ...partlyAbsorbing,
];
