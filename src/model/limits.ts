/**
 * Bounds on what is read. They lie far above any model that can be searched, and keep hostile text from becoming work: a text
 * within them is refused or read in well under a second and a few tens of megabytes.
 */
import { Operator } from '../algebra/operator.ts';
import { lcm, MAX_NUMBER_LENGTH, type Rational, textFromRational } from '../algebra/rational.ts';
import type { Word } from '../algebra/word.ts';
import { InputError } from '../errors.ts';

/** Longest formula, in characters. */
export const MAX_FORMULA_LENGTH = 200_000;
/** Longest JSON model, in characters. */
export const MAX_MODEL_LENGTH = 8_000_000;
/** Longest Pauli word, in letters. */
export const MAX_WORD_LENGTH = 256;
/** Longest name of a parameter. */
export const MAX_NAME_LENGTH = 64;
/** Deepest nesting of parentheses. */
export const MAX_NESTING = 100;
/** Highest exponent in a formula. */
export const MAX_POWER = 64;
/** Highest power of one free parameter after multiplying out. */
export const MAX_DEGREE = 256;
/** Most free parameters of a family, and most parameters of a JSON model. */
export const MAX_PARAMETERS = 64;
/** Most Pauli strings in a density, also on the way to it. */
export const MAX_TERMS = 20_000;
/** Most additions and products of monomials that reading one formula may take. */
export const MAX_WORK = 1_000_000;
/** Longest numerator or common denominator on the way, in bits. */
export const MAX_COEFFICIENT_BITS = 4_096;

const COEFFICIENT_BOUND = 1n << BigInt(MAX_COEFFICIENT_BITS);

/** Is this integer within `MAX_COEFFICIENT_BITS`? */
export function isWithinBits(value: bigint): boolean {
  return value < COEFFICIENT_BOUND && -value < COEFFICIENT_BOUND;
}

/** Is the printed form of a coefficient short enough to be read again? */
export function isReadable(coefficient: Rational): boolean {
  // The bits first: printing a long integer is the expensive part.
  return (
    isWithinBits(coefficient.numerator) &&
    isWithinBits(coefficient.denominator) &&
    textFromRational(coefficient).length <= MAX_NUMBER_LENGTH
  );
}

/**
 * The operator of many terms, after a look at their common denominator.
 *
 * @throws InputError when the numbers would grow beyond the limits
 */
export function operatorOf(who: string, terms: readonly (readonly [Word, Rational])[]): Operator {
  let denominator = 1n;
  for (const [, coefficient] of terms) {
    if (!isReadable(coefficient))
      throw new InputError(who, `coefficients of at most ${MAX_NUMBER_LENGTH} characters`, 'a longer one');
    denominator = lcm(denominator, coefficient.denominator);
    if (!isWithinBits(denominator))
      throw new InputError(
        who,
        `a common denominator of at most ${MAX_COEFFICIENT_BITS} bits`,
        'a longer one',
      );
  }
  return Operator.fromTerms(terms);
}
