import { describe, expect, it } from 'vitest';
import { type Mesh, remesh } from '../../mesher/index.ts';
import { assemble } from '../../solver/index.ts';
import {
  type Adapted,
  type AdaptOptions,
  adaptUntil,
  type Measured,
  sizeField,
} from '../../solver/trust/adapt.ts';
import { prepareBrackets } from '../../solver/trust/brackets.ts';
import { sizesFromShares } from '../../solver/trust/size-from-shares.ts';
import { listed } from '../published/listed.ts';
import { rectangleMesh } from '../support/grid-mesh.ts';
import { type BracketCase, even } from './bracket-cases.ts';
import { bracketCases } from './bracket-polygons.ts';

function caseOf(name: string): BracketCase {
  const found = bracketCases.find((one) => one.name === name);
  if (!found) throw new Error(`no case ${name}`);
  return found;
}

const refine = (mesh: Mesh, size: (x: number, y: number) => number, maxNodes: number): Mesh =>
  remesh(mesh, { size, maxSize: 1, maxNodes });

function measure({ problem }: BracketCase, mesh: Mesh): Measured {
  const brackets = prepareBrackets(assemble(mesh, problem), problem);
  if (!brackets) throw new Error('not reversible');
  return { bracket: brackets.mean(even), shares: brackets.widthShares(even) };
}

function adapted(name: string, options: AdaptOptions): Adapted<Measured> {
  const one = caseOf(name);
  return adaptUntil(one.mesh(0.2), { measure: (mesh) => measure(one, mesh), refine }, options);
}

const half = ({ bracket }: { bracket: Measured['bracket'] }): number =>
  (bracket.high - bracket.low) / 2 / bracket.value;

describe('adapting', () => {
  it.each([
    ['L-A', 12_000],
    ['sq-window-mid-0.05', 12_000],
    ['rect-halfbottom', 6_000],
  ])(
    '%s comes within a thousandth in fewer than %d nodes, the exact average inside [checks.json]',
    (name, most) => {
      const { outcome, mesh, measured, rounds } = adapted(name, { tolerance: 1e-3 });
      expect(outcome).toBe('within tolerance');
      expect(half(measured)).toBeLessThanOrEqual(1e-3);
      expect(mesh.nodes.length / 2).toBeLessThan(most);
      const exact = listed(name, 'avg');
      for (const { bracket } of rounds) expect(bracket.low <= exact && exact <= bracket.high).toBe(true);
      const widths = rounds.map(half);
      expect(widths.length).toBeGreaterThan(1);
      expect([...widths].sort((a, b) => b - a)).toEqual(widths);
    },
  );

  it('keeps the best so far when the nodes run out, and says so', () => {
    const { outcome, mesh, measured, rounds } = adapted('sq-window-mid-0.05', {
      tolerance: 1e-5,
      maxNodes: 3000,
    });
    expect(outcome).toBe('node limit');
    expect(mesh.nodes.length / 2).toBeLessThanOrEqual(3000);
    expect(mesh.nodes.length / 2).toBeGreaterThan(1500);
    expect(measured.bracket).toBe(rounds.at(-1)?.bracket);
    expect(half(measured)).toBeLessThan(half(rounds[0] ?? measured));
  });

  it('ends after the rounds allowed', () => {
    expect(adapted('rect-halfbottom', { tolerance: 1e-6, maxRounds: 2 }).rounds.length).toBe(2);
    expect(adapted('rect-halfbottom', { tolerance: 1e-6, maxRounds: 1 }).outcome).toBe('round limit');
  });

  it('stopped after a round, it gives what that round found; progress was told in between', () => {
    let rounds = 0;
    const told: number[] = [];
    const { outcome, measured, mesh } = adapted('rect-halfbottom', {
      ...{ tolerance: 1e-6, stop: () => rounds === 2, progress: (done) => told.push(done) },
      onRound: () => {
        rounds++;
      },
    });
    expect(outcome).toBe('stopped');
    expect(measured.shares.length).toBe(mesh.triangles.length / 3);
    expect(told.length).toBe(1);
    expect(told[0]).toBe(0);
  });

  it('a step that is stopped or has no room for its nodes ends the work; any other failure is passed on', () => {
    const one = caseOf('rect-halfbottom');
    const ending = (code: string) =>
      adaptUntil(
        one.mesh(0.2),
        {
          measure: (mesh) => measure(one, mesh),
          refine: () => {
            throw Object.assign(new Error(code), { code });
          },
        },
        { tolerance: 1e-6 },
      ).outcome;
    expect(ending('SOLVING_STOPPED')).toBe('stopped');
    expect(ending('MESHING_STOPPED')).toBe('stopped');
    expect(ending('TOO_MANY_TRIANGLES')).toBe('node limit');
    expect(() => ending('NOT_CONVERGED')).toThrow('NOT_CONVERGED');
  });
});

describe('sizes from shares', () => {
  const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 10, rows: 10 });
  const triangles = mesh.triangles.length / 3;

  it('equal shares ask for one size everywhere, the fourth root of the fall per triangle pair', () => {
    const shares = new Float64Array(triangles).fill(1);
    const [first, second] = [triangles / 4, triangles / 64].map(
      (goal) => sizesFromShares(mesh, shares, goal, 0.25, 1e9).atNode,
    );
    expect(Math.max(...(first ?? []))).toBeCloseTo(Math.min(...(first ?? [])), 12);
    // The sum falls like h²: a sixteenth of it takes a quarter of the edge.
    expect((first?.[0] ?? 0) / (second?.[0] ?? 1)).toBeCloseTo(4, 10);
  });

  it('keeps to the number of triangles allowed, whatever the goal', () => {
    const shares = Float64Array.from({ length: triangles }, (_, t) => 1 + (t % 7));
    const wanted = sizesFromShares(mesh, shares, 1e-9, 10, 1000).triangles;
    expect(wanted).toBeGreaterThan(900);
    expect(wanted).toBeLessThan(1001);
  });

  it('a single large share makes sizes that grow from it by no more than allowed per distance', () => {
    const shares = new Float64Array(triangles).fill(1e-6);
    shares[0] = 1;
    const { atNode } = sizesFromShares(mesh, shares, 0.01, 0.2, 1e9);
    const size = sizeField(mesh, atNode);
    expect(size(0.05, 0.02)).toBeLessThan(size(0.9, 0.9) / 3);
    for (let k = 0; k < 20; k++) {
      const [x, y] = [(k * 0.37) % 0.9, (k * 0.61) % 0.9];
      // Along an axis a triangle's gradient is at most that of its two legs: √2 × the growth.
      expect(Math.abs(size(x + 0.1, y + 0.1) - size(x, y))).toBeLessThanOrEqual(0.2 * 0.2 + 1e-12);
    }
  });

  it('outside the mesh the size is that of the last place inside', () => {
    const size = sizeField(mesh, new Float64Array(mesh.nodes.length / 2).fill(0.3));
    expect(size(0.5, 0.5)).toBeCloseTo(0.3, 12);
    expect(size(3, 3)).toBeCloseTo(0.3, 12);
  });
});
