import { it } from 'vitest';
import { assemble } from '/work/main/solver/index.ts';
import { consistentSystem } from '/work/main/solver/trust/consistent-system.ts';
import { galerkinSolution } from '/work/main/solver/trust/galerkin-solution.ts';
import { coefficientSource } from '/work/main/solver/trust/element-sources.ts';
import { goalBracket, errorNorm } from '/work/main/solver/trust/goal-bracket.ts';
import { rectangleMesh } from '/work/main/tests/support/grid-mesh.ts';
import { absorbing, constant, partly, problem, reflecting } from '/work/main/tests/support/physics.ts';
it('tries', () => {
  for (const n of [8, 16, 32, 46]) {
    const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: n, rows: n });
    for (const [p, exact] of [[problem(constant(1), [absorbing(), absorbing(), absorbing(), absorbing()]), 0.0351442537387884], [problem(constant(1), [partly(2), partly(2), partly(2), partly(2)]), 0.1647216964],[problem(constant(1), [reflecting, partly(1), reflecting, reflecting]), 4/3]] as const) {
    const system = assemble(mesh, p);
    const base = consistentSystem(system, p);
    const source = coefficientSource(mesh, base.geometry, base.coefficients, base.coefficients.mass);
    const u = galerkinSolution(base, { source });
    const b = goalBracket(base, u, u);
    console.log(n, b.low, exact, b.high, b.low <= exact && exact <= b.high, ((b.high - b.low) / b.value * 100).toFixed(4) + '%', 'eff', Math.sqrt((b.high-b.low)/(exact-b.low)), Math.max(...u.residual.map(Math.abs)));
    }
  }
});
