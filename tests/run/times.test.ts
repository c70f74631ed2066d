import { expect, it } from 'vitest';
import { assemble, evenStart } from '../../solver/index.ts';
import { emptying } from '../../src/run/times.ts';
import { rectangleMesh } from '../support/grid-mesh.ts';
import { absorbing, constant, problem } from '../support/physics.ts';

const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 40, rows: 40 });
const system = assemble(mesh, problem(constant(1), [absorbing(), absorbing(), absorbing(), absorbing()]));
const watch = {
  starts: [evenStart(mesh)],
  remaining: [0.5, 0.01],
  times: [1e-4],
};

it('what would take too many steps is given as rough, and what an even start shows is as good as ever', () => {
  const close = emptying(system, watch);
  const rough = emptying(system, watch, {}, [{ tolerance: 1e-6, maxSteps: 5 }]);
  expect([close?.isRough, rough?.isRough]).toEqual([false, true]);
  for (const fraction of [0.5, 0.95]) {
    const [a, b] = [close, rough].map((one) => one?.timeTo(evenStart(mesh), fraction) ?? Number.NaN);
    expect(Math.abs((a ?? 0) / (b ?? 1) - 1)).toBeLessThan(1e-5);
  }
});

it('a looser attempt is taken before it is called rough', () => {
  const attempts = [
    { tolerance: 1e-6, maxSteps: 5 },
    { tolerance: 1e-3, maxSteps: 90 },
  ];
  expect(emptying(system, watch, {}, attempts)?.isRough).toBe(false);
});
