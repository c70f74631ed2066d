import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { XMLParser, XMLValidator } from 'fast-xml-parser';
import { describe, expect, it } from 'vitest';
import type { Answers } from '../../src/run/answers.ts';
import { root, runTarry, squareCase, temporaryFile } from '../support/run-tarry.ts';

const square = (): string => temporaryFile('square.case.json', squareCase());

describe('tarry solve', () => {
  it('answers the strip L²/(3D) on average and prints it with its unit [Redner 2001, chapter 2]', () => {
    const ran = runTarry(['solve', square()]);
    expect(ran.status).toBe(0);
    // One absorbing side, three reflecting: a strip of length 1 mm, mean 1/3 s.
    expect(ran.out).toMatch(/one +333\.\d ms +e/);
    expect(ran.out).toMatch(/left 100(\.0)? %/);
    expect(ran.out).toMatch(/safety decision/);
  });

  it('prints one JSON object for one layout and start, an array for several', () => {
    const one = JSON.parse(runTarry(['solve', square(), '--json']).out) as Answers;
    expect(one.conductance).toBeUndefined(); // one exit alone conducts nothing
    expect(one.mean.value).toBeCloseTo(1 / 3, 4);
    expect(one.mean.kind).toBe('estimate');
    expect(one.mean.low).toBeUndefined();
    expect(one.caseHash).toMatch(/^[0-9a-f]{64}$/);
    const two = squareCase((c) => {
      c['layouts'] = { one: { left: 'absorbing' }, weak: { left: { partlyAbsorbing: '2 mm/s' } } };
    });
    const several = JSON.parse(runTarry(['solve', '-', '--json'], two).out) as Answers[];
    expect(several.map((answers) => answers.layout)).toEqual(['one', 'weak']);
    // Weakly catching: L²/(3D) + L/κ; against the reference by L/κ = 0.5 s [Collins & Kimball 1949].
    expect(several[1]?.difference?.value).toBeCloseTo(0.5, 6);
  });

  it('gives the same bytes twice but for what is in made', () => {
    const path = square();
    const without = (text: string): string => {
      const { made, ...rest } = JSON.parse(text) as Answers;
      expect(made.version).toBe('0.1.0');
      return JSON.stringify(rest);
    };
    const [first, second] = [0, 1].map(() => without(runTarry(['solve', path, '--json']).out));
    expect(first).toBe(second);
  });

  it('heads each table with what is asked in words of the trade, and prints times and shares in their own units', () => {
    const text = squareCase((c) => {
      c['asked'] = [
        { figure: 'time to 95 %', under: '20 s' },
        { figure: 'share of left by 1 s', atLeast: '40 %' },
      ];
    });
    const ran = runTarry(['solve', '-'], text);
    expect(ran.status).toBe(0);
    // From S(t) = 8/π² e^{−π²t/4} + … of the strip, even start: S(1 s) = 0.0687, S = 5 % at 1.129 s.
    expect(ran.out).toMatch(
      /\n95 % caught, released evenly everywhere; must be under 20 s\n +layout +time +verdict +against ref\n +one +1\.129 s +e +meets, 18\.87 s to spare +ref\n/,
    );
    expect(ran.out).toMatch(
      /\ncaught at left by 1 s, released evenly everywhere; must be at least 40 %\n +layout +share .*\n +one +93\.1\d % +e +meets, 53\.1\d % to spare/,
    );
    expect(ran.out).not.toMatch(/not available yet/);
  });
});

describe('tarry check and mesh', () => {
  it('give area, perimeter and loops as JSON', () => {
    const facts = JSON.parse(runTarry(['check', square(), '--json']).out) as Record<string, unknown>;
    expect(facts['area']).toBe(1);
    expect(facts['perimeter']).toBe(4);
    expect(facts['loops']).toEqual({ outline: { corners: 4, length: 4 } });
    expect(facts['mesh']).toBeUndefined();
  });

  it('mesh writes a well-formed VTK file with as many cells as it says', () => {
    const path = square();
    const out = `${path}.vtu`;
    const ran = runTarry(['mesh', path, '--json', '--out', out]);
    expect(ran.status).toBe(0);
    const { mesh } = JSON.parse(ran.out) as { mesh: { triangles: number; nodes: number; minAngle: number } };
    expect(mesh.minAngle).toBeGreaterThan(25);
    const text = readFileSync(out, 'utf8');
    expect(XMLValidator.validate(text)).toBe(true);
    const parsed = new XMLParser({ ignoreAttributes: false }).parse(text) as {
      VTKFile: { UnstructuredGrid: { Piece: { '@_NumberOfCells': string; '@_NumberOfPoints': string } } };
    };
    expect(parsed.VTKFile.UnstructuredGrid.Piece['@_NumberOfCells']).toBe(String(mesh.triangles));
    expect(parsed.VTKFile.UnstructuredGrid.Piece['@_NumberOfPoints']).toBe(String(mesh.nodes));
  });

  const samples = readdirSync(join(root, 'meshes')).filter((name) => name.endsWith('.case.json'));

  it('finds the five samples', () => {
    expect(samples).toHaveLength(5);
  });

  it.each(samples)('check passes the sample %s', (name) => {
    const ran = runTarry(['check', join(root, 'meshes', name)]);
    expect(`${ran.status} ${ran.err}`).toBe('0 ');
    expect(ran.out).toMatch(/In order: (\d+) of \1 layouts can be solved/);
  });
});
