import { Matrix, solve } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { assemble, meanExitTime, prepare, roundingFloor, type System } from '../../solver/index.ts';
import { discMesh, rectangleMesh } from '../support/grid-mesh.ts';
import { absorbing, constant, partly, problem, reflecting, varying } from '../support/physics.ts';

/** The operator as a dense matrix, from its rates. */
function dense(system: System): Matrix {
  const a = Matrix.zeros(system.size, system.size);
  const { start, column, value } = system.rates;
  for (let i = 0; i < system.size; i++) {
    a.set(i, i, system.slack[i] ?? 0);
    for (let p = start[i] ?? 0; p < (start[i + 1] ?? 0); p++) {
      a.set(i, column[p] ?? 0, a.get(i, column[p] ?? 0) - (value[p] ?? 0));
      a.set(i, i, a.get(i, i) + (value[p] ?? 0));
    }
  }
  return a;
}

describe('the factor', () => {
  it.each([1, 2, 5, 11])('solves what a dense LU solves, disc of %d rings', (rings) => {
    const mesh = discMesh({ radius: 1, rings });
    const system = assemble(
      mesh,
      problem(
        varying((x, y) => 1 + x * x + Math.exp(y)),
        [partly(0.7)],
        'stratonovich',
      ),
    );
    const rhs = Float64Array.from({ length: system.size }, (_, i) => Math.sin(1 + i));
    const solution = prepare(system).solve(rhs);
    const expected = solve(dense(system), Matrix.columnVector(rhs)).to1DArray();
    if (!solution.converged) throw new Error('not converged');
    const largest = Math.max(...expected.map(Math.abs));
    expected.forEach((value, i) => {
      expect(Math.abs((solution.x[i] ?? Number.NaN) - value)).toBeLessThan(1e-11 * largest);
    });
  });

  it('is built once per system and serves every right-hand side', () => {
    const system = assemble(
      rectangleMesh({ x: [0, 1], y: [0, 1], columns: 5, rows: 5 }),
      problem(constant(1), [absorbing(), reflecting, reflecting, reflecting]),
    );
    expect(prepare(system)).toBe(prepare(system));
  });

  it('leaves nothing for the iteration to do on a fine mesh', () => {
    const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 100, rows: 100 });
    const solution = prepare(
      assemble(mesh, problem(constant(1), [absorbing(), reflecting, partly(1e-9), reflecting])),
    ).solve(new Float64Array(101 * 100).fill(1));
    expect(solution.iterations).toBe(0);
    expect(solution.residual).toBeLessThan(1e-14);
  });

  it('loses no digit where a stored diagonal would: D and κ twelve orders apart', () => {
    // 1/κ dominates u: a factor that subtracts has 2⁻⁵³ K_ii ≈ κ here and returns noise; the rounding floor says so.
    const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 40, rows: 40 });
    const kappa = 1e-14;
    const system = assemble(mesh, problem(constant(1), [partly(kappa), reflecting, reflecting, reflecting]));
    const u = meanExitTime(system);
    for (const value of u) expect(Math.abs(value * kappa - 1)).toBeLessThan(1e-11);
    expect(roundingFloor(system, u)).toBeGreaterThan(1);
  });
});

it('stagnation is a statement with its residual, never a field', () => {
  const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 20, rows: 20 });
  const system = assemble(mesh, problem(constant(1), [absorbing(), reflecting, reflecting, reflecting]));
  const solution = prepare(system).solve(system.load, { tolerance: 1e-30, maxIterations: 20 });
  expect(solution.converged).toBe(false);
  expect(solution.residual).toBeGreaterThan(0);
  expect(solution).not.toHaveProperty('x');
});

describe('multigrid', () => {
  const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 90, rows: 90 });
  const media = problem(
    varying((x) => Math.exp(4 * x)),
    [absorbing(), reflecting, partly(0.2, 1), reflecting],
  );

  it('ends where the factor does, in a few steps', () => {
    const system = assemble(mesh, media);
    const exact = prepare(system, { preconditioner: 'factor' }).solve(system.load);
    const prepared = prepare(system, { preconditioner: 'multigrid' });
    const found = prepared.solve(system.load);
    if (!exact.converged || !found.converged) throw new Error('not converged');
    expect(prepared.preconditioner).toBe('multigrid');
    expect(found.iterations).toBeGreaterThan(3);
    expect(found.iterations).toBeLessThan(17); // 14 seen; 19 when constants are not prolonged to constants
    found.x.forEach((value, i) => {
      expect(Math.abs(value / (exact.x[i] ?? Number.NaN) - 1)).toBeLessThan(1e-8);
    });
  });

  it('stands in where the factor would take more memory than allowed', () => {
    const system = assemble(mesh, media);
    expect(prepare(system, { maxBytes: 1e6 }).preconditioner).toBe('multigrid');
    const asked = assemble(mesh, media);
    expect(() => prepare(asked, { maxBytes: 1e6, preconditioner: 'factor' })).toThrow(
      expect.objectContaining({ code: 'MEMORY_LIMIT' }),
    );
    expect(prepare(assemble(mesh, media)).preconditioner).toBe('factor');
  });

  it('is not used with drift: the limit is said instead', () => {
    const drift = { kind: 'components', x: constant(30), y: constant(0) } as const;
    const system = assemble(mesh, { ...media, media: [{ diffusion: constant(1), drift }] });
    expect(() => prepare(system, { maxBytes: 1e6 })).toThrow(/GB/);
    expect(() => prepare(system, { preconditioner: 'multigrid' })).toThrow(/drift/);
  });
});

it('many right-hand sides through the factor at once are what each is alone', () => {
  const mesh = discMesh({ radius: 1, rings: 9 });
  const spin = { kind: 'components', x: varying((_, y) => -9 * y), y: varying((x) => 9 * x) } as const;
  for (const drift of [undefined, spin]) {
    const medium = { diffusion: constant(1), ...(drift ? { drift } : {}) };
    const system = assemble(mesh, { ...problem(constant(1), [absorbing()]), media: [medium] });
    const prepared = prepare(system);
    const sides = [...Array(11).keys()].map((r) => system.load.map((v, i) => v * Math.cos(r * i)));
    const all = prepared.solveMany(sides);
    sides.forEach((rhs, r) => {
      const [one, block] = [prepared.solve(rhs), all[r]];
      if (!one.converged || !block?.converged) throw new Error('not converged');
      expect(block.iterations).toBe(0);
      one.x.forEach((value, i) => {
        expect(block.x[i]).toBeCloseTo(value, 14);
      });
    });
  }
});
