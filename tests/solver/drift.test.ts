import { describe, expect, it } from 'vitest';
import {
  assemble,
  type Coefficient,
  type Drift,
  evenStart,
  exitShares,
  meanExitTime,
  type NoiseConvention,
  type Problem,
  valueFromStart,
  type Wall,
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

type Place = (x: number, y: number) => number;
const push = (x: Place | number, y: Place | number = 0): Drift => {
  const part = (c: Place | number): Coefficient => (typeof c === 'number' ? constant(c) : varying(c));
  return { kind: 'components', x: part(x), y: part(y) };
};
const potential = (v: Place): Drift => ({ kind: 'potential', value: varying(v) });
function drifting(
  d: number,
  drift: Drift,
  walls: readonly Wall[],
  noise: NoiseConvention = 'isothermal',
): Problem {
  return { ...problem(constant(d), walls, noise), media: [{ diffusion: constant(d), drift }] };
}
const strip = (columns: number) => rectangleMesh({ x: [0, 1], y: [0, 0.1], columns, rows: 4 });
const bothEnds = [reflecting, absorbing(1), reflecting, absorbing(0)];

describe('strip with constant drift v, D = 1', () => {
  // Redner 2001, sec. 2.2.2; Gardiner 2009, sec. 5.2: u = (p − x)/v with p = (1 − e^−vx)/(1 − e^−v).
  const share: (v: number, x: number) => number = (v, x) => Math.expm1(-v * x) / Math.expm1(-v);

  it.each([1, 20, -5, 100, -100])('both ends absorbing, v = %d: time and share at x = 0.1, 0.5, 0.9', (v) => {
    const mesh = strip(100);
    const system = assemble(mesh, drifting(1, push(v), bothEnds));
    const u = meanExitTime(system);
    const p = exitShares(system)[1];
    for (const x of [0.1, 0.5, 0.9]) {
      const node = nodeAt(mesh.nodes, x, 0.05);
      expect(relativeError(u[node], (share(v, x) - x) / v)).toBeLessThan(1e-3);
      expect(relativeError(p?.[node], share(v, x))).toBeLessThan(1e-9); // exponential fitting is exact at nodes
    }
    expect(system.psi).toBeDefined();
  });

  it.each([2, -2, 100])('x = 0 reflecting, v = %d: (1 − x)/v − (e^−vx − e^−v)/v²', (v) => {
    const mesh = strip(100);
    const walls = [reflecting, absorbing(), reflecting, reflecting];
    const u = meanExitTime(assemble(mesh, drifting(1, push(v), walls)));
    for (const x of [0, 0.5]) {
      const exact = (1 - x) / v - (Math.exp(-v * x) - Math.exp(-v)) / v ** 2;
      expect(relativeError(u[nodeAt(mesh.nodes, x, 0.05)], exact)).toBeLessThan(1e-3);
    }
  });

  it('held against x = 0 the mass is weighed by the trapezoidal rule: off by (vh/D)²/12, and by a quarter at half h', () => {
    // Known price of M_i = ∫ m φ_i (METHODS 4): ∫ e^−vx dx by trapezoids is (1 + (vh)²/12)/v (Euler–Maclaurin).
    const walls = [reflecting, absorbing(), reflecting, reflecting];
    const v = 20;
    const exact = -1 / v - (1 - Math.exp(v)) / v ** 2;
    for (const columns of [100, 200]) {
      const mesh = strip(columns);
      const u = meanExitTime(assemble(mesh, drifting(1, push(-v), walls)));
      const error = (u[nodeAt(mesh.nodes, 0, 0.05)] ?? Number.NaN) / exact - 1;
      expect(error / ((v / columns) ** 2 / 12)).toBeCloseTo(1, 1);
    }
  });

  it('the drift stays out of the wall condition of u: 0.1441 at a wall with κ = 3, not 0.4323', () => {
    // x = 0 reflecting, x = 1 partly absorbing: u'' + vu' = −1, u'(0) = 0 gives u' = −(1 − e^−vx)/v, and
    // u'(1) + 3u(1) = 0 gives u(1) = (1 − e^−v)/3v. With the drift in it, u' + (3 − v)u = 0, three times that at v = 2.
    const mesh = strip(100);
    const walls = [reflecting, partly(3), reflecting, reflecting];
    for (const [v, exact] of [
      [2, 0.1441108],
      [-2, 1.0648427],
    ] as const) {
      expect(-Math.expm1(-v) / (3 * v)).toBeCloseTo(exact, 6);
      const u = meanExitTime(assemble(mesh, drifting(1, push(v), walls)));
      expect(relativeError(u[nodeAt(mesh.nodes, 1, 0.05)], -Math.expm1(-v) / (3 * v))).toBeLessThan(1e-3);
    }
  });
});

describe('central pull b = −kx', () => {
  it('strip [−1, 1], k = 1 and 4 [Siegert 1951; Darling & Siegert 1953]', () => {
    const mesh = rectangleMesh({ x: [-1, 1], y: [0, 0.1], columns: 120, rows: 4 });
    for (const [k, atMiddle, atHalf] of [
      [1, 0.595749318512758, 0.465362618440813],
      [4, 1.12540060405727, 0.976463274429079],
    ] as const) {
      const u = meanExitTime(
        assemble(
          mesh,
          drifting(
            1,
            push((x) => -k * x),
            bothEnds,
          ),
        ),
      );
      expect(relativeError(u[nodeAt(mesh.nodes, 0, 0.05)], atMiddle)).toBeLessThan(1e-3);
      expect(relativeError(u[nodeAt(mesh.nodes, 0.5, 0.05)], atHalf)).toBeLessThan(1e-3);
    }
  });

  it('disc, k = 1, entered as a field and as a potential: the same [Gardiner 2009, sec. 5.2]', () => {
    const mesh = discMesh({ radius: 1, rings: 48 });
    const field = assemble(
      mesh,
      drifting(
        1,
        push(
          (x) => -x,
          (_, y) => -y,
        ),
        [absorbing()],
      ),
    );
    const well = assemble(
      mesh,
      drifting(
        1,
        potential((x, y) => (x * x + y * y) / 2),
        [absorbing()],
      ),
    );
    const u = meanExitTime(field);
    expect(relativeError(u[0], 0.285075710260793)).toBeLessThan(1e-3);
    expect(relativeError(u[nodeAt(mesh.nodes, 0.5, 0)], 0.220567034343133)).toBeLessThan(1e-3);
    meanExitTime(well).forEach((value, i) => {
      expect(value).toBeCloseTo(u[i] ?? Number.NaN, 12);
    });
  });
});

describe('constant drift in two dimensions', () => {
  it.each([
    [1, 0.242499612580802, 0.161709447683056, 0.206652353954829, 0.182339381224211, 0.65385322817322],
    [4, 0.174443664491002, 0.0942722972440911, 0.204947330808213, 0.134991708182685, 0.9249531166932],
  ])(
    'disc, v = %d along x: times and share of the right half rim [Wendel 1980; von Mises exit law]',
    (v, ...expected) => {
      const mesh = discMesh({ radius: 1, rings: 64, tag: (x) => (x > 0 ? 0 : 1) });
      const system = assemble(mesh, drifting(1, push(v), [absorbing(0), absorbing(1)]));
      const u = meanExitTime(system);
      const found = [
        u[0],
        ...[
          [0.5, 0],
          [-0.5, 0],
          [0, 0.5],
        ].map(([x, y]) => u[nodeAt(mesh.nodes, x ?? 0, y ?? 0)]),
      ];
      found.push(exitShares(system)[0]?.[0]);
      found.forEach((value, i) => {
        expect(relativeError(value, expected[i] ?? Number.NaN)).toBeLessThan(1.5e-3);
      });
    },
  );

  it('unit square, drift (3, 4), all absorbing [gauge transform and double sine series]', () => {
    const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 80, rows: 80 });
    const walls = [absorbing(), absorbing(), absorbing(), absorbing()];
    const u = meanExitTime(assemble(mesh, drifting(1, push(3, 4), walls)));
    expect(relativeError(u[nodeAt(mesh.nodes, 0.5, 0.5)], 0.0608909344)).toBeLessThan(1e-3);
    expect(relativeError(u[nodeAt(mesh.nodes, 0.25, 0.25)], 0.0567810175)).toBeLessThan(1e-3);
    expect(relativeError(u[nodeAt(mesh.nodes, 0.75, 0.25)], 0.0403139039)).toBeLessThan(1e-3);
  });
});

describe('double wells at D = 0.1', () => {
  it('V = (x² − 1)²/4 + y²/2 from (−1, 0), absorbing x = 1 [Gardiner 2009, sec. 5.2.7: double quadrature]', () => {
    const mesh = rectangleMesh({ x: [-2, 1], y: [-1, 1], columns: 150, rows: 20 });
    const drift = potential((x, y) => ((x * x - 1) ** 2 / 4 + (y * y) / 2) / 0.1);
    const u = meanExitTime(
      assemble(mesh, drifting(0.1, drift, [reflecting, absorbing(), reflecting, reflecting])),
    );
    expect(relativeError(u[nodeAt(mesh.nodes, -1, 0)], 66.268626365)).toBeLessThan(1e-3);
  });

  it('V = (x² − 1)²/4 + (1 + x²)y²/2, by components [Bovier et al. 2004; two-dimensional collocation]', () => {
    const mesh = rectangleMesh({ x: [-2, 1], y: [-1.2, 1.2], columns: 120, rows: 96 });
    const drift = push(
      (x, y) => x - x ** 3 - x * y * y,
      (x, y) => -(1 + x * x) * y,
    );
    const system = assemble(mesh, drifting(0.1, drift, [reflecting, absorbing(), reflecting, reflecting]));
    const u = meanExitTime(system);
    expect(system.cycle).toBeUndefined();
    expect(relativeError(u[nodeAt(mesh.nodes, -1, 0)], 53.08254837)).toBeLessThan(1e-3);
    expect(relativeError(u[nodeAt(mesh.nodes, -0.5, 0)], 49.32614807)).toBeLessThan(1e-3);
  });
});

it('drift and varying D together keep the convention apart: strip, D = (1 + x)², b = 1', () => {
  // (k e^ψ u')' = −m e^ψ with ψ' = 1/D: u(0) = ∫₀¹ e^−ψ(y)/k(y) ∫₀^y m e^ψ dz dy by 2000 midpoints twice.
  const exact = (alpha: number): number => {
    const n = 4000;
    let inner = 0;
    let u = 0;
    for (let i = 0; i < n; i++) {
      const y = (i + 0.5) / n;
      const d = (1 + y) ** 2;
      const psi = 1 - 1 / (1 + y);
      const density = d ** (alpha - 1) * Math.exp(psi);
      u += (inner + density / 2 / n) / (d ** alpha * Math.exp(psi)) / n;
      inner += density / n;
    }
    return u;
  };
  const mesh = strip(100);
  const walls = [reflecting, absorbing(), reflecting, reflecting];
  for (const [noise, alpha] of [
    ['ito', 0],
    ['stratonovich', 0.5],
    ['isothermal', 1],
  ] as const) {
    const media = [{ diffusion: varying((x) => (1 + x) ** 2), drift: push(1) }];
    const system = assemble(mesh, { ...problem(constant(1), walls, noise), media });
    expect(relativeError(meanExitTime(system)[nodeAt(mesh.nodes, 0, 0.05)], exact(alpha))).toBeLessThan(1e-3);
    expect(system.psi).toBeDefined();
  }
});

it('a drift beyond what e^ψ can hold is solved on plain rates: v = ±3000', () => {
  const mesh = strip(200);
  const with0 = assemble(mesh, drifting(1, push(3000), bothEnds));
  expect([with0.symmetric, with0.cycle]).toEqual([false, undefined]);
  const u = meanExitTime(with0);
  expect(relativeError(u[nodeAt(mesh.nodes, 0.5, 0.05)], 0.5 / 3000)).toBeLessThan(1e-9);
  const back = exitShares(assemble(mesh, drifting(1, push(-3000), bothEnds)));
  expect(relativeError(back[1]?.[nodeAt(mesh.nodes, 0.99, 0.05)], Math.exp(-30))).toBeLessThan(1e-9);
  expect(relativeError(valueFromStart(evenStart(mesh), back[0] ?? new Float64Array()), 1)).toBeLessThan(0.01);
});
