import { describe, expect, it } from 'vitest';
import type { Coefficient } from '../../solver/index.ts';
import { describeError } from '../../src/case/describe-error.ts';
import { readObject, refusalOf, smallCase } from './small-case.ts';

const particle = (raw: Record<string, unknown>) => readObject(smallCase({ particle: raw }));
const message = (raw: Record<string, unknown>) => describeError(refusalOf(smallCase({ particle: raw })));
const D = '1e-4 mm^2/s';
const varying = { expression: '1e-4*(1+x)', unit: 'mm^2/s' };

describe('noise', () => {
  it.each([{ diffusion: varying }, { diffusion: D, diffusionIn: { bay: '8e-5 mm^2/s' } }])(
    'must be stated when D varies: %j',
    (raw) => {
      const error = refusalOf(smallCase({ particle: raw }));
      expect(error).toMatchObject({ code: 'NOISE_NOT_STATED', where: { key: 'particle' } });
      // METHODS 1: L u = D^(1−α) ∇·(D^α ∇u), α = 0, ½, 1.
      expect(error.remedy).toContain('"ito" takes D at the start of each step (L u = D Δu)');
      expect(error.remedy).toContain('"stratonovich" half way (L u = √D ∇·(√D ∇u))');
      expect(error.remedy).toContain('"isothermal" at its end (L u = ∇·(D ∇u)');
      expect(particle({ ...raw, noise: 'stratonovich' }).particle.noise).toBe('stratonovich');
    },
  );

  it('may be left out for one constant D, written as an expression or a tensor too', () => {
    expect(particle({ diffusion: { expression: '2*1e-4', unit: 'mm^2/s' } }).particle.diffusion).toEqual({
      kind: 'constant',
      value: 2e-4,
    });
    expect(particle({ diffusion: { principal: [D, '2e-4 mm^2/s'], turned: '30 deg' } }).particle.noise).toBe(
      'isothermal',
    );
  });

  it('is isothermal for one constant D, where the three readings are one process', () => {
    expect(particle({ diffusion: D, noise: 'ito' }).particle.noise).toBe('isothermal');
  });

  it('cannot be Stratonovich for a tensor that varies or jumps, nor Itô for one that jumps', () => {
    const raw = { diffusion: { principal: [varying, D] } };
    const isTensorRefusal = (parts: Record<string, unknown>, words: string) => {
      const error = refusalOf(smallCase({ particle: parts }));
      expect(error).toMatchObject({ code: 'TENSOR_CONVENTION', where: { key: 'particle.noise' } });
      expect(error.what).toContain(words);
    };
    isTensorRefusal({ ...raw, noise: 'stratonovich' }, 'it depends on which root of D is meant');
    const jump = { diffusion: { principal: [1, 2] }, diffusionIn: { bay: 1 } };
    isTensorRefusal({ ...jump, noise: 'stratonovich' }, 'it depends on which root of D is meant');
    isTensorRefusal({ ...jump, noise: 'ito' }, 'jumps from one region to the next');
    expect(particle({ ...raw, noise: 'ito' }).particle.noise).toBe('ito');
    expect(particle({ ...jump, noise: 'isothermal' }).particle.noise).toBe('isothermal');
  });
});

describe('D', () => {
  it('varies in the units of the case, whatever its own', () => {
    const { diffusion } = particle({
      diffusion: { expression: '100*(1+x)', unit: 'um^2/s' },
      noise: 'ito',
    }).particle;
    expect(diffusion.kind === 'varying' && diffusion.at(1, 0)).toBeCloseTo(2e-4, 18);
  });

  it('keeps its range as it is written', () => {
    const within = (range: unknown) =>
      particle({ diffusion: { value: D, within: range } }).particle.stated?.within;
    expect(within('half to double')).toEqual([5e-5, 2e-4]);
    expect(within(['9e-5 mm^2/s', '200 um^2/s'])).toEqual([9e-5, 2e-4]);
    expect(within('± 50 %')).toEqual([5e-5, 1.5e-4]);
  });

  it.each([
    [{ diffusion: 0 }, '0 is not above 0'],
    [{ diffusion: '-1e-4 mm^2/s' }, '-0.0001 is not above 0'],
    [{ diffusion: '1e-4 mm/s' }, '"mm/s" is length/time, but a diffusion coefficient is length^2/time'],
    [{ diffusion: '0,0001 mm^2/s' }, 'Write "0.0001 mm^2/s"'],
    [{ diffusion: '1e-4' }, '"1e-4" has no unit'],
    [{ diffusion: { expression: '-1', unit: 'mm^2/s' } }, '-1 is not above 0'],
  ])('refused as %j brings the factor two to mind', (raw, expected) => {
    const text = message(raw);
    expect(text).toContain(expected);
    expect(text).toContain('dX = b dt + σ dW has D = σ²/2');
  });

  it.each([
    [{ diffusion: '1e-4*(1+x)' }, 'Write { "expression": "1e-4*(1+x)", "unit": "mm^2/s" }'],
    [
      { diffusion: { expression: '1+x' }, noise: 'ito' },
      'particle.diffusion: the expression has no "unit". Add one, such as "unit": "mm^2/s"',
    ],
    [
      { diffusion: { expression: '1+x', unit: 'mm' }, noise: 'ito' },
      'particle.diffusion.unit: "mm" is length',
    ],
    [
      { diffusion: { expression: 'import("fs")', unit: 'mm^2/s' } },
      'particle.diffusion.expression: the function "import" is not allowed here',
    ],
    [
      { diffusion: D, diffusionIn: { bey: D } },
      'particle.diffusionIn.bey: no region is called "bey". Did you mean "bay"?',
    ],
    [
      { diffusion: { value: D, within: 'roughly' } },
      'particle.diffusion.within: "roughly" is not understood as a range',
    ],
    [{ diffusion: { value: D, within: '100 %' } }, 'the range reaches 0 or below'],
    [
      { diffusion: { value: D, within: ['2e-4 mm^2/s', '3e-4 mm^2/s'] } },
      'the value lies outside its own range',
    ],
    [
      {
        diffusion: {
          tensor: [
            [1, 0.5],
            [0.4, 1],
          ],
        },
      },
      'particle.diffusion.tensor: the tensor is not symmetric',
    ],
    [
      {
        diffusion: {
          tensor: [
            [1, 2],
            [2, 1],
          ],
        },
      },
      'not positive definite',
    ],
    [{ diffusion: { principal: [1, 0] } }, 'particle.diffusion.principal.1: 0 is not above 0'],
    [{ diffusion: D, loss: -1 }, 'particle.loss: a loss rate is below 0'],
    [{ diffusion: D, drift: { potential: 'x^2' } }, 'Write { "expression": "x^2", "unit": "1" }'],
    [{ diffusion: D, drift: { potential: { expression: 'x', unit: 'mm' } } }, 'a plain number'],
    [
      { diffusion: D, drift: { x: '1 mm', y: 0 } },
      'particle.drift.x: "mm" is length, but a speed is length/time',
    ],
  ])('refuses %j', (raw, expected) => {
    expect(message(raw)).toContain(expected);
  });
});

/** D, drift or loss at a place. */
const valueAt = (c: Coefficient | undefined, x: number, y: number) =>
  c?.kind === 'varying' ? c.at(x, y) : c?.value;

describe('a tensor', () => {
  const tensorOf = (raw: unknown, parts: Record<string, unknown> = {}) => {
    const { diffusion } = readObject(smallCase({ particle: { diffusion: raw }, ...parts })).particle;
    if (diffusion.kind !== 'tensor' || diffusion.tensor.kind !== 'constant') throw new Error('no tensor');
    return diffusion.tensor.value;
  };

  it('is given by its entries, each a value of its own', () => {
    const rows = [
      ['2e-4 mm^2/s', '-50 um^2/s'],
      [-5e-5, 1e-4],
    ];
    expect(tensorOf({ tensor: rows })).toEqual([2e-4, -5e-5, 1e-4]);
  });

  it('or by its principal values and how the first axis is turned', () => {
    // D = R diag(3, 1) Rᵀ with a turn of 30°: xx = 3·¾ + 1·¼, xy = (3 − 1)·√3/4, yy = 3·¼ + 1·¾.
    const [xx, xy, yy] = tensorOf({ principal: [3, 1], turned: '30 deg' });
    expect(xx).toBeCloseTo(2.5, 14);
    expect(xy).toBeCloseTo(Math.sqrt(3) / 2, 14);
    expect(yy).toBeCloseTo(1.5, 14);
  });

  it('varies where an entry does', () => {
    const { diffusion } = particle({
      diffusion: {
        tensor: [
          [varying, 0],
          [0, '200 um^2/s'],
        ],
      },
      noise: 'isothermal',
    }).particle;
    const tensor = diffusion.kind === 'tensor' && diffusion.tensor;
    const entries = tensor && tensor.kind === 'varying' ? tensor.at(1, 5) : [];
    expect(entries).toEqual([2e-4, 0, 2e-4]);
  });
});

describe('drift and loss', () => {
  it('are read in the units of the case, everywhere and by region', () => {
    const read = particle({
      diffusion: D,
      drift: { x: '1 um/s', y: { expression: '3*x', unit: 'mm/min' } },
      driftIn: { bay: { potential: { expression: '4*x' } } },
      loss: '6 1/min',
      lossIn: { bay: 0 },
    }).particle;
    const { drift } = read;
    if (drift?.kind !== 'components') throw new Error('no components');
    expect(valueAt(drift.x, 0, 0)).toBe(1e-3);
    expect(valueAt(drift.y, 2, 0)).toBeCloseTo(0.1, 15);
    const own = read.driftIn.get(0);
    expect(own?.kind === 'potential' && valueAt(own.value, 2, 0)).toBe(8);
    expect(read.loss).toEqual({ kind: 'constant', value: 0.1 });
    expect(valueAt(read.lossIn.get(0), 0, 0)).toBe(0);
  });

  it('are told where a range of theirs bears on no answer yet', () => {
    const read = particle({ diffusion: D, drift: { x: { value: 1, within: '10 %' }, y: 0 } });
    expect(read.notAvailable).toEqual([
      'what ranges of inputs do to the answers (particle.drift.x): not available yet',
    ]);
    expect(read.layouts.map((layout) => layout.notAvailable)).toEqual([undefined, undefined]);
  });
});

describe('where y is written downwards', () => {
  const drawing = { y: 'down', outline: { rectangle: [0, 0, 1, 1] } };
  const parts = { drawing, walls: { floor: { on: 'outline' } }, layouts: { a: { floor: 'absorbing' } } };
  const down = (raw: Record<string, unknown>) => readObject(smallCase({ ...parts, particle: raw })).particle;

  it('a drift downwards as seen has a positive y, and coefficients know the place as written', () => {
    // Drawn upwards, the written place (0, 3) is (0, −3).
    const { drift } = down({ diffusion: D, drift: { x: { expression: 'y', unit: 'mm/s' }, y: 2 } });
    if (drift?.kind !== 'components') throw new Error('no components');
    expect([valueAt(drift.x, 0, -3), valueAt(drift.y, 0, -3)]).toEqual([3, -2]);
    const other = down({ diffusion: D, drift: { x: 0, y: { expression: 'y', unit: 'mm/s' } } }).drift;
    expect(other?.kind === 'components' && valueAt(other.y, 0, -3)).toBe(-3);
    const { loss } = down({ diffusion: D, loss: { expression: 'y', unit: '1/s' } });
    expect(valueAt(loss, 0, -3)).toBe(3);
  });

  it('the mixed entry of a tensor turns its sign, an angle as seen does not', () => {
    const entries = (diffusion: object) => {
      const read = down({ diffusion }).diffusion;
      return read.kind === 'tensor' && read.tensor.kind === 'constant' ? read.tensor.value : [];
    };
    const rows = [
      [2, 1],
      [1, 2],
    ];
    expect(entries({ tensor: rows })).toEqual([2, -1, 2]);
    expect(entries({ principal: [3, 1], turned: 45 })[1]).toBeCloseTo(1, 14);
  });
});
