import { describe, expect, test } from 'vitest';
import { gcd, type Rational, rational } from '../../src/algebra/rational.ts';
import { primesBelow } from '../../src/linear/field.ts';
import {
  chineseRemainder,
  integerSquareRoot,
  rationalReconstruction,
  reconstructionBound,
} from '../../src/linear/reconstruct.ts';
import { power } from '../support/dense.ts';
import { property } from '../support/random.ts';

const abs = (n: bigint): bigint => (n < 0n ? -n : n);

/** Every fraction within the bound, tried in turn. */
function naive(a: bigint, m: bigint, bound: bigint): Rational | undefined {
  for (let d = 1n; d <= bound; d++) {
    if (gcd(d, m) !== 1n) continue;
    for (let n = -bound; n <= bound; n++)
      if (gcd(n, d) === 1n && (n - a * d) % m === 0n) return rational(n, d);
  }
  return undefined;
}

/** The residue of a fraction modulo a prime power or product of primes, by the extended Euclidean algorithm. */
function residue({ numerator, denominator }: Rational, m: bigint): bigint {
  let [r0, r1, t0, t1] = [m, ((denominator % m) + m) % m, 0n, 1n];
  while (r1 !== 0n) {
    const q = r0 / r1;
    [r0, r1, t0, t1] = [r1, r0 - q * r1, t1, t0 - q * t1];
  }
  return (((numerator * t0) % m) + m) % m;
}

describe('rational reconstruction', () => {
  test('the naive twin, every residue of every modulus up to 150', () => {
    for (let m = 2n; m <= 150n; m++) {
      const bound = reconstructionBound(m);
      expect(2n * bound * bound < m && 2n * (bound + 1n) * (bound + 1n) >= m).toBe(true);
      for (let a = 0n; a < m; a++)
        expect([m, a, rationalReconstruction(a, m)]).toEqual([m, a, naive(a, m, bound)]);
    }
  });

  property('the tightest modulus gives the fraction back', 200, (random) => {
    const bits = random.pick([4, 20, 64, 300]);
    const size = abs(random.big(bits)) + 1n;
    // The least odd modulus with 2·size² < m; numerator and denominator as large as the bound allows.
    const m = 2n * size * size + 1n;
    const [n, d] = [
      random.chance(0.5) ? size : abs(random.big(bits)) % size,
      size - (abs(random.big(3)) % size),
    ];
    const fraction = rational(random.chance(0.5) ? n : -n, d);
    if (gcd(fraction.denominator, m) !== 1n) return;
    expect(rationalReconstruction(residue(fraction, m), m)).toEqual(fraction);
  });

  property('moduli above 1,024 bits', 20, (random) => {
    let m = 1n;
    for (const p of primesBelow()) {
      m *= BigInt(p);
      if (m.toString(2).length > 1_100) break;
    }
    const fraction = rational(random.big(540), abs(random.big(540)) + 1n);
    expect(rationalReconstruction(residue(fraction, m), m)).toEqual(fraction);
    // One that does not fit: whatever comes back is within the bound and has the residue, or there is nothing.
    const wide = rational(random.big(900), abs(random.big(900)) + 1n);
    const found = rationalReconstruction(residue(wide, m), m);
    if (found === undefined) return;
    expect(
      abs(found.numerator) <= reconstructionBound(m) && found.denominator <= reconstructionBound(m),
    ).toBe(true);
    expect((found.numerator - residue(wide, m) * found.denominator) % m).toBe(0n);
  });

  property('residues outside 0 … m − 1, and zero', 50, (random) => {
    const m = 67_108_859n;
    const fraction = rational(BigInt(random.integer(-4_000, 4_000)), BigInt(random.integer(1, 4_000)));
    const a = residue(fraction, m);
    for (const shift of [-3n, 0n, 5n]) expect(rationalReconstruction(a + shift * m, m)).toEqual(fraction);
    expect(rationalReconstruction(0n, m)).toEqual(rational(0n));
  });
});

describe('Chinese remaindering', () => {
  property('many primes, one at a time', 40, (random) => {
    const value = abs(random.big(600));
    let [m, a] = [1n, 0n];
    for (const p of primesBelow()) {
      const q = BigInt(p);
      a = chineseRemainder(a, m, value % q, q, power(m % q, q - 2n, q));
      m *= q;
      expect(a >= 0n && a < m).toBe(true);
      if (m > value) break;
    }
    expect(a).toBe(value);
  });
});

describe('integer square root', () => {
  property('n² ≤ x < (n + 1)²', 200, (random) => {
    const x = abs(random.big(random.pick([1, 2, 10, 53, 64, 1_030, 2_500])));
    const n = integerSquareRoot(x);
    expect(n * n <= x && x < (n + 1n) * (n + 1n)).toBe(true);
    expect(integerSquareRoot(n * n)).toBe(n);
    if (n > 0n) expect(integerSquareRoot(n * n - 1n)).toBe(n - 1n);
  });

  test('small values', () => {
    expect([0n, 1n, 2n, 3n, 4n, 8n, 9n].map(integerSquareRoot)).toEqual([0n, 1n, 1n, 1n, 2n, 2n, 3n]);
  });
});
