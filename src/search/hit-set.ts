/** A set of packed strings, one bit each. Visited in rising order. */
export class HitSet {
  /** The largest bound: 16 spins, half a gigabyte. */
  static readonly LARGEST = 2 ** 32;
  readonly #bits: Uint32Array;

  /** @param bound one past the largest member, at most `LARGEST` */
  constructor(bound: number) {
    this.#bits = new Uint32Array(Math.ceil(bound / 32));
  }

  add(member: number): void {
    this.#bits[member >>> 5]! |= 1 << (member & 31);
  }

  has(member: number): boolean {
    return (this.#bits[member >>> 5]! & (1 << (member & 31))) !== 0;
  }

  clear(): void {
    this.#bits.fill(0);
  }

  forEach(visit: (member: number) => void): void {
    for (let at = 0; at < this.#bits.length; at++)
      for (let rest = this.#bits[at]!; rest !== 0; rest &= rest - 1)
        visit(at * 32 + (31 - Math.clz32(rest & -rest)));
  }
}
