/** Families restricted to a case, and charges with polynomial coefficients, re-multiplied exactly. */
import { Operator } from '../../algebra/operator.ts';
import { type Monomial, Polynomial } from '../../algebra/polynomial.ts';
import { degreeIn, substitute } from '../../algebra/polynomial-division.ts';
import { gcd, lcm, rational } from '../../algebra/rational.ts';
import type { Word } from '../../algebra/word.ts';
import type { Chain } from '../../lattice/chain.ts';
import type { Family } from '../../model/formula.ts';
import { type Case, reduceOn } from './case.ts';

/** A density whose coefficients are polynomials; translates are added up by the caller's convention, as in `Operator`. */
export type PolynomialDensity = readonly (readonly [Word, Polynomial])[];

/** The coefficients of the family on a case, in its free parameters, all times one common factor that is non-zero there. */
export function termsOn(where: Case, family: Family): Polynomial[] {
  let terms = family.terms.map(([, p]) => p);
  for (const { variable, numerator, denominator } of where.solved) {
    const degree = Math.max(...terms.map((p) => degreeIn(p, variable)));
    terms = terms.map((p) => substitute(p, variable, numerator, denominator, degree));
  }
  return terms;
}

/**
 * Does the charge commute with the family everywhere on the case? `i[H, Q]/2` is multiplied out with the bracket of exact operators,
 * monomial by monomial of the parameters; every coefficient has to vanish on the case.
 */
export function commutesOn(where: Case, chain: Chain, h: PolynomialDensity, q: PolynomialDensity): boolean {
  const sum = new Map<Word, [Monomial, bigint][]>();
  const [hs, qs] = [byMonomial(h), byMonomial(q)];
  for (const [m, a] of hs)
    for (const [n, b] of qs) {
      const bracket = chain.bracket(a, b);
      for (const [word, value] of bracket.numerators) {
        const list = sum.get(word);
        // Both factors have integer coefficients, so the bracket has.
        if (list === undefined) sum.set(word, [[m + n, value]]);
        else list.push([m + n, value]);
      }
    }
  for (const list of sum.values()) if (!reduceOn(where, Polynomial.fromIntegers(list)).isZero()) return false;
  return true;
}

/** The density times its common denominator, as one integer operator a monomial. */
function byMonomial(density: PolynomialDensity): Map<Monomial, Operator> {
  const denominator = density.reduce((d, [, p]) => lcm(d, p.denominator), 1n);
  const parts = new Map<Monomial, [Word, bigint][]>();
  for (const [word, p] of density)
    for (const [monomial, value] of p.numerators) {
      const entry: [Word, bigint] = [word, (value * denominator) / p.denominator];
      const list = parts.get(monomial);
      if (list === undefined) parts.set(monomial, [entry]);
      else list.push(entry);
    }
  return new Map([...parts].map(([monomial, list]) => [monomial, Operator.fromIntegers(list)]));
}

/** The same density with integer coefficients without a common integer factor; the first monomial of the first word is positive. */
export function primitiveDensity(density: PolynomialDensity, parameters: number): PolynomialDensity {
  const denominator = density.reduce((d, [, p]) => lcm(d, p.denominator), 1n);
  let common = 0n;
  for (const [, p] of density)
    for (const value of p.numerators.values()) common = gcd(common, (value * denominator) / p.denominator);
  for (const [, p] of density) {
    const [leading] = p.terms(parameters);
    if (leading![1].numerator < 0n) common = -common;
    break;
  }
  const factor = rational(denominator, common);
  return density.map(([word, p]) => [word, p.scale(factor)] as const);
}
