import { describe, expect, it } from 'vitest';
import { assemble, conductance, exitShares } from '../../solver/index.ts';
import { discMesh, rectangleMesh } from '../support/grid-mesh.ts';
import {
  absorbing,
  constant,
  partly,
  problem,
  reflecting,
  relativeError,
  varying,
} from '../support/physics.ts';

const square = rectangleMesh({ x: [0, 2], y: [0, 1], columns: 32, rows: 16 });

describe('conductance of an exit', () => {
  it('of a slab between two absorbing walls: k × height ÷ length [Incropera et al., table 4.1]', () => {
    const walls = [reflecting, absorbing(1), reflecting, absorbing(0)];
    const system = assemble(square, problem(constant(3), walls));
    const shares = exitShares(system);
    for (const exit of [0, 1]) {
      expect(conductance(system, exit, shares[exit] ?? new Float64Array())).toBeCloseTo(1.5, 12);
    }
  });

  it('with a partly absorbing wall adds 1/κ in series, and is the same seen from both exits [exact]', () => {
    const walls = [reflecting, partly(0.5, 1), reflecting, absorbing(0)];
    const system = assemble(square, problem(constant(1), walls));
    const shares = exitShares(system);
    for (const exit of [0, 1]) {
      expect(conductance(system, exit, shares[exit] ?? new Float64Array())).toBeCloseTo(1 / (2 + 2), 12);
    }
  });

  it('of a ring ¼ < r < 1 is 2π/ln 4 [Incropera et al., table 4.1]', () => {
    const disc = discMesh({ radius: 1, rings: 64 });
    const inner = 16;
    const keep = [...disc.regionSet.keys()].filter((t) => t >= 6 * inner * inner);
    const first = 1 + 3 * inner * (inner - 1);
    const hole = Array.from({ length: 6 * inner }, (_, q) => [first + ((q + 1) % (6 * inner)), first + q]);
    const ring = {
      ...disc,
      triangles: Int32Array.from(keep.flatMap((t) => [...disc.triangles.subarray(3 * t, 3 * t + 3)])),
      regionSet: Int32Array.from(keep.map(() => 0)),
      segments: Int32Array.from([...disc.segments, ...hole.flat()]),
      segmentTag: Int32Array.from([...disc.segmentTag, ...hole.map(() => 1)]),
      segmentTwin: Int32Array.from([...disc.segmentTwin, ...hole.map(() => -1)]),
    };
    const system = assemble(ring, problem(constant(1), [absorbing(0), absorbing(1)]));
    const value = conductance(system, 1, exitShares(system)[1] ?? new Float64Array());
    expect(relativeError(value, (2 * Math.PI) / Math.log(4))).toBeLessThan(1e-3);
  });

  it('is not given with drift', () => {
    const drift = { kind: 'components', x: constant(1), y: constant(0) } as const;
    const walls = [reflecting, absorbing(1), reflecting, absorbing(0)];
    const media = [{ diffusion: varying((x) => 1 + x), drift }];
    const system = assemble(square, { ...problem(constant(1), walls), media });
    expect(conductance(system, 0, exitShares(system)[0] ?? new Float64Array())).toBeUndefined();
  });
});
