import { expect, it } from 'vitest';
import {
  assemble,
  evenStart,
  exitDensity,
  exitShares,
  meanExitTime,
  valueFromStart,
} from '../../solver/index.ts';
import { holdsOnRandomProblems } from './random-problem.ts';

/*
 * Proof, for the discrete problem. A p_e = r_e, r_e the rates of the rows' sinks that lead to exit e. The rates between
 * nodes cancel in A·1, so A·1 = Σ_e r_e, the sum of all sinks. Hence A(Σ_e p_e − 1) = 0, and A is regular because
 * every part of the compartment has a way out. On an absorbing node the parts sum to 1 by definition.
 */
it('shares of all exits sum to 1 at every node, whatever walls, media and noise convention [METHODS 3]', () => {
  holdsOnRandomProblems(({ mesh, problem }) => {
    const shares = exitShares(assemble(mesh, problem));
    expect(shares).toHaveLength(problem.exitCount);
    let worst = 0;
    for (let node = 0; node < mesh.nodes.length / 2; node++) {
      const sum = shares.reduce((total, share) => total + (share[node] ?? Number.NaN), 0);
      worst = Math.max(worst, Math.abs(sum - 1));
    }
    expect(worst).toBeLessThan(1e-10);
  });
});

/*
 * Proof. r_e ≥ 0 and A is an M-matrix (rates ≥ 0 on a Delaunay mesh, slack ≥ 0, a way out everywhere), so A⁻¹ ≥ 0 and
 * p_e ≥ 0; with the sum, p_e ≤ 1.
 */
it('every share lies between 0 and 1 at every node [METHODS 4]', () => {
  holdsOnRandomProblems(({ mesh, problem }) => {
    for (const share of exitShares(assemble(mesh, problem))) {
      expect(share.every((p) => p >= 0 && p <= 1 + 1e-10)).toBe(true);
    }
  });
});

/*
 * Proof. caught_e = r_eᵀ z with Aᵀz = ρ, so caught_e = r_eᵀ A⁻ᵀ ρ = ρᵀ A⁻¹ r_e = ρᵀ p_e, but for rounding.
 */
it('the shares of a start by the wall nodes where its particles end equal those by the share fields [METHODS 3]', () => {
  holdsOnRandomProblems(({ mesh, problem }) => {
    const system = assemble(mesh, problem);
    const start = evenStart(mesh, () => true);
    const shares = exitShares(system).map((share) => valueFromStart(start, share));
    const { byExit, caught } = exitDensity(system, start);
    expect(caught.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 10);
    for (const [exit, share] of shares.entries()) expect(byExit[exit]).toBeCloseTo(share, 10);
  });
});

/*
 * Proof. A is symmetric and u = A⁻¹f, so Σ_i f_i p_e(i) = fᵀA⁻¹r_e = uᵀr_e: what leaves through exit e of a start in
 * proportion to f is the flux of u into the sinks of e.
 */
it('the share of a start in proportion to ∫mφ is the flux of the mean exit time through the exit [adjoint identity]', () => {
  holdsOnRandomProblems(({ mesh, problem }) => {
    const system = assemble(mesh, problem);
    const time = meanExitTime(system);
    const total = system.load.reduce((a, b) => a + b, 0);
    const start = new Float64Array(mesh.nodes.length / 2);
    for (const [i, node] of system.nodeOf.entries()) start[node] = (system.load[i] ?? 0) / total;
    const flux = new Float64Array(problem.exitCount);
    const { row, exit, rate } = system.sinks;
    for (const [s, from] of row.entries()) {
      const node = system.nodeOf[from] ?? -1;
      const to = exit[s] ?? -1;
      flux[to] = (flux[to] ?? 0) + ((rate[s] ?? 0) * (time[node] ?? 0)) / total;
    }
    const shares = exitShares(system).map((share) => valueFromStart(start, share));
    for (const [e, share] of shares.entries()) expect(flux[e]).toBeCloseTo(share, 10);
  });
});
