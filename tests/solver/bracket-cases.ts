import type { Mesh } from '../../mesher/index.ts';
import type { Problem } from '../../solver/index.ts';
import type { BracketStart } from '../../solver/trust/brackets.ts';
import { listed } from '../published/listed.ts';
import { rectangleAverage, rectangleExitTime } from '../published/rectangle-exit-time.ts';
import { rectangleMesh } from '../support/grid-mesh.ts';
import {
  absorbing,
  constant,
  conventions,
  partly,
  problem,
  reflecting,
  varying,
} from '../support/physics.ts';

/** One exact figure of a case. */
export interface ExactFigure {
  readonly figure: 'mean' | 'secondMoment' | 'rate' | { readonly shareOf: number };
  readonly start: BracketStart;
  readonly exact: number;
}

/** A compartment whose figures are known, on meshes of any edge length. */
export interface BracketCase {
  readonly name: string;
  readonly problem: Problem;
  readonly mesh: (h: number) => Mesh;
  readonly figures: readonly ExactFigure[];
}

export const even: BracketStart = { kind: 'even' };
export const point = (x: number, y: number): BracketStart => ({ kind: 'point', x, y });

export const mean = (start: BracketStart, exact: number): ExactFigure => ({ figure: 'mean', start, exact });
const second = (start: BracketStart, exact: number): ExactFigure => ({
  figure: 'secondMoment',
  start,
  exact,
});
export const share = (shareOf: number, start: BracketStart, exact: number): ExactFigure => ({
  figure: { shareOf },
  start,
  exact,
});
export const rate = (exact: number): ExactFigure => ({ figure: 'rate', start: even, exact });

export const all = (count: number) => problem(constant(1), Array(count).fill(absorbing()));
/** Walls in the order bottom, right, top, left. */
const strip = (h: number): Mesh =>
  rectangleMesh({ x: [0, 1], y: [0, 0.25], columns: Math.ceil(1 / h), rows: Math.ceil(0.25 / h) });
const ends = (left: Parameters<typeof problem>[1][0], right: typeof left) =>
  [reflecting, right, reflecting, left] as const;
export const box = (a: number, b: number) => (h: number) =>
  rectangleMesh({ x: [0, a], y: [0, b], columns: Math.ceil(a / h), rows: Math.ceil(b / h) });

/** E[τ²] of the rectangle 0 < x < a, 0 < y < b, D = 1, all absorbing, by its double sine series: average, and centre. */
function rectangleSecondMoment(a: number, b: number): { average: number; centre: number } {
  let average = 0;
  let centre = 0;
  for (let m = 1; m < 800; m += 2) {
    for (let n = 1; n < 800; n += 2) {
      const eigenvalue = Math.PI ** 2 * ((m / a) ** 2 + (n / b) ** 2);
      const amplitude = 16 / (Math.PI ** 2 * m * n);
      average += amplitude ** 2 / (2 * eigenvalue ** 2);
      centre += ((2 * amplitude) / eigenvalue ** 2) * (((m + n) / 2) % 2 === 1 ? 1 : -1);
    }
  }
  return { average, centre };
}

const rectangles = [1, 1.5, 2, 3, 5, 8].map((a): BracketCase => {
  const moments = rectangleSecondMoment(a, 1);
  return {
    name: `rect-A-${a}`,
    ...{ problem: all(4), mesh: box(a, 1) },
    figures: [
      mean(even, rectangleAverage(a, 1)),
      mean(point(a / 2, 0.5), rectangleExitTime(a, 1, a / 2, 0.5)),
      mean(point(a / 4, 0.25), listed(`rect-A-${a}`, 'quarter point u')),
      second(even, moments.average),
      second(point(a / 2, 0.5), moments.centre),
      rate(Math.PI ** 2 * (1 + 1 / a ** 2)),
    ],
  };
});

const squareOfX = (x: number): number => (1 + x) ** 2;
const convention = { ito: 'Ito', stratonovich: 'Stratonovich', isothermal: 'isothermal' } as const;
/** Averages over 0 < x < 1 of the shares x, log₂(1 + x) and 2x/(1 + x) [strip-varD-hit]. */
const shareOfRightEnd = {
  ito: 1 / 2,
  stratonovich: 2 - 1 / Math.LN2,
  isothermal: 2 - 2 * Math.LN2,
} as const;

const strips: readonly BracketCase[] = [
  {
    name: 'strip-AA',
    ...{ problem: problem(constant(1), ends(absorbing(0), absorbing(1))), mesh: strip },
    figures: [
      mean(even, 1 / 12),
      mean(point(0.5, 0.1), 1 / 8),
      share(0, point(0.25, 0.05), 3 / 4),
      // u₂ = (x − 2x³ + x⁴)/12, by substitution.
      second(even, (1 / 2 - 2 / 4 + 1 / 5) / 12),
      second(point(0.5, 0.1), (0.5 - 0.25 + 0.0625) / 12),
      rate(Math.PI ** 2),
    ],
  },
  {
    name: 'strip-RA',
    ...{ problem: problem(constant(1), ends(reflecting, absorbing())), mesh: strip },
    figures: [
      mean(even, 1 / 3),
      mean(point(0, 0.1), 1 / 2),
      mean(point(0, 0), 1 / 2),
      mean(point(0.5, 0.25), 3 / 8),
      rate(Math.PI ** 2 / 4),
      // u₂ = 5/12 − x²/2 + x⁴/12, by substitution.
      second(point(0, 0.1), 5 / 12),
    ],
  },
  {
    name: 'strip-RRob-1',
    ...{ problem: problem(constant(1), ends(reflecting, partly(1))), mesh: strip },
    figures: [mean(even, 4 / 3), mean(point(0, 0.1), 1.5), rate(listed('strip-RRob-rate', 'rate(Bi=1)'))],
  },
  {
    name: 'strip-ARob-3',
    ...{ problem: problem(constant(1), ends(absorbing(0), partly(3, 1))), mesh: strip },
    figures: [mean(point(0.5, 0.1), 0.1875), share(1, point(0.5, 0.1), 0.375), share(0, even, 5 / 8)],
  },
  ...conventions.flatMap((noise): BracketCase[] => [
    {
      name: `strip-AA-varD ${noise}`,
      problem: problem(varying(squareOfX), ends(absorbing(0), absorbing(1)), noise),
      mesh: strip,
      figures: [
        mean(even, listed('strip-AA-varD', `avg ${convention[noise]}`)),
        share(1, even, shareOfRightEnd[noise]),
      ],
    },
    {
      name: `strip-RA-varD ${noise}`,
      problem: problem(varying(squareOfX), ends(reflecting, absorbing()), noise),
      mesh: strip,
      figures: [mean(even, listed('strip-RA-varD', `avg ${convention[noise]}`))],
    },
    {
      name: `strip-2media ${noise}`,
      problem: problem([constant(2), constant(0.5)], ends(reflecting, absorbing()), noise),
      mesh: (h) =>
        rectangleMesh({
          ...{ x: [0, 1], y: [0, 0.25], columns: 10 * Math.ceil(0.1 / h), rows: Math.ceil(0.25 / h) },
          ...{ region: (x) => (x < 0.3 ? 0 : 1), regionSets: [[], [0]] },
        }),
      figures: [
        mean(even, listed('strip-2media', `avg ${convention[noise]}`)),
        mean(point(0, 0.1), listed('strip-2media', `u(0) ${convention[noise]}`)),
      ],
    },
  ]),
];

/** Strips with a drift v along x; averages as listed. */
const drifting = (id: string, v: number, left: typeof reflecting): BracketCase => ({
  name: id,
  problem: {
    ...problem(constant(1), ends(left, absorbing(1))),
    media: [{ diffusion: constant(1), drift: { kind: 'components', x: constant(v), y: constant(0) } }],
  },
  mesh: strip,
  figures: [mean(even, listed(id, 'avg'))],
});

const withDrift: readonly BracketCase[] = [
  drifting('strip-AA-drift1', 1, absorbing(0)),
  drifting('strip-AA-drift-5', -5, absorbing(0)),
  drifting('strip-RA-drift2', 2, reflecting),
  drifting('strip-RA-drift-2', -2, reflecting),
  {
    name: 'strip-AA-kill1',
    problem: {
      ...problem(constant(1), ends(absorbing(0), absorbing(0))),
      media: [{ diffusion: constant(1), loss: constant(1) }],
    },
    mesh: strip,
    figures: [
      mean(even, listed('strip-AA-kill1', 'avg')),
      // Caught or lost, each particle's chance to be lost is its mean time in the strip times the rate 1.
      share(-1, even, listed('strip-AA-kill1', 'avg')),
      share(0, even, 1 - listed('strip-AA-kill1', 'avg')),
      rate(Math.PI ** 2 + 1),
    ],
  },
];

/** Rectangles and strips; each source in tests/data/checks.json unless it is given. */
export const straightCases: readonly BracketCase[] = [...rectangles, ...strips, ...withDrift];
