/**
 * The cyclotomic fields Q(ω), ω = e^{2πi/n}: integers over one denominator, modulo the n-th cyclotomic polynomial.
 *
 * An element is Σ_i a_i ω^i with 0 ≤ i < φ(n), so two equal elements have equal coefficients. Products cost φ(n)² integer
 * products.
 */
import { InputError, show } from '../errors.ts';
import { gcd, lcm, type Rational, rational, textFromRational } from './rational.ts';

/** Largest order that is taken: bounds the degree of the field. */
export const MAX_ORDER = 120;

/** Coefficients of 1, ω, ω², …, rational; lowest power first. */
export interface Cyclotomic {
  readonly numerators: readonly bigint[];
  readonly denominator: bigint;
}

export class CyclotomicField {
  /** Coefficients of the n-th cyclotomic polynomial, lowest power first, leading 1. */
  readonly polynomial: readonly bigint[];
  /** φ(n). */
  readonly degree: number;
  /** ω^e for 0 ≤ e < n, as coefficients. */
  readonly #powers: readonly (readonly bigint[])[];

  constructor(readonly order: number) {
    if (!(Number.isInteger(order) && order >= 1 && order <= MAX_ORDER))
      throw new InputError('wave number', `a denominator from 1 to ${MAX_ORDER}`, show(order));
    this.polynomial = cyclotomicPolynomial(order);
    this.degree = this.polynomial.length - 1;
    const powers: bigint[][] = [];
    let power = [1n, ...new Array<bigint>(this.degree - 1).fill(0n)];
    if (this.degree === 1) power = [1n];
    for (let e = 0; e < order; e++) {
      powers.push(power);
      // Times ω: shift, and the top power reduced by the polynomial.
      const top = power[this.degree - 1]!;
      power = power.map((_, i) => (i === 0 ? 0n : power[i - 1]!) - top * this.polynomial[i]!);
    }
    this.#powers = powers;
  }

  /** ω^e for any integer e. */
  power(exponent: number): Cyclotomic {
    const e = ((exponent % this.order) + this.order) % this.order;
    return { numerators: this.#powers[e]!, denominator: 1n };
  }

  rational({ numerator, denominator }: Rational): Cyclotomic {
    return this.reduced(
      this.power(0).numerators.map((v) => v * numerator),
      denominator,
    );
  }

  /** In lowest terms, with a positive denominator. */
  reduced(numerators: readonly bigint[], denominator: bigint): Cyclotomic {
    let common = denominator < 0n ? -denominator : denominator;
    for (const v of numerators) common = gcd(common, v);
    if (denominator < 0n) common = -common;
    return { numerators: numerators.map((v) => v / common), denominator: denominator / common };
  }

  add(a: Cyclotomic, b: Cyclotomic): Cyclotomic {
    const denominator = lcm(a.denominator, b.denominator);
    const [x, y] = [denominator / a.denominator, denominator / b.denominator];
    return this.reduced(
      a.numerators.map((v, i) => v * x + b.numerators[i]! * y),
      denominator,
    );
  }

  multiply(a: Cyclotomic, b: Cyclotomic): Cyclotomic {
    const sum = new Array<bigint>(this.degree).fill(0n);
    a.numerators.forEach((x, i) => {
      if (x === 0n) return;
      b.numerators.forEach((y, j) => {
        if (y === 0n) return;
        this.#powers[(i + j) % this.order]!.forEach((p, k) => {
          sum[k]! += x * y * p;
        });
      });
    });
    return this.reduced(sum, a.denominator * b.denominator);
  }

  scale(a: Cyclotomic, { numerator, denominator }: Rational): Cyclotomic {
    return this.reduced(
      a.numerators.map((v) => v * numerator),
      a.denominator * denominator,
    );
  }

  /** The complex conjugate: ω to 1/ω. */
  conjugate(a: Cyclotomic): Cyclotomic {
    const sum = new Array<bigint>(this.degree).fill(0n);
    a.numerators.forEach((x, i) => {
      this.#powers[(this.order - i) % this.order]!.forEach((p, k) => {
        sum[k]! += x * p;
      });
    });
    return this.reduced(sum, a.denominator);
  }

  isZero(a: Cyclotomic): boolean {
    return a.numerators.every((v) => v === 0n);
  }

  /** The value of an element that is rational; undefined of any other. */
  asRational(a: Cyclotomic): Rational | undefined {
    return a.numerators.every((v, i) => i === 0 || v === 0n)
      ? rational(a.numerators[0]!, a.denominator)
      : undefined;
  }

  /** Re a = (a + ā)/2. */
  real(a: Cyclotomic): Cyclotomic {
    return this.scale(this.add(a, this.conjugate(a)), { numerator: 1n, denominator: 2n });
  }

  /** For example `1/2 - 2 w + w^3`, w = e^{2πi/n}. */
  text(a: Cyclotomic): string {
    let text = '';
    a.numerators.forEach((v, i) => {
      if (v === 0n) return;
      const c = rational(v < 0n ? -v : v, a.denominator);
      const power = i === 0 ? '' : i === 1 ? 'w' : `w^${i}`;
      const unit = c.numerator === 1n && c.denominator === 1n && i > 0;
      const factor = unit ? '' : textFromRational(c) + (i > 0 ? ' ' : '');
      text += `${text === '' ? (v < 0n ? '-' : '') : v < 0n ? ' - ' : ' + '}${factor}${power}`;
    });
    return text === '' ? '0' : text;
  }
}

/** Φ_n = (xⁿ − 1) / Π of Φ_d over the proper divisors d of n; lowest power first. */
export function cyclotomicPolynomial(n: number): readonly bigint[] {
  let quotient = [-1n, ...new Array<bigint>(n - 1).fill(0n), 1n];
  for (let d = 1; d < n; d++) if (n % d === 0) quotient = divideExactly(quotient, cyclotomicPolynomial(d));
  return quotient;
}

/** Division by a monic divisor without remainder. */
function divideExactly(a: readonly bigint[], b: readonly bigint[]): bigint[] {
  const rest = [...a];
  const quotient = new Array<bigint>(a.length - b.length + 1).fill(0n);
  for (let i = quotient.length - 1; i >= 0; i--) {
    const factor = rest[i + b.length - 1]!;
    quotient[i] = factor;
    if (factor !== 0n)
      b.forEach((v, j) => {
        rest[i + j]! -= factor * v;
      });
  }
  return quotient;
}
