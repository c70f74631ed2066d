import { expect, it } from 'vitest';
import { type Curve, type Domain, type Mesh, meshDomain, type Point } from '../../mesher/index.ts';
import { assemble, exitShares, meanExitTime } from '../../solver/index.ts';
import { carried, holdsOnRandomProblems, largestDifference, withCoefficients } from './random-problem.ts';

/** Coordinates are rounded once more by moving, and D is evaluated at the rounded places. */
const rounding = 1e-8;

function movedMesh(mesh: Mesh, move: (x: number, y: number) => Point): Mesh {
  const nodes = mesh.nodes.slice();
  for (let i = 0; i < nodes.length; i += 2) {
    [nodes[i], nodes[i + 1]] = move(mesh.nodes[i] ?? 0, mesh.nodes[i + 1] ?? 0) as [number, number];
  }
  return { ...mesh, nodes };
}

/*
 * Proof, for the discrete problem. Edge weights are sums of cotangents × means of k: with D carried along they do not
 * change with s. The load ∫m φ is multiplied by s², the wall term κ∫m φ ds by s, so with κ/s the matrix is the same
 * and the load s² as large.
 */
it('lengths × s, with κ ÷ s, give times × s² and the same shares at every node [dimensional analysis]', () => {
  holdsOnRandomProblems(({ mesh, problem, random }) => {
    const s = 10 ** (6 * random() - 3);
    const larger = withCoefficients(
      problem,
      (given) => carried(given, 1, (x, y) => [x / s, y / s]),
      (kappa) => kappa / s,
    );
    const small = assemble(mesh, problem);
    const large = assemble(
      movedMesh(mesh, (x, y) => [s * x, s * y]),
      larger,
    );
    const expected = meanExitTime(small).map((u) => s * s * u);
    expect(largestDifference(meanExitTime(large), expected)).toBeLessThan(rounding);
    const shares = exitShares(large);
    for (const [exit, share] of exitShares(small).entries()) {
      const same = shares[exit] ?? new Float64Array();
      if (share.some((p) => p > 0)) expect(largestDifference(same, share)).toBeLessThan(rounding);
      else expect(same.every((p) => p === 0)).toBe(true);
    }
  });
});

/*
 * Proof. k = D^α and m = D^(α−1), so doubling D multiplies the rates between nodes by 2^α, the load by 2^(α−1), and
 * the wall term κ∫mφ ds with doubled κ by 2·2^(α−1) = 2^α: the matrix by 2^α throughout, u by 2^(α−1)/2^α = 1/2.
 */
it('D × 2 and κ × 2 give half the mean exit time at every node, in every noise convention [dimensional analysis]', () => {
  holdsOnRandomProblems(({ mesh, problem }) => {
    const faster = withCoefficients(
      problem,
      (given) => carried(given, 2),
      (kappa) => 2 * kappa,
    );
    const half = meanExitTime(assemble(mesh, problem)).map((u) => u / 2);
    expect(largestDifference(meanExitTime(assemble(mesh, faster)), half)).toBeLessThan(rounding);
  });
});

/* Proof. Cotangents, areas and lengths do not change when the nodes are turned and moved, and D is carried along. */
it('a compartment that is turned and moved, with D carried along, has the same mean exit time at every node', () => {
  holdsOnRandomProblems(({ mesh, problem, random }) => {
    const angle = 2 * Math.PI * random();
    const [c, s] = [Math.cos(angle), Math.sin(angle)];
    const [dx, dy] = [10 * random(), -10 * random()];
    const turned = withCoefficients(
      problem,
      (given) => carried(given, 1, (x, y) => [c * (x - dx) + s * (y - dy), -s * (x - dx) + c * (y - dy)]),
      (kappa) => kappa,
    );
    const moved = movedMesh(mesh, (x, y) => [c * x - s * y + dx, s * x + c * y + dy]);
    const expected = meanExitTime(assemble(mesh, problem));
    expect(largestDifference(meanExitTime(assemble(moved, turned)), expected)).toBeLessThan(rounding);
  });
});

/*
 * Multiplying by a power of two commutes with every rounding, and the mesher compares lengths only with lengths: the
 * mesh of the larger drawing is the larger mesh, number by number.
 */
it('a drawing four times as large with sizes four times as large is meshed into the same mesh, four times as large', () => {
  holdsOnRandomProblems(({ drawn, mesh }) => {
    const large = meshDomain(scaledDomain(drawn.domain, 4), { maxSize: 4 * 0.06, maxNodes: 20_000 });
    expect(large.triangles).toEqual(mesh.triangles);
    expect(large.nodes).toEqual(mesh.nodes.map((x) => 4 * x));
  });
});

function scaledDomain(domain: Domain, s: number): Domain {
  const place = ([x, y]: Point): Point => [s * x, s * y];
  const larger = (curve: Curve): Curve => {
    if (curve.kind !== 'line') throw new Error('random domains have straight walls');
    return { kind: 'line', from: place(curve.from), to: place(curve.to) };
  };
  const chain = (given: Domain['outline']): Domain['outline'] => ({
    ...given,
    pieces: given.pieces.map((piece) => ({ ...piece, curve: larger(piece.curve) })),
  });
  return {
    outline: chain(domain.outline),
    holes: domain.holes.map(chain),
    innerWalls: domain.innerWalls.map(chain),
    regions: domain.regions.map(chain),
    tolerance: s * domain.tolerance,
  };
}
