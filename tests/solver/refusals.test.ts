import { describe, expect, it } from 'vitest';
import { assemble, meanExitTime, type Problem, SolverError } from '../../solver/index.ts';
import { rectangleMesh } from '../support/grid-mesh.ts';
import { absorbing, constant, partly, problem, reflecting, varying } from '../support/physics.ts';

const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 10, rows: 10 });
const open = [absorbing(), reflecting, reflecting, reflecting];

function refusal(given: Problem): SolverError {
  try {
    assemble(mesh, given);
  } catch (error) {
    if (error instanceof SolverError) return error;
  }
  throw new Error('assembled');
}

describe('assembly refuses', () => {
  it('a diffusion coefficient that is negative somewhere, with a place where it is', () => {
    const error = refusal(
      problem(
        varying((x) => 0.62 - x),
        open,
      ),
    );
    expect(error.code).toBe('DIFFUSION_NOT_POSITIVE');
    expect(error.where.at?.[0]?.[0]).toBeGreaterThan(0.62);
  });

  it.each([0, -1, Number.NaN, Number.POSITIVE_INFINITY])('a constant diffusion coefficient of %d', (d) => {
    expect(refusal(problem(constant(d), open)).code).toBe('DIFFUSION_NOT_POSITIVE');
  });

  it('a partly absorbing wall without a positive reactivity, naming the wall', () => {
    const error = refusal(problem(constant(1), [absorbing(), partly(-2), reflecting, reflecting]));
    expect([error.code, error.where.tags]).toEqual(['WALL_COEFFICIENT_NOT_POSITIVE', [1]]);
  });

  it('a wall that nothing describes, naming it', () => {
    const error = refusal(problem(constant(1), [absorbing(), reflecting, reflecting]));
    expect([error.code, error.where.tags]).toEqual(['WALL_NOT_DESCRIBED', [3]]);
  });

  it('a compartment without a way out', () => {
    const error = refusal(problem(constant(1), [reflecting, reflecting, reflecting, reflecting]));
    expect([error.code, error.where.tags]).toEqual(['NO_WAY_OUT', [0, 1, 2, 3]]);
  });

  it('one closed piece beside an open one, with a place in the closed one and only its walls', () => {
    const two = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 4, rows: 4 });
    const keep = [...two.regionSet.keys()].filter((t) => Math.floor(t / 8) !== 1); // cuts out a row of cells
    const pieces = {
      ...two,
      triangles: Int32Array.from(keep.flatMap((t) => [...two.triangles.subarray(3 * t, 3 * t + 3)])),
      regionSet: Int32Array.from(keep.map(() => 0)),
    };
    const walls = new Map([0, 1, 2, 3].map((tag) => [tag, tag === 0 ? absorbing() : reflecting] as const));
    try {
      assemble(pieces, { noise: 'isothermal', media: [{ diffusion: constant(1) }], walls, exitCount: 1 });
      expect.unreachable();
    } catch (error) {
      if (!(error instanceof SolverError)) throw error;
      expect(error.code).toBe('NO_WAY_OUT');
      expect(error.where.at?.[0]?.[1]).toBeGreaterThan(0.5);
      expect(error.where.tags).toEqual([1, 2, 3]);
    }
  });
});

it('a solve ends when it is asked to, with a typed error', () => {
  const system = assemble(mesh, problem(constant(1), open));
  let asked = 0;
  const stop = (): boolean => ++asked > 0;
  expect(() => meanExitTime(system, { stop })).toThrow(expect.objectContaining({ code: 'SOLVING_STOPPED' }));
  expect(() => assemble(mesh, problem(constant(1), open), { stop })).toThrow(SolverError);
});

it('a wind that holds everything back by thousands of kT is refused: the time is beyond the largest number', () => {
  const drift = { kind: 'components', x: constant(0), y: constant(40) } as const; // towards the reflecting top
  const windy = { ...problem(constant(1), open), media: [{ diffusion: constant(0.01), drift }] };
  expect(() => meanExitTime(assemble(mesh, windy))).toThrow(
    expect.objectContaining({ code: 'EXIT_TOO_RARE' }),
  );
});
