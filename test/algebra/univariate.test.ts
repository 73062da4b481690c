import { describe, expect, it } from 'vitest';
import { CyclotomicField, cyclotomicPolynomial } from '../../src/algebra/cyclotomic.ts';
import {
  commonFactor,
  divides,
  productOf,
  pseudoDivide,
  realRootsBetween,
  squareFree,
} from '../../src/algebra/univariate.ts';
import { property, type Random } from '../support/random.ts';

function polynomial(random: Random, degree: number): bigint[] {
  return [...Array.from({ length: degree }, () => BigInt(random.integer(-5, 5))), BigInt(random.nonZero(4))];
}

describe('polynomials in one variable', () => {
  property('division with remainder, and planted common factors', 50, (random) => {
    const [f, g, h] = [polynomial(random, 3), polynomial(random, 2), polynomial(random, 2)];
    const { scale, quotient, remainder } = pseudoDivide(f, g);
    expect(remainder.length).toBeLessThan(g.length);
    const back = productOf(quotient, g);
    f.forEach((v, i) => {
      expect((back[i] ?? 0n) + (remainder[i] ?? 0n)).toBe(scale * v);
    });
    expect(divides(h, commonFactor(productOf(f, h), productOf(g, h)))).toBe(true);
    expect(divides(squareFree(h), squareFree(productOf(h, h)))).toBe(true);
    expect(squareFree(productOf(h, h)).length).toBe(squareFree(h).length);
  });

  it('counts and isolates planted real roots', () => {
    // (2x − 1)(3x + 2)²(x² + 1)(x − 5)
    const f = [
      [-1n, 2n],
      [2n, 3n],
      [2n, 3n],
      [1n, 0n, 1n],
      [-5n, 1n],
    ].reduce(productOf, [1n]);
    const roots = realRootsBetween(f, -2n, 2n, 10);
    expect(roots).toHaveLength(2);
    const near = (i: number, n: bigint, d: bigint) =>
      roots[i]!.low * d < n * roots[i]!.denominator && n * roots[i]!.denominator <= roots[i]!.high * d;
    expect([near(0, -2n, 3n), near(1, 1n, 2n)]).toEqual([true, true]);
    expect(realRootsBetween(f, -9n, 9n, 1)).toHaveLength(3);
  });
});

describe('cyclotomic fields', () => {
  it('the polynomials of all divisors multiply to xⁿ − 1', () => {
    for (const n of [1, 2, 3, 4, 6, 12, 15]) {
      let product: bigint[] = [1n];
      for (let d = 1; d <= n; d++) if (n % d === 0) product = productOf(product, cyclotomicPolynomial(d));
      expect(product).toEqual([-1n, ...new Array<bigint>(n - 1).fill(0n), 1n]);
    }
    // Φ₁₀₅ is the first with a coefficient other than 0 and ±1 (common knowledge, from memory).
    expect(cyclotomicPolynomial(105)).toContain(-2n);
  });

  property('a field with conjugation', 30, (random) => {
    const field = new CyclotomicField(random.pick([3, 4, 5, 8, 12]));
    const element = () =>
      field.reduced(
        Array.from({ length: field.degree }, () => BigInt(random.integer(-4, 4))),
        BigInt(random.integer(1, 4)),
      );
    const [a, b, c] = [element(), element(), element()];
    expect(field.multiply(a, field.add(b, c))).toEqual(field.add(field.multiply(a, b), field.multiply(a, c)));
    expect(field.multiply(field.multiply(a, b), c)).toEqual(field.multiply(a, field.multiply(b, c)));
    expect(field.conjugate(field.multiply(a, b))).toEqual(
      field.multiply(field.conjugate(a), field.conjugate(b)),
    );
    expect(field.conjugate(field.real(a))).toEqual(field.real(a));
    const e = random.integer(-9, 9);
    expect(field.multiply(field.power(e), field.power(-e))).toEqual(field.power(0));
  });

  it('refuses orders out of reach', () => {
    expect(() => new CyclotomicField(1_000)).toThrow(/denominator/);
  });
});
