import { expect, it } from 'vitest';
import { assemble, meanExitTime } from '../../solver/index.ts';
import { holdsOnRandomProblems } from './random-problem.ts';

/*
 * Proof, for the discrete problem. The mesh is Delaunay and its wall segments have no node inside their diametral
 * circles, so the rates between nodes are ≥ 0; each part of the compartment is connected by triangles, and has a node
 * with slack > 0. A is then a weakly chained diagonally dominant M-matrix: A⁻¹ ≥ 0 with positive diagonal, and the
 * load is > 0 in every row, so u > 0.
 */
it('the mean exit time is positive at every node that is not absorbing and 0 at those that are [METHODS 4]', () => {
  holdsOnRandomProblems(({ mesh, problem }) => {
    const absorbing = new Set<number>();
    for (let s = 0; s < mesh.segmentTag.length; s++) {
      if (problem.walls.get(mesh.segmentTag[s] ?? -1)?.kind !== 'absorbing') continue;
      absorbing.add(mesh.segments[2 * s] ?? -1).add(mesh.segments[2 * s + 1] ?? -1);
    }
    const time = meanExitTime(assemble(mesh, problem));
    expect(absorbing.size).toBeGreaterThan(0);
    expect(absorbing.size).toBeLessThan(time.length);
    expect([...time].every((u, node) => (absorbing.has(node) ? u === 0 : u > 0))).toBe(true);
  });
});

/* The premise of the laws in this folder. */
it('on every random mesh the rates between nodes are not negative [Xu & Zikatanov 1999]', () => {
  holdsOnRandomProblems(({ mesh, problem }) => {
    const { rates, slack, load } = assemble(mesh, problem);
    expect(rates.value.length).toBeGreaterThan(0);
    expect(rates.value.every((rate) => rate >= 0)).toBe(true);
    expect(slack.every((rate) => rate >= 0)).toBe(true);
    expect(load.every((mass) => mass > 0)).toBe(true);
  });
});
