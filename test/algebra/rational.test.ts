import { describe, expect, test } from 'vitest';
import {
  add,
  divide,
  type Exact,
  exact,
  Fraction,
  gcd,
  lcm,
  MAX_NUMBER_LENGTH,
  multiply,
  negate,
  rational,
  rationalFromText,
  squareRoot,
  textFromRational,
  toFraction,
} from '../../src/algebra/rational.ts';
import { InputError } from '../../src/errors.ts';
import { property, type Random } from '../support/random.ts';

const anyRational = (random: Random) =>
  rational(random.big(random.pick([1, 8, 60, 300])), 1n + random.big(random.pick([1, 8, 60, 300])) ** 2n);

describe('the field of rationals', () => {
  property('laws', 200, (random) => {
    const [a, b, c] = [anyRational(random), anyRational(random), anyRational(random)];
    expect(add(a, b)).toEqual(add(b, a));
    expect(add(add(a, b), c)).toEqual(add(a, add(b, c)));
    expect(multiply(a, add(b, c))).toEqual(add(multiply(a, b), multiply(a, c)));
    if (b.numerator !== 0n) expect(multiply(divide(a, b), b)).toEqual(a);
  });

  property('lowest terms, positive denominator', 200, (random) => {
    const [n, d] = [random.big(80), random.big(80) || 1n];
    const a = rational(n, d);
    expect(a.denominator > 0n).toBe(true);
    expect(gcd(a.numerator, a.denominator)).toBe(1n);
    expect(a.numerator * d).toBe(n * a.denominator);
  });

  property('gcd and lcm', 200, (random) => {
    const [a, b] = [random.big(40), random.big(40)];
    const g = gcd(a, b);
    expect(g >= 0n).toBe(true);
    if (g === 0n) return;
    expect([a % g, b % g]).toEqual([0n, 0n]);
    expect(gcd(a / g, b / g)).toBe(1n);
    const [p, q] = [a < 0n ? 1n - a : a + 1n, b < 0n ? 1n - b : b + 1n];
    expect(lcm(p, q) * gcd(p, q)).toBe(p * q);
  });

  property('a square has its root, a negative number and twice a square have none', 200, (random) => {
    const a = anyRational(random);
    const square = multiply(a, a);
    expect(squareRoot(square)).toEqual(a.numerator < 0n ? negate(a) : a);
    expect(add(a, negate(a))).toEqual(rational(0n));
    if (a.numerator === 0n) return;
    expect(squareRoot(negate(square))).toBeUndefined();
    expect(squareRoot(add(square, square))).toBeUndefined();
  });

  test('division by zero is refused', () => {
    expect(() => rational(1n, 0n)).toThrow(InputError);
    expect(() => divide(rational(1n), rational(0n))).toThrow(InputError);
  });
});

describe('text', () => {
  property('parse and print are inverse', 200, (random) => {
    const a = anyRational(random);
    const text = textFromRational(a);
    if (text.length <= MAX_NUMBER_LENGTH) expect(rationalFromText(text)).toEqual(a);
    else expect(() => rationalFromText(text)).toThrow(InputError);
  });

  test.each([
    ['7', 7n, 1n],
    ['-7', -7n, 1n],
    ['+7', 7n, 1n],
    ['0.35', 7n, 20n],
    ['.5', 1n, 2n],
    ['-0.10', -1n, 10n],
    ['6/4', 3n, 2n],
    ['-6/4', -3n, 2n],
    ['000/7', 0n, 1n],
    ['-0', 0n, 1n],
    // 1e-12 and 1/3 + 1e-9 are what a search for a nearby fraction would spoil.
    ['0.000000000001', 1n, 10n ** 12n],
    ['0.333333334333333333', 333333334333333333n, 10n ** 18n],
    [`0.${'0'.repeat(197)}1`, 1n, 10n ** 198n],
  ])('%s is exact', (text, numerator, denominator) => {
    expect(rationalFromText(text)).toEqual(rational(numerator, denominator));
  });

  test.each([
    '',
    ' ',
    '1.',
    '.',
    '1e5',
    '1/0',
    '1/-2',
    '1/2/3',
    '0x10',
    '1_000',
    '1,5',
    '--1',
    'NaN',
    'Infinity',
    '١',
    '½',
    '1 2',
    '1\n',
  ])('%j is refused', (text) => {
    expect(() => rationalFromText(text)).toThrow(InputError);
  });

  test.each([MAX_NUMBER_LENGTH + 1, 1_000_000])('%d digits are refused', (digits) => {
    expect(() => rationalFromText('9'.repeat(digits))).toThrow(InputError);
  });
});

describe('values from users', () => {
  test.each<[string, Exact]>([
    ['a Fraction', new Fraction(-7n, 20n)],
    ['text', ' -0.35 '],
    ['a Rational not in lowest terms', { numerator: 14n, denominator: -40n }],
  ])('%s', (_, value) => {
    expect(exact(value)).toEqual({ numerator: -7n, denominator: 20n });
  });

  test('integers', () => {
    expect(exact(-3)).toEqual(exact(-3n));
    expect(exact(-0)).toEqual({ numerator: 0n, denominator: 1n });
    expect(exact(Number.MAX_SAFE_INTEGER).numerator).toBe(9007199254740991n);
  });

  test.each<[string, unknown]>([
    ['a float', 0.1],
    ['1e-12', 1e-12],
    ['an unsafe integer', 2 ** 53],
    ['NaN', Number.NaN],
    ['Infinity', Number.POSITIVE_INFINITY],
    ['null', null],
    ['undefined', undefined],
    ['true', true],
    ['an array', [1, 2]],
    ['an object', {}],
    ['floats in the shape of a rational', { numerator: 1, denominator: 2 }],
    ['a zero denominator', { numerator: 1n, denominator: 0n }],
    ['a Fraction whose denominator was overwritten', Object.assign(new Fraction(1n, 2n), { d: 0n })],
    ['a Fraction whose numerator was overwritten', Object.assign(new Fraction(1n, 2n), { n: 0.5 })],
    ['a Fraction without a numerator', Object.assign(new Fraction(1n, 2n), { n: undefined })],
  ])('%s is refused', (_, value) => {
    expect(() => exact(value as Exact)).toThrow(InputError);
  });

  property('to Fraction and back', 100, (random) => {
    const a = anyRational(random);
    expect(exact(toFraction(a))).toEqual(a);
    expect(toFraction(a).toFraction()).toBe(textFromRational(a));
  });
});
