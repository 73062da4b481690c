/**
 * A syntax tree to a combination of Pauli strings whose coefficients are polynomials in the free parameters.
 *
 * Sums and products are multiplied out as they stand; every step is counted and every coefficient measured, so a short text cannot
 * ask for long work.
 */
import { Polynomial } from '../algebra/polynomial.ts';
import { divide, MAX_NUMBER_LENGTH, ONE, type Rational } from '../algebra/rational.ts';
import { product, spanOf, textFromWord, type Word } from '../algebra/word.ts';
import {
  isReadable,
  isWithinBits,
  MAX_COEFFICIENT_BITS,
  MAX_DEGREE,
  MAX_TERMS,
  MAX_WORD_LENGTH,
  MAX_WORK,
} from './limits.ts';
import type { Node, Site, Syntax } from './syntax.ts';
import { refuse } from './tokens.ts';

export interface Meaning {
  /** The spin on which a site's letter stands; words begin on spin 0. */
  readonly spinOf: (site: Site) => number;
  /** The values of the parameters that have one. */
  readonly values: ReadonlyMap<string, Rational>;
  /** The other parameters: the variables of the polynomials, in this order. */
  readonly free: readonly string[];
}

/** A coefficient on its way: products of letters on one site bring factors of i, which must cancel in the end. */
interface Complex {
  readonly re: Polynomial;
  readonly im: Polynomial;
}

interface Value {
  /** What may still multiply it: words have no place on the chain, so a product of words means nothing. */
  readonly kind: 'scalar' | 'sites' | 'words';
  readonly terms: ReadonlyMap<Word, Complex>;
}

/** @throws InputError with the place, for what has no meaning, is not Hermitian, or exceeds the limits */
export function evaluate(syntax: Syntax, { spinOf, values, free }: Meaning): Map<Word, Polynomial> {
  const { text } = syntax;
  let work = 0;
  /** Where a factor of i first arose. */
  let imaginaryAt = -1;

  const spend = (steps: number, at: number): void => {
    work += steps;
    if (work > MAX_WORK)
      refuse(text, at, `a formula of at most ${MAX_WORK} steps when multiplied out`, 'more');
  };
  /** Adds to a coefficient. Looks at the size every time: a sum of many fractions grows with every one of them. */
  const accumulate = (terms: Map<Word, Complex>, word: Word, { re, im }: Complex, at: number): void => {
    const old = terms.get(word) ?? COMPLEX_ZERO;
    const total = { re: old.re.plus(re), im: old.im.plus(im) };
    if (total.re.isZero() && total.im.isZero()) {
      terms.delete(word);
      return;
    }
    spend(total.re.size + total.im.size, at);
    for (const p of [total.re, total.im]) {
      if (!(isWithinBits(p.denominator) && [...p.numerators.values()].every(isWithinBits)))
        refuse(text, at, `coefficients of at most ${MAX_COEFFICIENT_BITS} bits`, 'a longer one');
      if (p.degrees(free.length).some((d) => d > MAX_DEGREE))
        refuse(text, at, `powers of a parameter up to ${MAX_DEGREE}`, 'a higher one');
    }
    terms.set(word, total);
    if (terms.size > MAX_TERMS) refuse(text, at, `at most ${MAX_TERMS} Pauli strings`, 'more');
  };
  const scalar = (p: Polynomial): Value => ({
    kind: 'scalar',
    terms: p.isZero() ? new Map() : new Map([[0n, { re: p, im: Polynomial.zero }]]),
  });

  function valueAt(node: Node): Value {
    switch (node.kind) {
      case 'number':
        return scalar(Polynomial.constant(node.value));
      case 'name': {
        const value = values.get(node.name);
        return scalar(
          value === undefined ? Polynomial.variable(free.indexOf(node.name)) : Polynomial.constant(value),
        );
      }
      case 'word':
        return { kind: 'words', terms: new Map([[node.word, REAL_ONE]]) };
      case 'site':
        return {
          kind: 'sites',
          terms: new Map([[BigInt(node.letter) << BigInt(2 * spinOf(node)), REAL_ONE]]),
        };
      case 'sum':
        return sumOf(node);
      case 'product':
        return node.parts
          .map(({ inverse, node: part }) => ({
            value: inverse ? inverseOf(part) : valueAt(part),
            at: part.at,
          }))
          .reduce(({ value: a }, { value: b, at }) => ({ value: productOf(a, b, at), at })).value;
      case 'power':
        return powerOf(node.base, node.exponent);
    }
  }

  function sumOf(node: Extract<Node, { kind: 'sum' }>): Value {
    const terms = new Map<Word, Complex>();
    let kind: Value['kind'] = 'scalar';
    for (const { negative, node: part } of node.parts) {
      const value = valueAt(part);
      if (value.kind === 'words' || kind === 'scalar') kind = value.kind;
      for (const [word, coefficient] of value.terms)
        accumulate(terms, word, negative ? turn(coefficient, 2) : coefficient, part.at);
    }
    return { kind, terms };
  }

  function productOf(a: Value, b: Value, at: number): Value {
    if (a.kind !== 'scalar' && b.kind !== 'scalar' && (a.kind === 'words' || b.kind === 'words'))
      refuse(
        text,
        at,
        'a sum, or a product of single letters with sites as in X_0 X_1 (words have no fixed place)',
        'a product of two words',
      );
    const sum = new Map<Word, Complex>();
    for (const [u, x] of a.terms)
      for (const [v, y] of b.terms) {
        spend((x.re.size + x.im.size) * (y.re.size + y.im.size), at);
        const { word, phase } = product(u, v);
        if ((phase & 1) === 1 && imaginaryAt < 0) imaginaryAt = at;
        accumulate(sum, word, turn(multiply(x, y), phase), at);
      }
    return { kind: a.kind === 'scalar' ? b.kind : a.kind, terms: sum };
  }

  function scalarOf(node: Node, use: string): Polynomial {
    const value = valueAt(node);
    if (value.kind !== 'scalar') refuse(text, node.at, `a scalar as ${use}`, 'Pauli letters');
    return value.terms.get(0n)?.re ?? Polynomial.zero;
  }

  function reciprocal(p: Polynomial, at: number): Polynomial {
    const constant = p.asConstant();
    if (constant === undefined)
      refuse(text, at, 'a division by a constant', `${p.toString(free)}, which has a free parameter`);
    if (constant.numerator === 0n) refuse(text, at, 'a divisor other than 0', '0');
    return Polynomial.constant(divide(ONE, constant));
  }

  function inverseOf(node: Node): Value {
    return scalar(reciprocal(scalarOf(node, 'a divisor'), node.at));
  }

  function powerOf(node: Node, exponent: number): Value {
    const base = scalarOf(node, 'the base of a power');
    let power = scalar(Polynomial.one);
    const factor = scalar(exponent < 0 ? reciprocal(base, node.at) : base);
    for (let e = Math.abs(exponent); e > 0; e--) power = productOf(power, factor, node.at);
    return power;
  }

  const result = new Map<Word, Polynomial>();
  for (const [word, { re, im }] of valueAt(syntax.root).terms) {
    if (!im.isZero())
      refuse(
        text,
        Math.max(0, imaginaryAt),
        'a Hermitian density',
        `the anti-Hermitian part i (${im.toString(free)}) ${textFromWord(word)}`,
      );
    if (spanOf(word) > MAX_WORD_LENGTH)
      refuse(text, 0, `words of at most ${MAX_WORD_LENGTH} letters`, `${spanOf(word)}`);
    for (const monomial of re.numerators.keys())
      if (!isReadable(re.coefficient(monomial)))
        refuse(text, 0, `coefficients of at most ${MAX_NUMBER_LENGTH} characters`, 'a longer one');
    result.set(word, re);
  }
  return result;
}

const COMPLEX_ZERO: Complex = { re: Polynomial.zero, im: Polynomial.zero };
const REAL_ONE: Complex = { re: Polynomial.one, im: Polynomial.zero };

function multiply(a: Complex, b: Complex): Complex {
  if (a.im.isZero() && b.im.isZero()) return { re: a.re.times(b.re), im: Polynomial.zero };
  return {
    re: a.re.times(b.re).minus(a.im.times(b.im)),
    im: a.re.times(b.im).plus(a.im.times(b.re)),
  };
}

/** Times i^phase. */
function turn({ re, im }: Complex, phase: number): Complex {
  if (phase === 0) return { re, im };
  if (phase === 2) return { re: Polynomial.zero.minus(re), im: Polynomial.zero.minus(im) };
  const turned = { re: Polynomial.zero.minus(im), im: re };
  return phase === 1 ? turned : { re: im, im: Polynomial.zero.minus(re) };
}
