/**
 * Long sums of Pauli strings, packed: two 30-bit halves a string (15 spins each) in an open-addressing table, and coefficients in planes of
 * doubles that hold integers exactly. `Operator` costs about 150 bytes and a hash of a `bigint` a term; this one 24 and up.
 */
import { LimitError } from '../errors.ts';

/** Spins in either half. */
export const HALF_SPINS = 15;
/** Longest string that packs. */
export const MAX_PACKED_SPINS = 2 * HALF_SPINS;

export class TermTable {
  #capacity: number;
  #used = 0;
  #low: Int32Array;
  /** Shifted up by one, so that 0 marks an empty slot. */
  #high: Int32Array;
  #planes: Float64Array;

  /** @param planes doubles a term; @param expected terms to make room for */
  constructor(
    readonly planes: number,
    expected = 64,
  ) {
    this.#capacity = 2 ** Math.ceil(Math.log2(Math.max(16, expected * 1.7)));
    this.#low = new Int32Array(this.#capacity);
    this.#high = new Int32Array(this.#capacity);
    this.#planes = new Float64Array(this.#capacity * planes);
  }

  get size(): number {
    return this.#used;
  }

  /** Where the coefficients of a string are in `values`, made when new; valid until the next call. */
  slot(low: number, high: number): number {
    if (this.#used * 5 > this.#capacity * 3) this.#grow();
    const marked = high + 1;
    const mask = this.#capacity - 1;
    let at = hash(low, high) & mask;
    for (;;) {
      const found = this.#high[at]!;
      if (found === 0) {
        this.#used++;
        this.#high[at] = marked;
        this.#low[at] = low;
        return at * this.planes;
      }
      if (found === marked && this.#low[at] === low) return at * this.planes;
      at = (at + 1) & mask;
    }
  }

  get values(): Float64Array {
    return this.#planes;
  }

  /** Every string in the table, in no order. */
  forEach(visit: (low: number, high: number, slot: number) => void): void {
    for (let at = 0; at < this.#capacity; at++)
      if (this.#high[at] !== 0) visit(this.#low[at]!, this.#high[at]! - 1, at * this.planes);
  }

  /** Twice the slots; old and new tables stand side by side for a moment. */
  #grow(): void {
    if (this.#capacity >= MAX_SLOTS)
      throw new LimitError(`term table: more than ${MAX_SLOTS} strings; ask for a smaller range`);
    const [low, high, planes, old] = [this.#low, this.#high, this.#planes, this.#capacity];
    this.#capacity *= 2;
    this.#low = new Int32Array(this.#capacity);
    this.#high = new Int32Array(this.#capacity);
    this.#planes = new Float64Array(this.#capacity * this.planes);
    this.#used = 0;
    for (let at = 0; at < old; at++) {
      if (high[at] === 0) continue;
      const slot = this.slot(low[at]!, high[at]! - 1);
      for (let p = 0; p < this.planes; p++) this.#planes[slot + p] = planes[at * this.planes + p]!;
    }
  }
}

/** 2 GB of slots with two planes. */
const MAX_SLOTS = 2 ** 26;

/** An integer hash with good avalanche (common practice, no source). */
function hash(low: number, high: number): number {
  let z = Math.imul(low, 0x9e3779b1) ^ Math.imul(high, 0x85ebca77);
  z = Math.imul(z ^ (z >>> 15), 0x735a2d97);
  return z ^ (z >>> 15);
}
