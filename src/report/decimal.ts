/** Decimal expansions of exact rationals, for display alone. */
import Big from 'big.js';
import type { Rational } from '../algebra/rational.ts';

/** A constructor of its own: the package's default one is shared and mutable. */
const Decimal = Big();

/** The value rounded half up to so many decimals; the exact rational stays the answer. */
export function decimalText({ numerator, denominator }: Rational, decimals: number): string {
  Decimal.DP = decimals;
  Decimal.RM = Decimal.roundHalfUp;
  return new Decimal(String(numerator)).div(new Decimal(String(denominator))).toFixed(decimals);
}
