/** First in, first out queue of whole numbers in a ring that grows by doubling. */
export class IntQueue {
  #ring = new Int32Array(1024);
  #head = 0;
  #count = 0;

  get count(): number {
    return this.#count;
  }

  push(value: number): void {
    if (this.#count === this.#ring.length) this.#grow();
    this.#ring[(this.#head + this.#count) & (this.#ring.length - 1)] = value;
    this.#count++;
  }

  /** The oldest entry; to be called only while `count` > 0. */
  shift(): number {
    const value = this.#ring[this.#head];
    this.#head = (this.#head + 1) & (this.#ring.length - 1);
    this.#count--;
    return value;
  }

  #grow(): void {
    const old = this.#ring;
    const ring = new Int32Array(2 * old.length);
    for (let i = 0; i < this.#count; i++) ring[i] = old[(this.#head + i) & (old.length - 1)];
    this.#ring = ring;
    this.#head = 0;
  }
}
