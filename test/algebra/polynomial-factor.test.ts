import { describe, expect, it } from 'vitest';
import { Polynomial } from '../../src/algebra/polynomial.ts';
import {
  degreeIn,
  divideExactly,
  primitive,
  pseudoRemainder,
  substitute,
} from '../../src/algebra/polynomial-division.ts';
import { factorsOf, isConstant, polynomialGcd, squareRoot } from '../../src/algebra/polynomial-factor.ts';
import { rational } from '../../src/algebra/rational.ts';
import { property, type Random } from '../support/random.ts';

const [x, y, z] = [0, 1, 2].map((v) => Polynomial.variable(v)) as [Polynomial, Polynomial, Polynomial];

function randomPolynomial(random: Random, terms = 4, degree = 2): Polynomial {
  return Polynomial.of(
    Array.from({ length: random.integer(1, terms) }, () => [
      [random.below(degree + 1), random.below(degree + 1), random.below(degree + 1)],
      random.nonZeroRational(5),
    ]),
  );
}

describe('division', () => {
  property('takes a product apart, and nothing else', 60, (random) => {
    const [a, b] = [randomPolynomial(random), randomPolynomial(random)];
    if (a.isZero() || b.isZero()) return;
    expect(divideExactly(a.times(b), b)!.equals(a)).toBe(true);
    const off = a.times(b).plus(Polynomial.one);
    const quotient = divideExactly(off, b);
    if (quotient !== undefined) expect(quotient.times(b).equals(off)).toBe(true);
    if (!isConstant(b)) expect(quotient).toBeUndefined();
  });

  property('leaves a pseudo-remainder of lower degree that differs by a multiple', 40, (random) => {
    const [a, b] = [randomPolynomial(random, 5, 3), randomPolynomial(random)];
    if (b.isZero() || degreeIn(b, 1) === 0) return;
    const { remainder, power } = pseudoRemainder(a, b, 1);
    expect(degreeIn(remainder, 1)).toBeLessThan(degreeIn(b, 1));
    let scaled = a;
    const initial = [...b.numerators].filter(([m]) => Number((m >> 16n) & 0xffffn) === degreeIn(b, 1));
    const lead = Polynomial.fromIntegers(
      initial.map(([m, c]) => [m - (BigInt(degreeIn(b, 1)) << 16n), c] as const),
      b.denominator,
    );
    for (let i = 0; i < power; i++) scaled = scaled.times(lead);
    expect(divideExactly(scaled.minus(remainder), b)).toBeDefined();
  });

  it('substitutes a fraction with the denominator multiplied out', () => {
    // x = y/z in x² + x + 1, times z².
    expect(substitute(x.times(x).plus(x).plus(Polynomial.one), 0, y, z).toString(['x', 'y', 'z'])).toBe(
      'y^2 + y*z + z^2',
    );
  });
});

describe('greatest common divisors', () => {
  property('hold the planted factor and leave coprime parts', 60, (random) => {
    const [a, b, g] = [randomPolynomial(random), randomPolynomial(random), randomPolynomial(random)];
    if (a.isZero() || b.isZero() || g.isZero()) return;
    const d = polynomialGcd(a.times(g), b.times(g));
    expect(divideExactly(d, primitive(g))).toBeDefined();
    const [p, q] = [divideExactly(a.times(g), d)!, divideExactly(b.times(g), d)!];
    expect(isConstant(polynomialGcd(p, q))).toBe(true);
  });
});

describe('factors', () => {
  const text = (p: Polynomial) =>
    factorsOf(p)
      .map((f) => f.toString(['x', 'y', 'z']))
      .sort();

  it('finds differences of powers', () => {
    const power = (p: Polynomial, n: number): Polynomial => (n === 1 ? p : p.times(power(p, n - 1)));
    expect(text(power(x, 4).minus(power(y, 4)))).toEqual(['-x + y', 'x + y', 'x^2 + y^2']);
    expect(
      text(
        power(x, 2)
          .minus(power(y, 2))
          .times(z)
          .times(power(x.plus(z), 3)),
      ),
    ).toEqual(['-x + y', 'x + y', 'x + z', 'z']);
    expect(factorsOf(Polynomial.constant(rational(3n)))).toEqual([]);
  });

  property('multiply back to what vanishes where the polynomial does', 40, (random) => {
    const parts = Array.from({ length: 3 }, () => randomPolynomial(random, 3, 1)).filter((p) => !p.isZero());
    const p = parts.reduce((a, b) => a.times(b), Polynomial.one);
    const factors = factorsOf(p);
    let rest = primitive(p);
    for (const f of factors) {
      expect(isConstant(f)).toBe(false);
      expect(divideExactly(rest, f)).toBeDefined();
      for (let next = divideExactly(rest, f); next !== undefined; next = divideExactly(rest, f)) rest = next;
    }
    expect(isConstant(rest)).toBe(true);
    // Factors of degree one in every variable are found whole.
    for (const part of parts)
      for (const f of factorsOf(part))
        expect(factors.some((g) => divideExactly(g, f) !== undefined)).toBe(true);
  });

  property('sees squares', 30, (random) => {
    const p = randomPolynomial(random);
    if (p.isZero()) return;
    const root = squareRoot(p.times(p))!;
    expect(root.equals(p) || root.plus(p).isZero()).toBe(true);
    expect(squareRoot(p.times(p).times(x))).toBeUndefined();
  });
});
