/**
 * Exact rationals at the edge of the library: users see `Fraction`, everything inside counts in integers over one common
 * denominator. `Fraction` is only ever built from integers here; given a float it would search for a nearby fraction.
 */
import Fraction from 'fraction.js';
import { InputError, show } from '../errors.ts';

export { Fraction };

/** Greatest common divisor, never negative; `gcd(0, 0) = 0`. */
export function gcd(a: bigint, b: bigint): bigint {
  let x = a < 0n ? -a : a;
  let y = b < 0n ? -b : b;
  while (y !== 0n) [x, y] = [y, x % y];
  return x;
}

/** Least common multiple of positive integers. */
export function lcm(a: bigint, b: bigint): bigint {
  return (a / gcd(a, b)) * b;
}

/** An exact rational: integers, lowest terms, positive denominator. The serialised form everywhere is `p/q` or `p`. */
export interface Rational {
  readonly numerator: bigint;
  readonly denominator: bigint;
}

/** @throws InputError on a zero denominator */
export function rational(numerator: bigint, denominator = 1n): Rational {
  if (denominator === 0n) throw new InputError('rational', 'a denominator other than 0', '0');
  const common = gcd(numerator, denominator);
  const sign = denominator < 0n ? -1n : 1n;
  return { numerator: (sign * numerator) / common, denominator: (sign * denominator) / common };
}

/** Longest text of a number that is read; keeps hostile input from becoming work. */
export const MAX_NUMBER_LENGTH = 200;

/**
 * Reads an exact number: an integer, a decimal such as `0.35` or `.5`, or a fraction `p/q` of integers. No exponent, no
 * sign other than a leading `+` or `-`.
 *
 * @throws InputError for anything else, a zero denominator, or more than `MAX_NUMBER_LENGTH` characters
 */
export function rationalFromText(text: string): Rational {
  if (text.length > MAX_NUMBER_LENGTH)
    throw new InputError('number', `at most ${MAX_NUMBER_LENGTH} characters`, show(text));
  const match = /^([+-]?)(?:(\d+)(?:\/(\d+))?|(\d*)\.(\d+))$/.exec(text);
  if (match === null)
    throw new InputError('number', 'an integer, a decimal or a fraction p/q, exact', show(text));
  const [, sign, integer, denominator, whole, decimals] = match;
  const factor = sign === '-' ? -1n : 1n;
  if (integer !== undefined) return rational(factor * BigInt(integer), BigInt(denominator ?? 1));
  return rational(factor * BigInt(`${whole}${decimals}`), 10n ** BigInt(decimals!.length));
}

/** `p/q`, or `p` where the denominator is 1. */
export function textFromRational({ numerator, denominator }: Rational): string {
  return denominator === 1n ? `${numerator}` : `${numerator}/${denominator}`;
}

export function toFraction({ numerator, denominator }: Rational): Fraction {
  return new Fraction(numerator, denominator);
}

/** Accepts what users hand over as a number: a `Fraction`, a `Rational`, exact text, a `bigint`, or a safe integer `number`. */
export type Exact = Fraction | Rational | string | bigint | number;

/** @throws InputError for floats that are not integers (write them as text), NaN, infinities and anything that is not a number */
export function exact(value: Exact): Rational {
  if (typeof value === 'string') return rationalFromText(value.trim());
  if (typeof value === 'bigint') return rational(value);
  if (typeof value === 'number') {
    if (Number.isSafeInteger(value)) return rational(BigInt(value));
    throw new InputError('number', 'an exact value; write a decimal or fraction as text', show(value));
  }
  if (typeof value === 'object' && value !== null) {
    // By shape, not by class: a caller's Fraction may come from another copy of the package, and its fields are writable.
    const { s, n, d, numerator = product(s, n), denominator = d } = value as Partial<Fraction & Rational>;
    if (typeof numerator === 'bigint' && typeof denominator === 'bigint')
      return rational(numerator, denominator);
  }
  throw new InputError('number', 'a Fraction, exact text, a bigint or an integer', show(value));
}

function product(a: unknown, b: unknown): bigint | undefined {
  return typeof a === 'bigint' && typeof b === 'bigint' ? a * b : undefined;
}

export function add(a: Rational, b: Rational): Rational {
  return rational(a.numerator * b.denominator + b.numerator * a.denominator, a.denominator * b.denominator);
}

export function multiply(a: Rational, b: Rational): Rational {
  return rational(a.numerator * b.numerator, a.denominator * b.denominator);
}

/** @throws InputError on division by zero */
export function divide(a: Rational, b: Rational): Rational {
  return rational(a.numerator * b.denominator, a.denominator * b.numerator);
}

export function negate(a: Rational): Rational {
  return { ...a, numerator: -a.numerator };
}

/** The root that is not negative, of the square of a rational; undefined for all others. */
export function squareRoot({ numerator, denominator }: Rational): Rational | undefined {
  const [n, d] = [integerRoot(numerator), integerRoot(denominator)];
  return n === undefined || d === undefined ? undefined : { numerator: n, denominator: d };
}

function integerRoot(n: bigint): bigint | undefined {
  if (n < 0n) return undefined;
  if (n < 2n) return n;
  // Newton's method from above.
  let x = 1n << BigInt((n.toString(2).length + 1) >> 1);
  for (;;) {
    const next = (x + n / x) >> 1n;
    if (next >= x) return x * x === n ? x : undefined;
    x = next;
  }
}

export const ZERO: Rational = { numerator: 0n, denominator: 1n };
export const ONE: Rational = { numerator: 1n, denominator: 1n };
