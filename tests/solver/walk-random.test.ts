import { describe, expect, it } from 'vitest';
import { CounterRandom, farthestNormal, philoxBlock } from '../../solver/trust/counter-random.ts';

const hex = (words: Iterable<number>): string =>
  [...words].map((word) => word.toString(16).padStart(8, '0')).join(' ');

describe('random numbers by counting', () => {
  it('gives the published blocks of Philox4x32-10 [Salmon et al. 2011, known-answer vectors of Random123, recalled]', () => {
    const out = new Uint32Array(4);
    philoxBlock(out, [0, 0, 0, 0], [0, 0]);
    expect(hex(out)).toBe('6627e8d5 e169c58d bc57ac4c 9b00dbd8');
    philoxBlock(out, [0xffffffff, 0xffffffff, 0xffffffff, 0xffffffff], [0xffffffff, 0xffffffff]);
    expect(hex(out)).toBe('408f276d 41c83b0e a20bc7c6 6d5451fd');
    philoxBlock(out, [0x243f6a88, 0x85a308d3, 0x13198a2e, 0x03707344], [0xa4093822, 0x299f31d0]);
    expect(hex(out)).toBe('d16cfe09 94fdcceb 5001e420 24126ea1');
  });

  it('draws of a walker are its blocks in order: counter (block, 0, walker, stream), key (seed, 0)', () => {
    const random = new CounterRandom(7, 3);
    random.begin(11);
    const drawn = Array.from({ length: 8 }, () => random.uniform());
    const out = new Uint32Array(4);
    const blocks = [0, 1].flatMap((block) => {
      philoxBlock(out, [block, 0, 11, 3], [7, 0]);
      return [...out];
    });
    expect(drawn).toEqual(blocks.map((word) => (word + 0.5) * 2 ** -32));
  });

  it('starts a walker afresh whatever was drawn before', () => {
    const random = new CounterRandom(1, 0);
    random.begin(5);
    const first = random.uniform();
    random.begin(6);
    random.uniform();
    random.begin(5);
    expect(random.uniform()).toBe(first);
  });

  it('normal pairs have mean 0, variance 1, no correlation, fourth moment 3, and stay within the disc', () => {
    const random = new CounterRandom(2, 0);
    random.begin(0);
    const n = 200_000;
    const sums = { x: 0, xx: 0, yy: 0, xy: 0, x4: 0 };
    let farthest = 0;
    for (let i = 0; i < n; i++) {
      random.normals();
      const { first: x, second: y } = random;
      sums.x += x;
      sums.xx += x * x;
      sums.yy += y * y;
      sums.xy += x * y;
      sums.x4 += x ** 4;
      farthest = Math.max(farthest, Math.hypot(x, y));
    }
    // Four standard errors of each: sd of x 1, of x² √2, of xy 1, of x⁴ √96.
    const within = (value: number, expected: number, sd: number): void =>
      expect(Math.abs(value / n - expected) * Math.sqrt(n)).toBeLessThan(4 * sd);
    within(sums.x, 0, 1);
    within(sums.xx, 1, Math.SQRT2);
    within(sums.yy, 1, Math.SQRT2);
    within(sums.xy, 0, 1);
    within(sums.x4, 3, Math.sqrt(96));
    expect(farthest).toBeGreaterThan(4.5);
    expect(farthest).toBeLessThan(farthestNormal * 1.0001);
  });
});
