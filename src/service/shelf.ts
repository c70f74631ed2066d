/**
 * Keeps what was used last, up to a count and a number of bytes; the longest unused goes first. The newest is always
 * kept, whatever its size.
 */
export class Shelf<Value> {
  readonly #kept = new Map<string, { readonly value: Value; readonly bytes: number }>();
  readonly #most: { readonly count: number; readonly bytes: number };
  #bytes = 0;

  constructor(most: { readonly count: number; readonly bytes: number }) {
    this.#most = most;
  }

  get count(): number {
    return this.#kept.size;
  }

  get(key: string): Value | undefined {
    const found = this.#kept.get(key);
    if (found === undefined) return undefined;
    this.#kept.delete(key);
    this.#kept.set(key, found);
    return found.value;
  }

  put(key: string, value: Value, bytes: number): void {
    this.#remove(key);
    this.#kept.set(key, { value, bytes });
    this.#bytes += bytes;
    for (const oldest of this.#kept.keys()) {
      if (this.#kept.size <= this.#most.count && this.#bytes <= this.#most.bytes) return;
      if (oldest !== key) this.#remove(oldest);
    }
  }

  #remove(key: string): void {
    const found = this.#kept.get(key);
    if (found === undefined) return;
    this.#kept.delete(key);
    this.#bytes -= found.bytes;
  }
}
