/** A set of packed strings: one bit each up to 16 spins, hashed beyond. Visited in a fixed order. */
export class HitSet {
  readonly #bits: Uint32Array | undefined;
  readonly #sparse = new Set<number>();

  /** @param bound one past the largest member */
  constructor(bound: number) {
    if (bound <= 2 ** 32) this.#bits = new Uint32Array(Math.ceil(bound / 32));
  }

  add(member: number): void {
    if (this.#bits === undefined) this.#sparse.add(member);
    else this.#bits[member >>> 5]! |= 1 << (member & 31);
  }

  has(member: number): boolean {
    return this.#bits === undefined
      ? this.#sparse.has(member)
      : (this.#bits[member >>> 5]! & (1 << (member & 31))) !== 0;
  }

  clear(): void {
    this.#bits?.fill(0);
    this.#sparse.clear();
  }

  forEach(visit: (member: number) => void): void {
    if (this.#bits === undefined) {
      for (const member of [...this.#sparse].sort((a, b) => a - b)) visit(member);
      return;
    }
    for (let at = 0; at < this.#bits.length; at++)
      for (let rest = this.#bits[at]!; rest !== 0; rest &= rest - 1)
        visit(at * 32 + (31 - Math.clz32(rest & -rest)));
  }
}
