/**
 * Random numbers by counting: a block of four words is a function of seed, stream, walker and block number alone, so
 * that a walker draws the same digits on whichever thread it walks, in whichever order.
 *
 * Source: Philox4x32-10 of Salmon, Moraes, Dror & Shaw 2011, "Parallel random numbers: as easy as 1, 2, 3".
 */

const M0 = 0xd2511f53;
const M1 = 0xcd9e8d57;
const W0 = 0x9e3779b9;
const W1 = 0xbb67ae85;

/** Upper 32 bits of the product of two words, as a signed word. */
function upperProduct(a: number, b: number): number {
  const aLow = a & 0xffff;
  const aHigh = a >>> 16;
  const bLow = b & 0xffff;
  const bHigh = b >>> 16;
  const middle = aHigh * bLow + ((aLow * bLow) >>> 16);
  const carry = aLow * bHigh + (middle & 0xffff);
  return (aHigh * bHigh + Math.floor(middle / 65536) + (carry >>> 16)) | 0;
}

/**
 * One block of Philox4x32-10.
 *
 * @param out four words, replaced
 */
export function philoxBlock(
  out: Uint32Array,
  counter: readonly [number, number, number, number],
  key: readonly [number, number],
): void {
  let [c0, c1, c2, c3] = counter;
  let [k0, k1] = key;
  for (let round = 0; round < 10; round++) {
    const high0 = upperProduct(M0, c0);
    const high1 = upperProduct(M1, c2);
    const low0 = Math.imul(M0, c0);
    const low1 = Math.imul(M1, c2);
    c0 = high1 ^ c1 ^ k0;
    c1 = low1;
    c2 = high0 ^ c3 ^ k1;
    c3 = low0;
    k0 = (k0 + W0) | 0;
    k1 = (k1 + W1) | 0;
  }
  out[0] = c0;
  out[1] = c1;
  out[2] = c2;
  out[3] = c3;
}

/** Beyond this many standard deviations a pair of normal numbers is never drawn, so that no step leaves its disc. */
export const farthestNormal = 5;

const leastUniform = Math.exp(-0.5 * farthestNormal * farthestNormal);
/** Makes up for what the truncation takes from the variance: E[r²] = 2 − leastUniform·r_max²/(1 − leastUniform). */
const restored = Math.sqrt(2 / (2 - (leastUniform * farthestNormal * farthestNormal) / (1 - leastUniform)));

/** The random numbers of one walker at a time. */
export class CounterRandom {
  /** The pair that {@link normals} drew last. */
  first = 0;
  second = 0;
  readonly #seed: number;
  readonly #stream: number;
  readonly #words = new Uint32Array(4);
  #walker = 0;
  #block = 0;
  #next = 4;

  /**
   * @param seed a whole number ≥ 0; its lower 32 bits count
   * @param stream independent numbers for the same walkers, e.g. of another step size
   */
  constructor(seed: number, stream: number) {
    this.#seed = seed;
    this.#stream = stream;
  }

  /** Goes to the first number of a walker. */
  begin(walker: number): void {
    this.#walker = walker;
    this.#block = 0;
    this.#next = 4;
  }

  /** A number evenly spread over (0, 1), both ends left out; 32 bits. */
  uniform(): number {
    if (this.#next === 4) this.#draw();
    return (this.#words[this.#next++] + 0.5) * 2 ** -32;
  }

  /**
   * Two independent normal numbers, mean 0 and variance 1, into `first` and `second`; never farther than
   * {@link farthestNormal} from the origin (to 2e-5).
   *
   * Source: Box & Muller 1958.
   */
  normals(): void {
    const u = leastUniform + (1 - leastUniform) * this.uniform();
    const radius = restored * Math.sqrt(-2 * Math.log(u));
    const angle = 2 * Math.PI * this.uniform();
    this.first = radius * Math.cos(angle);
    this.second = radius * Math.sin(angle);
  }

  // As philoxBlock, without arrays: this is drawn for every step.
  #draw(): void {
    let c0 = this.#block++;
    let c1 = 0;
    let c2 = this.#walker;
    let c3 = this.#stream;
    let k0 = this.#seed | 0;
    let k1 = 0;
    for (let round = 0; round < 10; round++) {
      const high0 = upperProduct(M0, c0);
      const high1 = upperProduct(M1, c2);
      const low0 = Math.imul(M0, c0);
      const low1 = Math.imul(M1, c2);
      c0 = high1 ^ c1 ^ k0;
      c1 = low1;
      c2 = high0 ^ c3 ^ k1;
      c3 = low0;
      k0 = (k0 + W0) | 0;
      k1 = (k1 + W1) | 0;
    }
    const words = this.#words;
    words[0] = c0;
    words[1] = c1;
    words[2] = c2;
    words[3] = c3;
    this.#next = 0;
  }
}
