import { describe, expect, it } from 'vitest';
import { arrivals, assemble, evenStart, exitShares, survival, valueFromStart } from '../../solver/index.ts';
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

describe('arrivals at one exit', () => {
  it('strip, from x = ½ to either end: half of what survival leaves [symmetry; Carslaw & Jaeger 1959, sec. 3.3]', () => {
    const mesh = rectangleMesh({ x: [0, 1], y: [0, 0.05], columns: 80, rows: 4 });
    const system = assemble(mesh, problem(constant(1), [reflecting, absorbing(1), reflecting, absorbing(0)]));
    const start = new Float64Array(mesh.nodes.length / 2);
    start[nodeAt(mesh.nodes, 0.5, 0.025)] = 1;
    const right = arrivals(system, exitShares(system)[1] ?? start, [start]);
    // S(0.1) = 0.474487460379749 from the image series (checks, strip-AA-surv).
    expect(relativeError(right.by(start, 0.1), (1 - 0.474487460379749) / 2)).toBeLessThan(1e-3);
    expect(relativeError(right.timeTo(start, (1 - 0.176867139747616) / 2), 0.2)).toBeLessThan(1e-3); // S(0.2)
    expect(right.timeTo(start, 0.51)).toBeUndefined();
    expect(right.by(start, 0)).toBeCloseTo(0, 12);
  });

  it.each([
    ['still', undefined],
    ['turning', { kind: 'components', x: varying((_, y) => -8 * y), y: varying((x) => 8 * x + 2) } as const],
  ])('sum over all exits to 1 − S at any time, %s', (_, drift) => {
    const mesh = discMesh({ radius: 1, rings: 8, tag: (x) => (x > 0.3 ? 0 : 1) });
    const medium = { diffusion: constant(1), ...(drift ? { drift } : {}) };
    const system = assemble(mesh, { ...problem(constant(1), [absorbing(0), partly(3, 1)]), media: [medium] });
    const start = evenStart(mesh);
    const options = { tolerance: 1e-9, times: [0.01, 0.1, 1] };
    const shares = exitShares(system);
    const filled = shares.map((field) => arrivals(system, field, [start], options));
    const inside = survival(system, [start], options);
    for (const t of [0, 0.01, 0.1, 1]) {
      const sum = filled.reduce((total, exit) => total + exit.by(start, t), 0);
      expect(sum).toBeCloseTo(1 - inside.at(start, t), 7);
    }
    filled.forEach((exit, i) => {
      expect(exit.by(start, 1e3)).toBeCloseTo(valueFromStart(start, shares[i] ?? start), 9);
    });
  });

  it('of an exit that catches nothing are none', () => {
    const mesh = discMesh({ radius: 1, rings: 3 });
    const system = assemble(mesh, { ...problem(constant(1), [absorbing(0)]), exitCount: 2 });
    const none = arrivals(system, exitShares(system)[1] ?? new Float64Array(), [evenStart(mesh)]);
    expect([none.by(evenStart(mesh), 1), none.timeTo(evenStart(mesh), 0.1)]).toEqual([0, undefined]);
  });
});
