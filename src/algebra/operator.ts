/**
 * Operators with finite support: real combinations of Pauli strings, exact.
 *
 * Integers over one positive common denominator, in lowest terms, so two equal operators have equal fields. Every Hermitian
 * operator is such a combination; the two Hermitian products below keep it so. All values are immutable.
 */

import { InputError } from '../errors.ts';
import { clipped, INSPECT } from './printed.ts';
import {
  type Exact,
  exact,
  type Fraction,
  gcd,
  lcm,
  type Rational,
  textFromRational,
  toFraction,
} from './rational.ts';
import { commute, compareWords, product, spanOf, textFromWord, type Word, wordFromText } from './word.ts';

export class Operator {
  static readonly zero = new Operator(new Map(), 1n);

  private constructor(
    /** Integer coefficients, none zero; divide by `denominator`. */
    readonly numerators: ReadonlyMap<Word, bigint>,
    readonly denominator: bigint,
  ) {}

  /**
   * From integer coefficients over a common denominator. Zeros are dropped, the rest is brought to lowest terms.
   *
   * @throws InputError on a zero denominator
   */
  static fromIntegers(numerators: Iterable<readonly [Word, bigint]>, denominator = 1n): Operator {
    if (denominator === 0n) throw new InputError('operator', 'a denominator other than 0', '0');
    const kept = new Map<Word, bigint>();
    for (const [word, value] of numerators) {
      const sum = (kept.get(word) ?? 0n) + value;
      if (sum === 0n) kept.delete(word);
      else kept.set(word, sum);
    }
    if (kept.size === 0) return Operator.zero;
    let common = denominator;
    for (const value of kept.values()) {
      if (common === 1n || common === -1n) break;
      common = gcd(common, value);
    }
    if (common < 0n !== denominator < 0n) common = -common;
    if (common !== 1n) for (const [word, value] of kept) kept.set(word, value / common);
    return new Operator(kept, denominator / common);
  }

  static fromTerms(terms: Iterable<readonly [Word, Rational]>): Operator {
    const list = [...terms];
    const denominator = list.reduce((d, [, c]) => lcm(d, c.denominator), 1n);
    return Operator.fromIntegers(
      list.map(([word, c]) => [word, (c.numerator * denominator) / c.denominator] as const),
      denominator,
    );
  }

  /** From printed words, for example `Operator.of({ XX: 1, ZI: '1/2' })`. Words start on spin 0. */
  static of(terms: Readonly<Record<string, Exact>>): Operator {
    return Operator.fromTerms(
      Object.entries(terms).map(([text, value]) => [wordFromText(text), exact(value)] as const),
    );
  }

  get size(): number {
    return this.numerators.size;
  }

  isZero(): boolean {
    return this.numerators.size === 0;
  }

  /** One past the last spin on which the operator acts. */
  get span(): number {
    let span = 0;
    for (const word of this.numerators.keys()) span = Math.max(span, spanOf(word));
    return span;
  }

  coefficient(word: Word): Rational {
    const value = this.numerators.get(word) ?? 0n;
    const common = gcd(value, this.denominator);
    return { numerator: value / common, denominator: this.denominator / common };
  }

  /** Coefficients as fractions, words in alphabetical order. */
  *terms(): Generator<[Word, Rational]> {
    for (const word of [...this.numerators.keys()].sort(compareWords)) yield [word, this.coefficient(word)];
  }

  toFractions(): Map<string, Fraction> {
    return new Map([...this.terms()].map(([word, c]) => [textFromWord(word), toFraction(c)]));
  }

  plus(other: Operator): Operator {
    return combine(this, 1n, other, 1n);
  }

  minus(other: Operator): Operator {
    return combine(this, 1n, other, -1n);
  }

  times(factor: Exact): Operator {
    const { numerator, denominator } = exact(factor);
    return this.mapIntegers((word, value) => [word, value * numerator], this.denominator * denominator);
  }

  /**
   * `i[A, B]/2`, the Hermitian form of the commutator. Of two strings it is ±1 times their product, or zero.
   * Cost: the product of the numbers of terms.
   */
  bracket(other: Operator): Operator {
    return this.productBy(other, 1);
  }

  /** `{A, B}/2`, the Hermitian form of the anticommutator. Cost as `bracket`. */
  anticommutator(other: Operator): Operator {
    return this.productBy(other, 0);
  }

  private productBy(other: Operator, odd: 0 | 1): Operator {
    const sum = new Map<Word, bigint>();
    for (const [a, x] of this.numerators)
      for (const [b, y] of other.numerators) {
        if (commute(a, b) === (odd === 1)) continue;
        const { word, phase } = product(a, b);
        // An anticommuting pair has phase ±i, and i·(±i) = ∓1; a commuting one has phase ±1.
        const value = phase === 1 || phase === 2 ? -(x * y) : x * y;
        sum.set(word, (sum.get(word) ?? 0n) + value);
      }
    return Operator.fromIntegers(sum, this.denominator * other.denominator);
  }

  /** The image under a map of strings with signs or factors; images that coincide add up. */
  mapIntegers(
    image: (word: Word, value: bigint) => readonly [Word, bigint],
    denominator = this.denominator,
  ): Operator {
    return Operator.fromIntegers(
      [...this.numerators].map(([word, value]) => image(word, value)),
      denominator,
    );
  }

  mapWords(image: (word: Word) => Word): Operator {
    return this.mapIntegers((word, value) => [image(word), value]);
  }

  filter(keep: (word: Word) => boolean): Operator {
    return Operator.fromIntegers(
      [...this.numerators].filter(([word]) => keep(word)),
      this.denominator,
    );
  }

  equals(other: Operator): boolean {
    if (this.denominator !== other.denominator || this.size !== other.size) return false;
    for (const [word, value] of this.numerators) if (other.numerators.get(word) !== value) return false;
    return true;
  }

  /** The multiple with integer coefficients without a common factor; `leading` decides the sign: its coefficient is positive. */
  primitive(leading: Word): Operator {
    let common = 0n;
    for (const value of this.numerators.values()) common = gcd(common, value);
    if ((this.numerators.get(leading) ?? 0n) < 0n) common = -common;
    return common === 0n ? this : this.mapIntegers((word, value) => [word, value / common], 1n);
  }

  /** For example `XX + 1/2 ZI`; `0` for the zero operator. Words may be padded to `length` letters. */
  toString(length = 1): string {
    let text = '';
    for (const [word, c] of this.terms()) {
      const negative = c.numerator < 0n;
      const size = negative ? { ...c, numerator: -c.numerator } : c;
      const factor = size.numerator === 1n && size.denominator === 1n ? '' : `${textFromRational(size)} `;
      text += `${text === '' ? (negative ? '-' : '') : negative ? ' - ' : ' + '}${factor}${textFromWord(word, length)}`;
    }
    return text === '' ? '0' : text;
  }

  [INSPECT](): string {
    return `Operator(${clipped(this.toString(), `${this.size} terms`)})`;
  }

  toJSON(): Record<string, string> {
    return Object.fromEntries(
      [...this.terms()].map(([word, c]) => [textFromWord(word), textFromRational(c)]),
    );
  }
}

function combine(a: Operator, x: bigint, b: Operator, y: bigint): Operator {
  const denominator = lcm(a.denominator, b.denominator);
  const p = (x * denominator) / a.denominator;
  const q = (y * denominator) / b.denominator;
  const sum = new Map<Word, bigint>();
  for (const [word, value] of a.numerators) sum.set(word, value * p);
  for (const [word, value] of b.numerators) sum.set(word, (sum.get(word) ?? 0n) + value * q);
  return Operator.fromIntegers(sum, denominator);
}
