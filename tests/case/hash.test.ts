import { describe, expect, it } from 'vitest';
import { readObject, smallCase } from './small-case.ts';

const hash = (parts: Record<string, unknown> = {}) => readObject(smallCase(parts)).hash;

describe('the hash of a case', () => {
  it('is that of what the case says, however it is written', () => {
    const first = hash();
    expect(first).toMatch(/^[0-9a-f]{64}$/);
    expect(readObject(Object.fromEntries(Object.entries(smallCase()).reverse())).hash).toBe(first);
    expect(hash({ particle: { diffusion: 1e-4 } })).toBe(first);
    expect(hash({ particle: { diffusion: '100 µm²/s' } })).toBe(first);
    expect(hash({ particle: { diffusion: { value: '1e-4 mm^2/s', source: 'us' }, note: 'n' } })).toBe(first);
    expect(hash({ reference: 'first' })).toBe(first);
    expect(hash({ starts: { anywhere: { evenIn: 'everywhere' } } })).toBe(first);
    expect(hash({ accuracy: { seed: 1, nodes: 500_000 } })).toBe(first);
    expect(hash({ asked: [{ figure: 'mean', start: 'anywhere' }] })).toBe(first);
    const { drawing } = smallCase() as { drawing: object };
    const post = (circle: unknown, radius: unknown) => ({ ...drawing, holes: { post: { circle, radius } } });
    expect(hash({ drawing: post(['500 um', '0.5 mm'], '0.01 cm') })).toBe(first);
    expect(readObject(smallCase(), { file: 'another/name.json' }).hash).toBe(first);
  });

  it('changes with anything that bears on an answer', () => {
    const { walls } = smallCase() as { walls: object };
    const varying = { diffusion: { expression: '1 + x', unit: 'mm^2/s' } };
    const all = [
      hash(),
      hash({ particle: { diffusion: 1.0000000000000002e-4 } }),
      hash({ particle: { diffusion: { value: 1e-4, within: '10 %' } } }),
      hash({ particle: { ...varying, noise: 'ito' } }),
      hash({ particle: { ...varying, noise: 'isothermal' } }),
      hash({ particle: { diffusion: 1e-4, drift: { x: 1, y: 0 } } }),
      hash({ particle: { diffusion: 1e-4, loss: 1 } }),
      hash({ units: { length: 'um', time: 's' } }),
      hash({ reference: 'second' }),
      hash({ walls: { ...walls, lid: { on: 'outline', from: 2, to: 2.5 } } }),
      hash({ walls: { ...walls, lid: { on: 'outline', from: 2, to: 3, as: 'opening' } } }),
      hash({ layouts: { first: { floor: 'reflecting' }, second: { lid: 'absorbing' } } }),
      hash({ pins: { p: [0.5, 0.2] } }),
      hash({ accuracy: { seed: 2 } }),
      hash({ asked: [{ figure: 'mean', under: '1 h' }] }),
      hash({ title: 'another' }),
    ];
    expect(new Set(all).size).toBe(all.length);
  });

  it('does not change with the reading of the noise where D is the same everywhere', () => {
    expect(hash({ particle: { diffusion: 1e-4, noise: 'ito' } })).toBe(hash());
  });

  it('changes with a file the case uses', () => {
    const read = (content: string) =>
      readObject(smallCase({ starts: { s: { table: 's.csv' } } }), { readFile: () => content }).hash;
    expect(read('x mm,y mm\n')).toBe(read('x mm,y mm\n'));
    expect(read('x mm,y mm\n')).not.toBe(read('x mm,y mm\n0,0\n'));
  });
});
