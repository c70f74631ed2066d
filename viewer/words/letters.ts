/** One short letter per wall name, kept for as long as the case is open, so that layouts can be told apart by eye. */
export class Letters {
  readonly #byName = new Map<string, string>();

  /** The letter of a wall: the first letter of its name that is free, else the first free one of the alphabet. */
  of(name: string): string {
    const known = this.#byName.get(name);
    if (known !== undefined) return known;
    const taken = new Set(this.#byName.values());
    const wanted = [...(name.toLowerCase().match(/[a-z]/g) ?? []), ...'abcdefghijklmnopqrstuvwxyz'];
    const free = wanted.find((letter) => !taken.has(letter));
    const letter = free ?? `${wanted[0] ?? 'w'}${this.#byName.size}`;
    this.#byName.set(name, letter);
    return letter;
  }
}
