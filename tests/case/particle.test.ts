import { describe, expect, it } from 'vitest';
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

  it('cannot be Stratonovich for a tensor that varies', () => {
    const raw = { diffusion: { principal: [varying, D] }, noise: 'stratonovich' };
    expect(message(raw)).toContain('it depends on which root of D is meant');
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

describe('what of a particle is not available yet', () => {
  it.each([
    [{ drift: { x: '1e-3 mm/s', y: 0 } }, 'drift (particle.drift): not available yet'],
    [
      { driftIn: { bay: { potential: { expression: 'x^2' } } } },
      'drift (particle.driftIn.bay): not available yet',
    ],
    [{ loss: '0.01 1/s' }, 'loss (particle.loss): not available yet'],
    [{ lossIn: { bay: 1 } }, 'loss (particle.lossIn.bay): not available yet'],
    [
      {
        diffusion: {
          tensor: [
            [2, 0],
            [0, 1],
          ],
        },
      },
      'a diffusion tensor (particle.diffusion): not available yet',
    ],
  ])('%j holds back every layout and says so', (raw, told) => {
    const read = particle({ diffusion: D, ...raw });
    expect(read.notAvailable).toEqual([told]);
    expect(read.layouts.map((layout) => layout.notAvailable)).toEqual([[told], [told]]);
  });

  it('is nothing where a drift or a loss is 0', () => {
    const read = particle({ diffusion: D, drift: { x: 0, y: '0 mm/s' }, loss: 0 });
    expect(read.notAvailable).toEqual([]);
    expect(read.layouts[0]?.notAvailable).toBeUndefined();
  });

  it('never leaves a tensor to be solved as a number', () => {
    const { diffusion } = particle({ diffusion: { principal: [1, 2] } }).particle;
    expect(diffusion.kind === 'constant' && diffusion.value).toBeNaN();
  });
});
