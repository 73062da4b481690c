import { describe, expect, test } from 'vitest';
import { exponentsOf, MAX_EXPONENT, monomialOf, Polynomial } from '../../src/algebra/polynomial.ts';
import { add, gcd, multiply, ONE, type Rational, rational } from '../../src/algebra/rational.ts';
import { wordFromText } from '../../src/algebra/word.ts';
import { InputError } from '../../src/errors.ts';
import { parseFamily } from '../../src/model/formula.ts';
import { property, type Random } from '../support/random.ts';

const NAMES = ['g', 'J_x', 'λ', "h'"];

function polynomial(random: Random, variables = NAMES.length): Polynomial {
  return Polynomial.of(
    Array.from({ length: random.integer(0, 5) }, () => [
      Array.from({ length: variables }, () => random.below(4)),
      random.rational(),
    ]),
  );
}

function point(random: Random): Rational[] {
  return NAMES.map(() => random.rational());
}

describe('the ring', () => {
  property('laws', 200, (random) => {
    const [a, b, c] = [polynomial(random), polynomial(random), polynomial(random)];
    expect(a.plus(b).equals(b.plus(a))).toBe(true);
    expect(a.times(b).equals(b.times(a))).toBe(true);
    expect(
      a
        .times(b)
        .times(c)
        .equals(a.times(b.times(c))),
    ).toBe(true);
    expect(a.times(b.plus(c)).equals(a.times(b).plus(a.times(c)))).toBe(true);
    expect(a.minus(a).equals(Polynomial.zero)).toBe(true);
    expect(a.times(Polynomial.one).equals(a)).toBe(true);
    expect(a.times(Polynomial.zero).isZero()).toBe(true);
    const x = random.rational();
    expect(a.scale(x).equals(a.times(Polynomial.constant(x)))).toBe(true);
  });

  property('evaluation at a point is a homomorphism', 200, (random) => {
    const [a, b, at] = [polynomial(random), polynomial(random), point(random)];
    expect(a.plus(b).evaluate(at)).toEqual(add(a.evaluate(at), b.evaluate(at)));
    expect(a.times(b).evaluate(at)).toEqual(multiply(a.evaluate(at), b.evaluate(at)));
  });

  property('evaluation agrees with adding up powers', 100, (random) => {
    const [a, at] = [polynomial(random), point(random)];
    let sum = rational(0n);
    for (const [exponents, coefficient] of a.terms(NAMES.length)) {
      let term = coefficient;
      exponents.forEach((e, v) => {
        for (let i = 0; i < e; i++) term = multiply(term, at[v]!);
      });
      sum = add(sum, term);
    }
    expect(a.evaluate(at)).toEqual(sum);
  });

  property('lowest terms', 100, (random) => {
    const a = polynomial(random).times(polynomial(random));
    expect(a.denominator > 0n).toBe(true);
    expect([...a.numerators.values()].reduce(gcd, a.denominator)).toBe(1n);
    expect(Polynomial.of(a.terms(NAMES.length)).equals(a)).toBe(true);
  });
});

describe('shape and text', () => {
  property('monomials pack and unpack', 100, (random) => {
    const exponents = Array.from({ length: random.integer(0, 9) }, () => random.below(MAX_EXPONENT + 1));
    expect(exponentsOf(monomialOf(exponents), exponents.length)).toEqual(exponents);
  });

  property('a formula reads back what is printed', 150, (random) => {
    const a = polynomial(random);
    if (a.isZero() || a.degrees(NAMES.length).some((d) => d === 0)) return;
    // Every name once before, so that the formula lists them in this order.
    const family = parseFamily(`${NAMES.map((n) => `${n} XX`).join(' + ')} + (${a.toString(NAMES)}) Z`);
    expect(family.parameters).toEqual(NAMES);
    const [, read] = family.terms.find(([word]) => word === wordFromText('Z'))!;
    expect(read.equals(a)).toBe(true);
  });

  test('prints by falling degree', () => {
    const [x, y] = [Polynomial.variable(0), Polynomial.variable(1)];
    const p = x
      .times(x)
      .scale(rational(-2n))
      .plus(y)
      .plus(x.times(y))
      .minus(Polynomial.constant(rational(1n, 2n)));
    expect(p.toString(['x', 'y'])).toBe('-2*x^2 + x*y + y - 1/2');
    expect(p.degrees(2)).toEqual([2, 1]);
    expect(Polynomial.zero.toString(['x'])).toBe('0');
    expect(Polynomial.one.toString()).toBe('1');
  });

  test('constants', () => {
    expect(Polynomial.zero.asConstant()).toEqual(rational(0n));
    expect(Polynomial.one.asConstant()).toEqual(ONE);
    expect(Polynomial.variable(0).asConstant()).toBeUndefined();
    expect(Polynomial.variable(0).plus(Polynomial.one).asConstant()).toBeUndefined();
  });

  test('exponents that do not pack are refused', () => {
    for (const bad of [-1, 0.5, MAX_EXPONENT + 1, Number.NaN])
      expect(() => monomialOf([bad])).toThrow(InputError);
    expect(() => Polynomial.fromIntegers([[0n, 1n]], 0n)).toThrow(InputError);
  });
});
