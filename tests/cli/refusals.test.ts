import { closeSync, ftruncateSync, mkdtempSync, openSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { type Ran, runTarry, squareCase, temporaryFile } from '../support/run-tarry.ts';

/** What every refusal of a case owes its reader. */
function expectRefusal(ran: Ran, ...words: readonly (string | RegExp)[]): void {
  expect(ran.err).not.toMatch(/\n\s+at .*[(:]\d+/); // a stack trace
  expect(ran.out).toBe('');
  for (const word of words) expect(ran.err).toMatch(word);
  expect(ran.err.trim().split('\n')).toHaveLength(1);
  expect(ran.status).toBe(2);
}

const solveText = (text: string): Ran => runTarry(['solve', temporaryFile('bad.case.json', text)]);
const solveSquare = (change: (theCase: Record<string, unknown>) => void): Ran =>
  solveText(squareCase(change));

describe('a case at fault gets one message, status 2 and no trace', () => {
  it('names both places and the crossing of an outline that crosses itself', () => {
    const ran = solveSquare((c) => {
      c['drawing'] = {
        outline: {
          polygon: [
            [0, 0],
            [1, 1],
            [1, 0],
            [0, 1],
          ],
        },
      };
    });
    expectRefusal(ran, /cross/, /\(0\.5, 0\.5\)/, /bad\.case\.json/);
  });

  it('names a hole that lies outside', () => {
    const ran = solveSquare((c) => {
      c['drawing'] = {
        outline: { rectangle: [0, 0, 1, 1] },
        holes: { post: { circle: [3, 0.5], radius: 0.1 } },
      };
    });
    expectRefusal(ran, /outside/, /post/);
  });

  it('names an unknown key, its line and the nearest known one', () => {
    const ran = solveSquare((c) => {
      c['particel'] = c['particle'];
      delete c['particle'];
    });
    expectRefusal(ran, /particel/, /particle/, /line \d+/);
  });

  it('says which unit does not fit and gives one that does', () => {
    const ran = solveSquare((c) => {
      c['particle'] = { diffusion: '1 mm/s' };
    });
    expectRefusal(ran, /mm\/s/, /mm(\^2|²)\/s/, /diffusion/);
  });

  it('names the layout that has no way out', () => {
    const ran = solveSquare((c) => {
      c['layouts'] = { sealed: { left: 'reflecting' } };
    });
    expectRefusal(ran, /sealed/, /can leave/, /absorbing/);
  });

  it('asks for the noise convention when D varies and says what each means', () => {
    const ran = solveSquare((c) => {
      c['particle'] = { diffusion: { expression: '1+x', unit: 'mm^2/s' } };
    });
    expectRefusal(ran, /ito/i, /stratonovich/i, /isothermal/i);
  });

  it('refuses a file of 1 GB without reading it', () => {
    const path = join(mkdtempSync(join(tmpdir(), 'tarry-')), 'large.case.json');
    const handle = openSync(path, 'w');
    ftruncateSync(handle, 1e9); // a sparse file: no disk is used
    closeSync(handle);
    expectRefusal(runTarry(['solve', path]), /1000(\.0)? MB/, /large\.case\.json/);
  });

  it('refuses a binary file', () => {
    const bytes = Uint8Array.from({ length: 4096 }, (_, i) => (i * 37) % 256);
    expectRefusal(runTarry(['solve', temporaryFile('photo.case.json', bytes)]), /not text/, /photo/);
  });

  it('refuses a file that is not there, a folder, and text that is not JSON, each in its own words', () => {
    expectRefusal(runTarry(['solve', '/nowhere/at-all.case.json']), /no file/);
    expectRefusal(runTarry(['solve', tmpdir()]), /folder/);
    expectRefusal(solveText('{ "tarry": 1, oops }'), /JSON/, /line 1/);
  });

  it('refuses a layout or a start that the case does not have', () => {
    const path = temporaryFile('square.case.json', squareCase());
    expectRefusal(runTarry(['solve', path, '--layout', 'two']), /"two"/, /"one"/);
    expectRefusal(runTarry(['solve', path, '--start', 'here']), /"here"/, /"anywhere"/);
  });

  it('gives the same as JSON in the last line of standard error when --json is asked for', () => {
    const text = squareCase((c) => {
      c['drawing'] = {
        outline: {
          polygon: [
            [0, 0],
            [1, 1],
            [1, 0],
            [0, 1],
          ],
        },
      };
    });
    const ran = runTarry(['check', '-', '--json'], text);
    expect(ran.status).toBe(2);
    const last = JSON.parse(ran.err.trim().split('\n').at(-1) ?? '') as {
      error: { code: string; what: string; where: { at?: number[][] }; remedy: string };
    };
    expect(last.error.code).toBe('WALLS_CROSS');
    expect(last.error.where.at?.[0]).toEqual([0.5, 0.5]);
    expect(last.error.remedy.length).toBeGreaterThan(10);
  });
});
