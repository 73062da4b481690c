/**
 * Seeded numbers that are the same on every machine: the generator SplitMix64 ("Fast splittable pseudorandom number generators", OOPSLA
 * 2014), 64 bits a step. Good enough to spread points; no use for secrets.
 */
const MASK = (1n << 64n) - 1n;

export class SeededRandom {
  #state: bigint;

  /** @param seed taken modulo 2^64 */
  constructor(seed: bigint) {
    this.#state = seed & MASK;
  }

  next(): bigint {
    this.#state = (this.#state + 0x9e3779b97f4a7c15n) & MASK;
    let z = this.#state;
    z = ((z ^ (z >> 30n)) * 0xbf58476d1ce4e5b9n) & MASK;
    z = ((z ^ (z >> 27n)) * 0x94d049bb133111ebn) & MASK;
    return z ^ (z >> 31n);
  }

  /** 0 … bound − 1. At least 64 bits more than the bound has are reduced modulo it: no value is favoured by more than 2^−64. */
  below(bound: bigint): bigint {
    let value = this.next();
    for (let limit = bound; limit > 0n; limit >>= 64n) value = (value << 64n) | this.next();
    return value % bound;
  }
}

/**
 * So many different numbers below `size`, in the order drawn: the first steps of a Fisher–Yates shuffle of 0 … size − 1, of which only
 * the entries that have moved are kept. Every ordered choice is equally likely; any `count` up to `size` costs `count` steps.
 */
export function* distinctBelow(size: bigint, count: number, random: SeededRandom): Generator<bigint> {
  const moved = new Map<bigint, bigint>();
  for (let i = 0n; i < BigInt(count); i++) {
    const at = i + random.below(size - i);
    yield moved.get(at) ?? at;
    moved.set(at, moved.get(i) ?? i);
    moved.delete(i);
  }
}
