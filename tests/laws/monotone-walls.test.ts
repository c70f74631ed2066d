import { expect, it } from 'vitest';
import { assemble, meanExitTime, type Problem, type Wall } from '../../solver/index.ts';
import { holdsOnRandomProblems, type RandomProblem } from './random-problem.ts';

/** Rounding of the solves: they are componentwise accurate, a few thousand operations deep. */
const rounding = 1e-10;

function expectNoRise(given: RandomProblem, changed: Problem): void {
  const before = meanExitTime(assemble(given.mesh, given.problem));
  const after = meanExitTime(assemble(given.mesh, changed));
  let risen = 0;
  let fallen = 0;
  for (let node = 0; node < before.length; node++) {
    const [was, is] = [before[node] ?? Number.NaN, after[node] ?? Number.NaN];
    if (!(is <= was * (1 + rounding))) risen++;
    if (is < was * (1 - rounding)) fallen++;
  }
  expect(risen).toBe(0);
  expect(fallen).toBeGreaterThan(0);
}

function withWall(problem: Problem, tag: number, wall: Wall): Problem {
  return { ...problem, walls: new Map(problem.walls).set(tag, wall) };
}

/** Some wall of a kind, if there is one. */
function someTag(given: RandomProblem, kinds: readonly Wall['kind'][]): number | undefined {
  const tags = [...given.problem.walls].filter(([, wall]) => kinds.includes(wall.kind)).map(([tag]) => tag);
  return tags[Math.floor(given.random() * tags.length)];
}

/*
 * Proof, for the discrete problem. Raising κ on a wall adds E = diag(e), e ≥ 0, to A (the wall term is lumped) and
 * leaves the load. A'u' = f = Au = A'u − Eu, so A'(u − u') = Eu ≥ 0; A' is an M-matrix, hence u ≥ u' at every node.
 * With the wall term not lumped E has entries off the diagonal and the law is false.
 */
it('raising κ of a partly absorbing wall raises the mean exit time at no node [Protter & Weinberger 1967]', () => {
  let tried = 0;
  holdsOnRandomProblems((given) => {
    const tag = someTag(given, ['partlyAbsorbing']);
    const wall = tag === undefined ? undefined : given.problem.walls.get(tag);
    if (tag === undefined || wall?.kind !== 'partlyAbsorbing') return;
    tried++;
    const kappa = wall.kappa * (1 + 9 * given.random());
    expectNoRise(given, withWall(given.problem, tag, { ...wall, kappa }));
  });
  expect(tried).toBeGreaterThan(10);
});

/*
 * Proof. Let w = u − u'. On the nodes that are free in both problems (A w)_i = 0 but for the rates to the newly
 * absorbing nodes, where w = u ≥ 0: so A_ff w_f = (rates to them) u ≥ 0, and A_ff, a principal part of an M-matrix, is
 * one itself: w ≥ 0. A wall that was partly absorbing loses its wall term only at nodes that are now absorbing.
 */
it('making a reflecting or partly absorbing wall absorbing raises the mean exit time at no node [Protter & Weinberger 1967]', () => {
  let tried = 0;
  holdsOnRandomProblems((given) => {
    const tag = someTag(given, ['reflecting', 'partlyAbsorbing']);
    if (tag === undefined) return;
    tried++;
    expectNoRise(given, withWall(given.problem, tag, { kind: 'absorbing', exit: 1 }));
  });
  expect(tried).toBeGreaterThan(10);
});

/* Proof as for raising κ, from 0: a reflecting wall adds nothing to A. */
it('making a reflecting wall partly absorbing raises the mean exit time at no node [Protter & Weinberger 1967]', () => {
  let tried = 0;
  holdsOnRandomProblems((given) => {
    const tag = someTag(given, ['reflecting']);
    if (tag === undefined) return;
    tried++;
    expectNoRise(given, withWall(given.problem, tag, { kind: 'partlyAbsorbing', kappa: 0.3, exit: 2 }));
  });
  expect(tried).toBeGreaterThan(10);
});
