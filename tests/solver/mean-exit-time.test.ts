import { describe, expect, it } from 'vitest';
import { assemble, evenStart, meanExitTime, valueFromStart } from '../../solver/index.ts';
import { discMesh, rectangleMesh } from '../support/grid-mesh.ts';
import {
  absorbing,
  constant,
  nodeAt,
  partly,
  problem,
  reflecting,
  relativeError,
} from '../support/physics.ts';

const strip = (columns: number) => rectangleMesh({ x: [0, 1], y: [0, 0.25], columns, rows: columns / 4 });

describe('strip, ends x = 0 and x = 1, sides reflecting', () => {
  it('both ends absorbing: u = x(L − x)/2D at every node [Redner 2001, ch. 2]', () => {
    const mesh = strip(16);
    const d = 0.7;
    const u = meanExitTime(
      assemble(mesh, problem(constant(d), [reflecting, absorbing(), reflecting, absorbing()])),
    );
    for (let i = 0; i < u.length; i++) {
      const x = mesh.nodes[2 * i] ?? Number.NaN;
      expect(u[i]).toBeCloseTo((x * (1 - x)) / (2 * d), 12); // linear elements are exact at nodes in one dimension
    }
  });

  it('x = 0 reflecting, x = 1 absorbing: u = (L² − x²)/2D, average L²/3D [Redner 2001, ch. 2]', () => {
    const mesh = strip(32);
    const u = meanExitTime(
      assemble(mesh, problem(constant(1), [reflecting, absorbing(), reflecting, reflecting])),
    );
    // Not exact at nodes: at a corner between reflecting walls the lumped mass is a sixth or a third of h², not a quarter.
    expect(relativeError(u[nodeAt(mesh.nodes, 0, 0)], 0.5)).toBeLessThan(1e-3);
    expect(relativeError(u[nodeAt(mesh.nodes, 0.5, 0.125)], 0.375)).toBeLessThan(1e-3);
    expect(relativeError(valueFromStart(evenStart(mesh), u), 1 / 3)).toBeLessThan(1e-3);
  });

  it('x = 1 partly absorbing with κ: u = (L² − x²)/2D + L/κ [Collins & Kimball 1949; Redner 2001]', () => {
    const mesh = strip(32);
    for (const kappa of [0.01, 1, 250]) {
      const u = meanExitTime(
        assemble(mesh, problem(constant(2), [reflecting, partly(kappa), reflecting, reflecting])),
      );
      expect(relativeError(u[nodeAt(mesh.nodes, 0, 0)], 1 / 4 + 1 / kappa)).toBeLessThan(1e-3);
      expect(relativeError(u[nodeAt(mesh.nodes, 1, 0.125)], 1 / kappa)).toBeLessThan(1e-3); // middle of the wall
    }
  });
});

describe('disc of radius R', () => {
  const averageError = (rings: number): number => {
    const mesh = discMesh({ radius: 2, rings });
    const u = meanExitTime(assemble(mesh, problem(constant(0.5), [absorbing()])));
    return Math.abs(valueFromStart(evenStart(mesh), u) - 1);
  };

  it('rim absorbing: u = (R² − r²)/4D, average R²/8D, second order in h [Redner 2001, recalled]', () => {
    const u = meanExitTime(
      assemble(discMesh({ radius: 2, rings: 40 }), problem(constant(0.5), [absorbing()])),
    );
    expect(relativeError(u[0], 2)).toBeLessThan(1e-3);
    expect(averageError(20) / averageError(40)).toBeGreaterThan(3.6);
    expect(averageError(20) / averageError(40)).toBeLessThan(4.4);
  });

  it('rim partly absorbing: u = (R² − r²)/4D + R/2κ [Carslaw & Jaeger 1959, sec. 7.7]', () => {
    const mesh = discMesh({ radius: 1, rings: 40 });
    const u = meanExitTime(assemble(mesh, problem(constant(1), [partly(2)])));
    expect(relativeError(u[0], 0.5)).toBeLessThan(1e-3);
    expect(relativeError(u[nodeAt(mesh.nodes, 1, 0)], 0.25)).toBeLessThan(1e-3);
    expect(relativeError(valueFromStart(evenStart(mesh), u), 0.375)).toBeLessThan(1e-3);
  });
});

describe('unit square', () => {
  const mesh = rectangleMesh({ x: [0, 1], y: [0, 1], columns: 64, rows: 64 });

  it('all walls absorbing: centre and average [Timoshenko & Goodier, sec. 109: torsion of a square bar]', () => {
    const u = meanExitTime(
      assemble(mesh, problem(constant(1), [absorbing(), absorbing(), absorbing(), absorbing()])),
    );
    expect(relativeError(u[nodeAt(mesh.nodes, 0.5, 0.5)], 0.0736713532815138)).toBeLessThan(1e-3);
    expect(relativeError(valueFromStart(evenStart(mesh), u), 0.0351442537387884)).toBeLessThan(1e-3);
  });

  it('all walls partly absorbing, κ = 2: double cosine series [Carslaw & Jaeger 1959, sec. 3.11 and 5.6]', () => {
    const u = meanExitTime(
      assemble(mesh, problem(constant(1), [partly(2), partly(2), partly(2), partly(2)])),
    );
    expect(relativeError(u[nodeAt(mesh.nodes, 0.5, 0.5)], 0.2054212362)).toBeLessThan(1e-3);
    expect(relativeError(u[nodeAt(mesh.nodes, 0, 0)], 0.09509471901)).toBeLessThan(1e-3);
    expect(relativeError(valueFromStart(evenStart(mesh), u), 0.1647216964)).toBeLessThan(1e-3);
  });
});
