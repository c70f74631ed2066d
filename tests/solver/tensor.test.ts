import { describe, expect, it } from 'vitest';
import {
  assemble,
  evenStart,
  type Medium,
  meanExitTime,
  type NoiseConvention,
  type Tensor,
  valueFromStart,
} from '../../solver/index.ts';
import { discMesh, rectangleMesh } from '../support/grid-mesh.ts';
import { absorbing, constant, nodeAt, problem, reflecting, relativeError } from '../support/physics.ts';

const withTensor = (tensor: Tensor, walls = [absorbing()], noise: NoiseConvention = 'isothermal') => ({
  ...problem(constant(1), walls, noise),
  media: [{ diffusion: constant(1), tensor }],
});

describe('constant tensor', () => {
  it('diag(4, 1) on the unit square is the ½ × 1 rectangle with D = 1 [Carslaw & Jaeger 1959, sec. 1.20]', () => {
    const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 48, rows: 48 });
    const walls = [absorbing(), absorbing(), absorbing(), absorbing()];
    for (const noise of ['ito', 'stratonovich', 'isothermal'] as const) {
      const u = meanExitTime(
        assemble(mesh, withTensor({ kind: 'constant', value: [4, 0, 1] }, walls, noise)),
      );
      expect(relativeError(u[nodeAt(mesh.nodes, 0.5, 0.5)], 0.0284679580318186)).toBeLessThan(1e-3);
      expect(relativeError(valueFromStart(evenStart(mesh), u), 0.0142926048199732)).toBeLessThan(2e-3);
    }
  });

  it('turned by 30° in an ellipse: u = w/2(d₁₁/a² + d₂₂/b²) [exact quadratic]; negative rates are counted', () => {
    const disc = discMesh({ radius: 1, rings: 60 });
    const ellipse = { ...disc, nodes: disc.nodes.map((v, i) => (i % 2 === 0 ? 2 * v : v)) };
    const turned: Tensor = { kind: 'constant', value: [0.775, 0.389711431702997, 0.325] };
    const system = assemble(ellipse, withTensor(turned));
    const u = meanExitTime(system);
    expect(relativeError(u[0], 0.963855421686747)).toBeLessThan(1e-3);
    expect(relativeError(u[nodeAt(ellipse.nodes, 1, 0)], 0.72289156626506)).toBeLessThan(1e-3);
    expect(relativeError(valueFromStart(evenStart(ellipse), u), 0.481927710843373)).toBeLessThan(1e-3);
    expect(system.negativeRates.count).toBeGreaterThan(0);
    expect(system.negativeRates.at).toHaveLength(2);
    expect(assemble(ellipse, withTensor({ kind: 'constant', value: [4, 0, 1] })).negativeRates).toEqual({
      count: 0,
    });
  });
});

describe('varying tensor', () => {
  it('(1 + x)² times the unit tensor is the scalar: 1 − ln 2 under Itô, ln 2 − ½ isothermal [exact]', () => {
    const mesh = rectangleMesh({ x: [0, 1], y: [0, 0.1], columns: 100, rows: 4 });
    const walls = [reflecting, absorbing(), reflecting, reflecting];
    const tensor: Tensor = { kind: 'varying', at: (x) => [(1 + x) ** 2, 0, (1 + x) ** 2] };
    const start = nodeAt(mesh.nodes, 0, 0.05);
    const time = (noise: NoiseConvention, given: Tensor): number | undefined =>
      meanExitTime(assemble(mesh, withTensor(given, walls, noise)))[start];
    expect(relativeError(time('isothermal', tensor), Math.LN2 - 0.5)).toBeLessThan(1e-3);
    expect(relativeError(time('ito', tensor), 1 - Math.LN2)).toBeLessThan(1e-3);
    const stated: Tensor = { ...tensor, divergence: (x) => [2 * (1 + x), 0] };
    expect(time('ito', tensor)).toBeCloseTo(time('ito', stated) ?? Number.NaN, 10); // differences against the formula
  });

  it('faster along circles than across: no effect isothermal, a known one under Itô', () => {
    // D = I + s r² t⊗t with t the tangent. Itô: u'' + (1 + s r²)u'/r = −1, so u(0) = ∫₀¹ (1 − e^(−s r²/2))/(s r) dr.
    const s = 6;
    const tensor: Tensor = { kind: 'varying', at: (x, y) => [1 + s * y * y, -s * x * y, 1 + s * x * x] };
    let exact = 0;
    for (let i = 0; i < 2000; i++) {
      const r = (i + 0.5) / 2000;
      exact -= Math.expm1((-s * r * r) / 2) / (s * r) / 2000;
    }
    const mesh = discMesh({ radius: 1, rings: 64 });
    expect(relativeError(meanExitTime(assemble(mesh, withTensor(tensor)))[0], 0.25)).toBeLessThan(2e-3);
    expect(
      relativeError(meanExitTime(assemble(mesh, withTensor(tensor, [absorbing()], 'ito')))[0], exact),
    ).toBeLessThan(2e-3);
    expect(exact).toBeLessThan(0.2);
  });
});

describe('refused', () => {
  const halves = rectangleMesh({
    ...{ x: [0, 1], y: [0, 1], columns: 4, rows: 4, regionSets: [[], [0]] },
    region: (x) => (x < 0.5 ? 0 : 1),
  });
  const tensor: Tensor = { kind: 'constant', value: [2, 0, 1] };
  const walls = [absorbing(), absorbing(), absorbing(), absorbing()];
  const media = (second: Medium) => [{ diffusion: constant(1), tensor }, second];
  const code = (noise: NoiseConvention, given: readonly Medium[]): string => {
    try {
      assemble(halves, { ...problem(constant(1), walls, noise), media: given });
      return 'assembled';
    } catch (error) {
      return (error as { code: string }).code;
    }
  };

  it('a tensor that jumps under Itô or Stratonovich; isothermal takes it', () => {
    const jump = media({ diffusion: constant(1) });
    expect(code('ito', jump)).toBe('TENSOR_CONVENTION');
    expect(code('stratonovich', jump)).toBe('TENSOR_CONVENTION');
    expect(code('isothermal', jump)).toBe('assembled');
    expect(
      code('ito', media({ diffusion: constant(1), tensor: { kind: 'constant', value: [2, 0, 1] } })),
    ).toBe('assembled');
  });

  it('a varying tensor under Stratonovich, and a potential with one under Itô', () => {
    const varyingTensor: Tensor = { kind: 'varying', at: (x) => [1 + x, 0, 1] };
    const medium = { diffusion: constant(1), tensor: varyingTensor };
    expect(code('stratonovich', [medium, medium])).toBe('TENSOR_CONVENTION');
    const pulled = { ...medium, drift: { kind: 'potential', value: constant(1) } } as const;
    expect(code('ito', [pulled, pulled])).toBe('TENSOR_CONVENTION');
  });

  it.each([[[1, 2, 1]], [[-1, 0, -1]], [[1, 0, Number.NaN]]])('%j: not positive definite', (value) => {
    const bad = {
      diffusion: constant(1),
      tensor: { kind: 'constant', value: value as [number, number, number] },
    } as const;
    expect(code('isothermal', [bad, bad])).toBe('DIFFUSION_NOT_POSITIVE');
  });
});
