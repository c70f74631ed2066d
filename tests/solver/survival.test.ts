import { Matrix } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { smallExponential } from '../../solver/answers/small-exponential.ts';
import {
  assemble,
  evenStart,
  meanExitTime,
  type Problem,
  pointStart,
  type System,
  survival,
  valueFromStart,
} from '../../solver/index.ts';
import { discMesh, rectangleMesh } from '../support/grid-mesh.ts';
import {
  absorbing,
  constant,
  nodeAt,
  partly,
  problem,
  reflecting,
  relativeError,
  varying,
} from '../support/physics.ts';

const all = [absorbing(), absorbing(), absorbing(), absorbing()];
const atNode = (system: System, x: number, y: number): Float64Array => {
  const weights = new Float64Array(system.freeOf.length);
  weights[nodeAt(system.mesh.nodes, x, y)] = 1;
  return weights;
};

describe('survival', () => {
  it('unit square, all absorbing, from the centre [Newman 1931: product of two strips]', () => {
    const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 64, rows: 64 });
    const system = assemble(mesh, problem(constant(1), all));
    const centre = atNode(system, 0.5, 0.5);
    const s = survival(system, [centre, evenStart(mesh)], { times: [0.02, 0.05] });
    expect(relativeError(s.timeTo(centre, 0.5), 0.0592770928659238)).toBeLessThan(1e-3);
    expect(relativeError(s.timeTo(centre, 0.05), 0.17624113791455)).toBeLessThan(1e-3);
    expect(relativeError(s.at(centre, 0.1), 0.225138350057624)).toBeLessThan(2e-3); // decays e^-λt: twice the error of λt
    expect(relativeError(s.at(evenStart(mesh), 0.05), 0.24592889007146)).toBeLessThan(2e-3);
    expect(relativeError(1 / s.decayTime, 2 * Math.PI ** 2)).toBeLessThan(1e-3);
    expect(s.at(centre, 0)).toBe(1);
  });

  it('disc, rim absorbing: median, 95 and 99 % from the centre, j₀₁² [Carslaw & Jaeger 1959, sec. 7.6]', () => {
    const system = assemble(discMesh({ radius: 1, rings: 48 }), problem(constant(1), [absorbing()]));
    const start = pointStart(system.mesh, 0, [1, 0, 0]);
    const s = survival(system, [start]);
    expect(relativeError(s.timeTo(start, 0.5), 0.20052408141003)).toBeLessThan(1e-3);
    expect(relativeError(s.timeTo(start, 0.05), 0.599491197644072)).toBeLessThan(1e-3);
    expect(relativeError(s.timeTo(start, 0.01), 0.877787308258815)).toBeLessThan(1e-3);
    expect(relativeError(1 / s.decayTime, 5.78318596294678)).toBeLessThan(1e-3);
  });

  it.each([
    [0.1, 0.0967538743735175],
    [1, 0.740173884394967],
    [10, 2.04166950894692],
  ])(
    'strip, x = 0 reflecting, κL/D = %d: rate ζ², ζ tan ζ = κL/D [Carslaw & Jaeger 1959, app. IV]',
    (kappa, rate) => {
      const mesh = rectangleMesh({ x: [0, 1], y: [0, 0.1], columns: 60, rows: 4 });
      const system = assemble(
        mesh,
        problem(constant(1), [reflecting, partly(kappa), reflecting, reflecting]),
      );
      expect(relativeError(1 / survival(system, [evenStart(mesh)]).decayTime, rate)).toBeLessThan(1e-3);
    },
  );
});

describe('survival on the discrete process', () => {
  /** e^(−tM⁻¹A)1 from the dense generator: Taylor sum of a short step, squared up twelve times. */
  const dense = (system: System, t: number): number[] => {
    const g = Matrix.zeros(system.size, system.size);
    const { start, column, value } = system.rates;
    for (let i = 0; i < system.size; i++) {
      const mass = system.load[i] ?? Number.NaN;
      g.set(i, i, -(system.diagonal[i] ?? 0) / mass);
      for (let p = start[i] ?? 0; p < (start[i + 1] ?? 0); p++)
        g.set(i, column[p] ?? 0, (value[p] ?? 0) / mass);
    }
    let step = Matrix.eye(system.size, system.size);
    let term = step;
    const small = Matrix.mul(g, t / 4096);
    for (let k = 1; k < 20; k++) {
      term = term.mmul(small).div(k);
      step = Matrix.add(step, term);
    }
    for (let k = 0; k < 12; k++) step = step.mmul(step);
    return step.mmul(Matrix.ones(system.size, 1)).getColumn(0);
  };
  const spinning: Problem = {
    ...problem(constant(1), [absorbing(0)]),
    media: [
      {
        diffusion: constant(1),
        drift: { kind: 'components', x: varying((x, y) => -9 * y + x), y: varying((x) => 9 * x + 3) },
        loss: constant(0.7),
      },
    ],
  };
  it.each([
    [
      'reversible',
      problem(
        varying((x) => 1 + x * x),
        [partly(3)],
        'ito',
      ),
    ],
    ['irreversible, with loss', spinning],
  ])('%s: equals the exponential of the dense generator at every node', (_, given) => {
    const mesh = discMesh({ radius: 1, rings: 4 });
    const system = assemble(mesh, given);
    const start = evenStart(mesh);
    const s = survival(system, [start], { tolerance: 1e-10, times: [0.05, 0.3] });
    for (const t of [0.05, 0.3]) {
      const expected = dense(system, t);
      const field = s.field(t);
      expected.forEach((value, i) => {
        expect(field[system.nodeOf[i] ?? 0]).toBeCloseTo(value, 7);
      });
      expect(s.at(start, t)).toBeCloseTo(valueFromStart(start, field), 7);
    }
  });

  it('integrates to the mean exit time: ∫₀^∞ S dt = u', () => {
    const mesh = discMesh({ radius: 1, rings: 8 });
    for (const given of [problem(constant(1), [partly(1)]), spinning]) {
      const system = assemble(mesh, given);
      const start = evenStart(mesh);
      const s = survival(system, [start], { tolerance: 1e-9 });
      const mean = valueFromStart(start, meanExitTime(system));
      let sum = 0;
      const n = 4000; // t = mean·x²·40: Simpson over x on [0, 1]; the rest is below 1e-12
      for (let k = 0; k <= n; k++) {
        const x = k / n;
        sum +=
          ((k === 0 || k === n ? 1 : k % 2 ? 4 : 2) / (3 * n)) *
          s.at(start, 40 * mean * x * x) *
          80 *
          mean *
          x;
      }
      expect(relativeError(sum, mean)).toBeLessThan(1e-6);
    }
  });

  it('a start partly on an absorbing wall begins with what is off it, and says 0 for shares never reached', () => {
    const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 8, rows: 8 });
    const system = assemble(mesh, problem(constant(1), all));
    const start = evenStart(mesh);
    const s = survival(system, [start]);
    expect(s.at(start, 0)).toBeCloseTo(49 / 64, 12);
    expect(s.timeTo(start, 0.9)).toBeLessThan(1e-12);
  });
});

it('the small exponential agrees with its series, for complex pairs and for a Jordan block', () => {
  const turning = new Matrix([
    [-1, 2, 0],
    [-2, -1, 0],
    [0, 1, -3],
  ]);
  const jordan = new Matrix([
    [-2, 1],
    [0, -2],
  ]);
  const series = (g: Matrix, t: number): number[] => {
    let sum = Matrix.eye(g.rows, g.rows);
    let term = sum;
    for (let k = 1; k < 60; k++) {
      term = term.mmul(g).mul(t / k);
      sum = Matrix.add(sum, term);
    }
    return sum.getColumn(0);
  };
  for (const g of [turning, jordan, jordan.transpose()]) {
    smallExponential(g)(1.3).forEach((value, i) => {
      expect(value).toBeCloseTo(series(g, 1.3)[i] ?? Number.NaN, 12);
    });
  }
});
