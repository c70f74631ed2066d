import type { Coefficient, NoiseConvention, Problem, Wall } from '../../solver/index.ts';

export const reflecting: Wall = { kind: 'reflecting' };
export const absorbing = (exit = 0): Wall => ({ kind: 'absorbing', exit });
export const partly = (kappa: number, exit = 0): Wall => ({ kind: 'partlyAbsorbing', kappa, exit });
export const constant = (value: number): Coefficient => ({ kind: 'constant', value });
export const varying = (at: (x: number, y: number) => number): Coefficient => ({ kind: 'varying', at });
export const conventions: readonly NoiseConvention[] = ['ito', 'stratonovich', 'isothermal'];

/** Walls numbered as given; exits are counted from them. */
export function problem(
  diffusion: Coefficient | readonly Coefficient[],
  walls: readonly Wall[],
  noise: NoiseConvention = 'isothermal',
): Problem {
  const media = (Array.isArray(diffusion) ? diffusion : [diffusion]).map((d: Coefficient) => ({
    diffusion: d,
  }));
  const exits = walls.map((wall) => ('exit' in wall ? wall.exit : -1));
  return { noise, media, walls: new Map(walls.entries()), exitCount: Math.max(-1, ...exits) + 1 };
}

/** Index of the node at a place, which must be one. */
export function nodeAt(nodes: Float64Array, x: number, y: number): number {
  for (let i = 0; i < nodes.length / 2; i++) {
    if (Math.hypot((nodes[2 * i] ?? 0) - x, (nodes[2 * i + 1] ?? 0) - y) < 1e-9) return i;
  }
  throw new Error(`no node at (${x}, ${y})`);
}

/** |value − expected| ÷ |expected|. */
export function relativeError(value: number | undefined, expected: number): number {
  return Math.abs((value ?? Number.NaN) - expected) / Math.abs(expected);
}
