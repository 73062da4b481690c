/**
 * Seeded random input for property tests. The seed comes from the test's name, so a run is repeatable; `HOLDFAST_SEED=n` gives
 * another one, and a failure names the seed that brings it back.
 */
import { test } from 'vitest';
import { Operator } from '../../src/algebra/operator.ts';
import { type Rational, rational } from '../../src/algebra/rational.ts';
import { LETTERS, type Word, wordFromText } from '../../src/algebra/word.ts';
import { Chain } from '../../src/lattice/chain.ts';
import { type Hamiltonian, hamiltonianOf } from '../../src/model/hamiltonian.ts';

/** A counter put through an integer hash with good avalanche (common practice, no source); 32 bits a step. */
export class Random {
  #state: number;

  constructor(seed: number) {
    this.#state = seed >>> 0;
  }

  bits(): number {
    this.#state = (this.#state + 0x9e3779b9) >>> 0;
    let z = this.#state;
    z = Math.imul(z ^ (z >>> 16), 0x21f0aaad);
    z = Math.imul(z ^ (z >>> 15), 0x735a2d97);
    return (z ^ (z >>> 15)) >>> 0;
  }

  /** An integer from 0 to bound − 1. */
  below(bound: number): number {
    return Math.floor((this.bits() / 2 ** 32) * bound);
  }

  /** An integer from low to high, both included. */
  integer(low: number, high: number): number {
    return low + this.below(high - low + 1);
  }

  nonZero(size: number): number {
    return this.integer(1, size) * (this.chance(0.5) ? 1 : -1);
  }

  chance(probability: number): boolean {
    return this.bits() < probability * 2 ** 32;
  }

  pick<T>(list: ArrayLike<T>): T {
    return list[this.below(list.length)]!;
  }

  shuffle<T>(list: readonly T[]): T[] {
    const shuffled = [...list];
    for (let i = shuffled.length - 1; i > 0; i--) {
      const j = this.below(i + 1);
      [shuffled[i], shuffled[j]] = [shuffled[j]!, shuffled[i]!];
    }
    return shuffled;
  }

  /** A bigint of up to so many bits, either sign. */
  big(bits: number): bigint {
    let value = 0n;
    for (let b = 0; b < bits; b += 32) value = (value << 32n) | BigInt(this.bits());
    value &= (1n << BigInt(bits)) - 1n;
    return this.chance(0.5) ? value : -value;
  }

  rational(size = 9): Rational {
    return rational(BigInt(this.integer(-size, size)), BigInt(this.integer(1, size)));
  }

  nonZeroRational(size = 9): Rational {
    return rational(BigInt(this.nonZero(size)), BigInt(this.integer(1, size)));
  }

  /** Letters I, X, Y, Z, exactly so many. */
  wordText(length: number): string {
    let text = '';
    for (let i = 0; i < length; i++) text += this.pick(LETTERS);
    return text;
  }

  word(length: number): Word {
    return length === 0 ? 0n : wordFromText(this.wordText(length));
  }

  /** Up to so many terms on spins 0 … length − 1; may be zero. */
  operator(length: number, terms: number): Operator {
    return Operator.fromTerms(
      Array.from({ length: terms }, () => [this.word(length), this.rational()] as const),
    );
  }

  /** A Hamiltonian of at most the given range in cells; never zero. */
  hamiltonian({ cell = 1, range = 2, terms = 4 } = {}): Hamiltonian {
    for (;;) {
      const chain = new Chain(cell);
      const density = chain.normalise(this.operator(range * cell, terms));
      if (!density.isZero()) return hamiltonianOf(chain, density);
    }
  }
}

/** A test run `runs` times, each time with its own random source. */
export function property(name: string, runs: number, body: (random: Random, run: number) => void): void {
  test(name, () => {
    const chosen = Number(process.env['HOLDFAST_SEED'] ?? Number.NaN);
    for (let run = 0; run < runs; run++) {
      const seed = Number.isNaN(chosen) ? seedOf(name, run) : chosen;
      try {
        body(new Random(seed), run);
      } catch (error) {
        if (error instanceof Error)
          error.message += `\n  run ${run}; again with HOLDFAST_SEED=${seed} -t ${JSON.stringify(name)}`;
        throw error;
      }
      if (!Number.isNaN(chosen)) return;
    }
  });
}

function seedOf(name: string, run: number): number {
  let hash = run;
  for (const letter of name) hash = (Math.imul(hash, 31) + letter.codePointAt(0)!) >>> 0;
  return hash;
}
