import { describe, expect, test } from 'vitest';
import { InputError } from '../../src/errors.ts';
import { isPrime, PRIME_BOUND, primeField, primesBelow } from '../../src/linear/field.ts';
import { property } from '../support/random.ts';

const [largest] = primesBelow();
const PRIMES = [3, 5, 7, 101, 65_537, 33_554_393, largest!];

describe.each(PRIMES)('GF(%d)', (p) => {
  const field = primeField(p);

  property(`products are exact (${p})`, 300, (random) => {
    // Near p the quotient is closest to an integer from below: the place where one floating division could go wrong.
    const near = () => (random.chance(0.5) ? p - 1 - random.below(Math.min(p, 50)) : random.below(p));
    const [a, b] = [near(), near()];
    expect(field.multiply(a, b)).toBe(Number((BigInt(a) * BigInt(b)) % BigInt(p)));
  });

  property(`inverses (${p})`, 60, (random) => {
    const a = 1 + random.below(p - 1);
    expect(field.multiply(a, field.inverse(a))).toBe(1);
  });

  property(`residues of any integer (${p})`, 60, (random) => {
    const [a, b] = [random.big(200), random.big(200)];
    const r = field.residue(a);
    expect(r >= 0 && r < p).toBe(true);
    expect((a - BigInt(r)) % BigInt(p)).toBe(0n);
    expect(field.residue(a * b)).toBe(field.multiply(r, field.residue(b)));
    expect(field.residue(-5)).toBe(field.residue(-5n));
  });
});

test('quotients just below an integer, all of them for products with −1 under the largest prime', () => {
  const p = largest!;
  const { multiply } = primeField(p);
  for (let a = 1; a < 2_000; a++) {
    expect(multiply(p - 1, a)).toBe(p - a);
    expect(multiply(p - 1, p - a)).toBe(a);
  }
});

test('primality against the sieve', () => {
  const composite = new Uint8Array(20_000);
  for (let n = 2; n < composite.length; n++) {
    expect(isPrime(n)).toBe(composite[n] === 0);
    if (composite[n] === 0) for (let m = n * n; m < composite.length; m += n) composite[m] = 1;
  }
  for (const n of [-7, 0, 1, 2.5, Number.NaN]) expect(isPrime(n)).toBe(false);
});

test('the falling list of primes', () => {
  expect([...primesBelow(20)]).toEqual([19, 17, 13, 11, 7, 5, 3]);
  expect(largest).toBeLessThan(PRIME_BOUND);
});

test.each([2, 4, 1, -3, 9, 2.5, 33_554_431, 67_108_879, Number.NaN])('%d is refused', (p) => {
  expect(() => primeField(p)).toThrow(InputError);
});
