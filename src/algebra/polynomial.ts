/**
 * Polynomials with exact rational coefficients in a fixed list of variables.
 *
 * As `Operator`: integers over one positive common denominator, in lowest terms, so two equal polynomials have equal fields. A
 * monomial is an exponent vector packed into a `bigint`, `EXPONENT_BITS` a variable, so a product of monomials is a sum. Sums and
 * products cost the number of terms, and its product. Variables have no names in here; printing takes them.
 */
import { InputError, show } from '../errors.ts';
import { clipped, INSPECT } from './printed.ts';
import { type Exact, exact, gcd, lcm, ONE, type Rational, rational, textFromRational } from './rational.ts';

/** A packed exponent vector, variable 0 lowest; the constant monomial is 0n. */
export type Monomial = bigint;

/** Bits of a monomial that belong to one variable. */
export const EXPONENT_BITS = 16n;
const EXPONENT_MASK = (1n << EXPONENT_BITS) - 1n;

/** Highest power of a variable that still packs. */
export const MAX_EXPONENT = Number(EXPONENT_MASK);

export function monomialOf(exponents: readonly number[]): Monomial {
  let monomial = 0n;
  for (let v = exponents.length - 1; v >= 0; v--) {
    const exponent = exponents[v]!;
    if (!(Number.isInteger(exponent) && exponent >= 0 && exponent <= MAX_EXPONENT))
      throw new InputError('polynomial', `exponents from 0 to ${MAX_EXPONENT}`, show(exponent));
    monomial = (monomial << EXPONENT_BITS) | BigInt(exponent);
  }
  return monomial;
}

export function exponentsOf(monomial: Monomial, variables: number): number[] {
  return Array.from({ length: variables }, (_, v) =>
    Number((monomial >> (BigInt(v) * EXPONENT_BITS)) & EXPONENT_MASK),
  );
}

export class Polynomial {
  static readonly zero = new Polynomial(new Map(), 1n);
  static readonly one = new Polynomial(new Map([[0n, 1n]]), 1n);

  private constructor(
    /** Integer coefficients, none zero; divide by `denominator`. */
    readonly numerators: ReadonlyMap<Monomial, bigint>,
    readonly denominator: bigint,
  ) {}

  /**
   * From integer coefficients over a common denominator; equal monomials add up.
   *
   * @throws InputError on a zero denominator
   */
  static fromIntegers(numerators: Iterable<readonly [Monomial, bigint]>, denominator = 1n): Polynomial {
    if (denominator === 0n) throw new InputError('polynomial', 'a denominator other than 0', '0');
    const kept = new Map<Monomial, bigint>();
    for (const [monomial, value] of numerators) {
      const sum = (kept.get(monomial) ?? 0n) + value;
      if (sum === 0n) kept.delete(monomial);
      else kept.set(monomial, sum);
    }
    if (kept.size === 0) return Polynomial.zero;
    let common = denominator;
    for (const value of kept.values()) {
      if (common === 1n || common === -1n) break;
      common = gcd(common, value);
    }
    if (common < 0n !== denominator < 0n) common = -common;
    if (common !== 1n) for (const [monomial, value] of kept) kept.set(monomial, value / common);
    return new Polynomial(kept, denominator / common);
  }

  /** From exponent vectors and their coefficients. */
  static of(terms: Iterable<readonly [exponents: readonly number[], coefficient: Exact]>): Polynomial {
    const list = [...terms].map(([exponents, value]) => [monomialOf(exponents), exact(value)] as const);
    const denominator = list.reduce((d, [, c]) => lcm(d, c.denominator), 1n);
    return Polynomial.fromIntegers(
      list.map(([monomial, c]) => [monomial, (c.numerator * denominator) / c.denominator] as const),
      denominator,
    );
  }

  static constant(value: Rational): Polynomial {
    return Polynomial.fromIntegers([[0n, value.numerator]], value.denominator);
  }

  /** The variable of an index, as a polynomial. */
  static variable(index: number): Polynomial {
    return new Polynomial(new Map([[1n << (BigInt(index) * EXPONENT_BITS), 1n]]), 1n);
  }

  /** Number of monomials. */
  get size(): number {
    return this.numerators.size;
  }

  isZero(): boolean {
    return this.numerators.size === 0;
  }

  /** The value of a polynomial without variables; undefined where one occurs. */
  asConstant(): Rational | undefined {
    if (this.isZero()) return rational(0n);
    return this.size === 1 && this.numerators.has(0n) ? this.coefficient(0n) : undefined;
  }

  coefficient(monomial: Monomial): Rational {
    return rational(this.numerators.get(monomial) ?? 0n, this.denominator);
  }

  /** Exponent vectors with their coefficients, highest total degree first, then lexicographic. */
  *terms(variables: number): Generator<[exponents: number[], coefficient: Rational]> {
    const all = [...this.numerators.keys()].map(
      (monomial) => [exponentsOf(monomial, variables), monomial] as const,
    );
    all.sort(([a], [b]) => compareExponents(a, b));
    for (const [exponents, monomial] of all) yield [exponents, this.coefficient(monomial)];
  }

  /** Highest power of each variable. */
  degrees(variables: number): number[] {
    const degrees = new Array<number>(variables).fill(0);
    for (const monomial of this.numerators.keys())
      exponentsOf(monomial, variables).forEach((e, v) => {
        degrees[v] = Math.max(degrees[v]!, e);
      });
    return degrees;
  }

  plus(other: Polynomial): Polynomial {
    return combine(this, other, 1n);
  }

  minus(other: Polynomial): Polynomial {
    return combine(this, other, -1n);
  }

  /** Exponents must stay within `MAX_EXPONENT`; callers bound the degree. */
  times(other: Polynomial): Polynomial {
    const sum = new Map<Monomial, bigint>();
    for (const [a, x] of this.numerators)
      for (const [b, y] of other.numerators) sum.set(a + b, (sum.get(a + b) ?? 0n) + x * y);
    return Polynomial.fromIntegers(sum, this.denominator * other.denominator);
  }

  scale({ numerator, denominator }: Rational): Polynomial {
    return Polynomial.fromIntegers(
      [...this.numerators].map(([monomial, value]) => [monomial, value * numerator] as const),
      this.denominator * denominator,
    );
  }

  /** The value at a point, one rational a variable. */
  evaluate(point: readonly Rational[]): Rational {
    let numerator = 0n;
    const degrees = this.degrees(point.length);
    const denominator = degrees.reduce((d, e, v) => d * point[v]!.denominator ** BigInt(e), this.denominator);
    for (const [monomial, value] of this.numerators) {
      let term = value;
      exponentsOf(monomial, point.length).forEach((e, v) => {
        term *= point[v]!.numerator ** BigInt(e) * point[v]!.denominator ** BigInt(degrees[v]! - e);
      });
      numerator += term;
    }
    return rational(numerator, denominator);
  }

  equals(other: Polynomial): boolean {
    if (this.denominator !== other.denominator || this.size !== other.size) return false;
    for (const [monomial, value] of this.numerators)
      if (other.numerators.get(monomial) !== value) return false;
    return true;
  }

  [INSPECT](): string {
    const variables = Array.from({ length: this.#variables() }, (_, v) => `x${v}`);
    return `Polynomial(${clipped(this.toString(variables), `${this.size} terms`)})`;
  }

  /** One more than the last variable that occurs. */
  #variables(): number {
    let bits = 0;
    for (const monomial of this.numerators.keys()) bits = Math.max(bits, monomial.toString(2).length);
    return Math.ceil(bits / Number(EXPONENT_BITS));
  }

  /** For example `2 Jx^2*hz - 1/2`; a formula with these names reads it back. */
  toString(names: readonly string[] = []): string {
    let text = '';
    for (const [exponents, c] of this.terms(names.length)) {
      const negative = c.numerator < 0n;
      const size = negative ? { ...c, numerator: -c.numerator } : c;
      const powers = exponents.flatMap((e, v) => (e === 0 ? [] : [e === 1 ? names[v]! : `${names[v]}^${e}`]));
      const factor = powers.length > 0 && size.numerator === ONE.numerator && size.denominator === 1n;
      const term = [...(factor ? [] : [textFromRational(size)]), ...powers].join('*');
      text += `${text === '' ? (negative ? '-' : '') : negative ? ' - ' : ' + '}${term}`;
    }
    return text === '' ? '0' : text;
  }
}

function compareExponents(a: readonly number[], b: readonly number[]): number {
  const total = (e: readonly number[]) => e.reduce((x, y) => x + y, 0);
  const difference = total(b) - total(a);
  if (difference !== 0) return difference;
  for (let v = 0; v < a.length; v++) if (a[v] !== b[v]) return b[v]! - a[v]!;
  return 0;
}

function combine(a: Polynomial, b: Polynomial, sign: bigint): Polynomial {
  const denominator = lcm(a.denominator, b.denominator);
  const p = denominator / a.denominator;
  const q = (sign * denominator) / b.denominator;
  const sum = new Map<Monomial, bigint>();
  for (const [monomial, value] of a.numerators) sum.set(monomial, value * p);
  for (const [monomial, value] of b.numerators) sum.set(monomial, (sum.get(monomial) ?? 0n) + value * q);
  return Polynomial.fromIntegers(sum, denominator);
}
