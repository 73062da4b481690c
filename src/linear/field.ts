/**
 * The prime fields GF(p) of the proofs.
 *
 * p stays below 2²⁶, so a product of two residues is below 2⁵² and exact in a double; one division and one floor reduce it
 * several times faster than `%` on doubles or on `bigint`.
 */
import { InputError, show } from '../errors.ts';

/** Exclusive bound of the primes in use; products stay exact below it. */
export const PRIME_BOUND = 2 ** 26;

export interface Field {
  readonly p: number;
  /** a·b, for residues 0 ≤ a, b < p. */
  multiply(a: number, b: number): number;
  /** 1/a for a ≠ 0, by Fermat's theorem: about 40 products. */
  inverse(a: number): number;
  /** The residue of any integer. */
  residue(value: bigint | number): number;
}

/** A search inverts the same few couplings over and over: the last inverse of each slot is kept. */
const CACHE_MASK = 1023;

/** @throws InputError unless p is a prime with 2 < p < `PRIME_BOUND` */
export function primeField(p: number): Field {
  if (!(Number.isInteger(p) && p > 2 && p < PRIME_BOUND && isPrime(p)))
    throw new InputError('field', `an odd prime below ${PRIME_BOUND}`, show(p));
  const modulus = BigInt(p);
  const multiply = (a: number, b: number): number => {
    const t = a * b;
    return t - Math.floor(t / p) * p;
  };
  const inverted = new Uint32Array(CACHE_MASK + 1);
  const inverses = new Uint32Array(CACHE_MASK + 1);
  return {
    p,
    multiply,
    inverse(a) {
      const slot = a & CACHE_MASK;
      if (inverted[slot] === a) return inverses[slot]!;
      let power = 1;
      let base = a;
      for (let e = p - 2; e > 0; e = e >>> 1) {
        if ((e & 1) === 1) power = multiply(power, base);
        base = multiply(base, base);
      }
      inverted[slot] = a;
      inverses[slot] = power;
      return power;
    },
    residue(value) {
      const r = Number(BigInt(value) % modulus);
      return r < 0 ? r + p : r;
    },
  };
}

/** Trial division; at most 4,100 steps below `PRIME_BOUND`. */
export function isPrime(n: number): boolean {
  if (!Number.isInteger(n) || n < 2) return false;
  if (n % 2 === 0) return n === 2;
  for (let d = 3; d * d <= n; d += 2) if (n % d === 0) return false;
  return true;
}

/** The primes below `bound`, falling: the order in which a search takes them. */
export function* primesBelow(bound = PRIME_BOUND): Generator<number> {
  for (let n = bound - 1; n > 2; n--) if (isPrime(n)) yield n;
}

/** Their fields, in the same order: what a proof that may be unlucky goes through. */
export function* primeFieldsBelow(bound = PRIME_BOUND): Generator<Field> {
  for (const p of primesBelow(bound)) yield primeField(p);
}
