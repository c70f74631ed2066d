import { describe, expect, it } from 'vitest';
import { MesherError, meshDomain } from '../../mesher/index.ts';
import { triangulateBox } from '../../mesher/triangulate.ts';
import { domainOf, Shapes, unitSquare } from './shapes.ts';

function thrown(work: () => unknown): MesherError {
  try {
    work();
  } catch (error) {
    if (error instanceof MesherError) return error;
    throw error;
  }
  throw new Error('nothing was thrown');
}

const square = domainOf(new Shapes().polygon('outline', unitSquare));

describe('the limit on nodes', () => {
  it('is judged before starting, by an estimate near the count that comes out', () => {
    for (const size of [0.05, 0.02]) {
      const count = meshDomain(square, { maxSize: size }).triangles.length / 3;
      const error = thrown(() => meshDomain(square, { maxSize: size, maxNodes: 50 }));
      expect(error.code).toBe('TOO_MANY_TRIANGLES');
      const told = Number(/about (\S+) triangles/.exec(error.message)?.[1]);
      expect(Math.abs(told / count - 1)).toBeLessThan(0.2);
    }
  });

  it('counts a graded size field too', () => {
    const sources = [{ at: [0, 0], size: 1e-5 } as const];
    const options = { maxSize: 0.1, growth: 0.1, sources };
    const count = meshDomain(square, options).triangles.length / 3;
    const error = thrown(() => meshDomain(square, { ...options, maxNodes: 50 }));
    const told = Number(/about (\S+) triangles/.exec(error.message)?.[1]);
    expect(Math.abs(told / count - 1)).toBeLessThan(0.25);
  });
});

describe('watching', () => {
  it('tells progress that grows to 1', () => {
    const told: number[] = [];
    meshDomain(square, { maxSize: 0.01, progress: (done) => told.push(done) });
    expect(told.length).toBeGreaterThan(3);
    expect(told).toEqual([...told].sort((a, b) => a - b));
    expect(told.at(-1)).toBe(1);
  });

  it('ends soon after it is asked to', () => {
    let asked = 0;
    const error = thrown(() => meshDomain(square, { maxSize: 0.005, stop: () => ++asked > 5 }));
    expect(error.code).toBe('MESHING_STOPPED');
    expect(asked).toBe(6);
  });
});

describe('the first triangulation', () => {
  it('tells a stack that is too small in words', () => {
    const points = Float64Array.from([0, 0, 1, 0, 0, 1]);
    const error = thrown(() =>
      triangulateBox(points, new Int32Array(), () => {
        throw new RangeError('Maximum call stack size exceeded');
      }),
    );
    expect(error.code).toBe('TRIANGULATION_FAILED');
    expect(error.message).toContain('stack of this thread');
    expect(error.cause).toBeInstanceOf(RangeError);
  });

  it('refuses too many corners before trying', () => {
    const points = new Float64Array(2 * 50_001);
    expect(thrown(() => triangulateBox(points, new Int32Array(), () => true)).code).toBe('TOO_MANY_CORNERS');
  });
});
