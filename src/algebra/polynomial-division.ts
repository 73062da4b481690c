/**
 * Polynomials as polynomials in one of their variables: coefficients, exact and pseudo-division, substitution, values mod p.
 *
 * Packed monomials compare as integers, which is the lexicographic order with the last variable highest: a monomial order, so
 * division by leading terms may use it.
 */
import { HoldfastError } from '../errors.ts';
import { EXPONENT_BITS, MAX_EXPONENT, type Monomial, Polynomial } from './polynomial.ts';
import { gcd, rational } from './rational.ts';

const MASK = BigInt(MAX_EXPONENT);

/** The power of a variable in a monomial. */
export function powerIn(monomial: Monomial, variable: number): number {
  return Number((monomial >> (BigInt(variable) * EXPONENT_BITS)) & MASK);
}

export function degreeIn(p: Polynomial, variable: number): number {
  let degree = 0;
  for (const monomial of p.numerators.keys()) degree = Math.max(degree, powerIn(monomial, variable));
  return degree;
}

export function totalDegree(p: Polynomial): number {
  let degree = 0;
  for (const monomial of p.numerators.keys()) {
    let sum = 0;
    for (let rest = monomial; rest !== 0n; rest >>= EXPONENT_BITS) sum += Number(rest & MASK);
    degree = Math.max(degree, sum);
  }
  return degree;
}

/** The variables that occur, rising. */
export function variablesOf(p: Polynomial): number[] {
  let all = 0n;
  for (const monomial of p.numerators.keys()) all |= monomial;
  const variables: number[] = [];
  for (let v = 0; all !== 0n; v++, all >>= EXPONENT_BITS) if ((all & MASK) !== 0n) variables.push(v);
  return variables;
}

/** Entry i is the coefficient of the i-th power of the variable; the last one is not zero. Empty for zero. */
export function coefficientsIn(p: Polynomial, variable: number): Polynomial[] {
  const parts: [Monomial, bigint][][] = [];
  const at = BigInt(variable) * EXPONENT_BITS;
  for (const [monomial, value] of p.numerators) {
    const power = powerIn(monomial, variable);
    while (parts.length <= power) parts.push([]);
    parts[power]!.push([monomial - (BigInt(power) << at), value]);
  }
  return parts.map((part) => Polynomial.fromIntegers(part, p.denominator));
}

/** p times a power of a variable. */
export function shiftIn(p: Polynomial, variable: number, power: number): Polynomial {
  const step = BigInt(power) << (BigInt(variable) * EXPONENT_BITS);
  return Polynomial.fromIntegers(
    [...p.numerators].map(([monomial, value]) => [monomial + step, value] as const),
    p.denominator,
  );
}

export function leadingMonomial(p: Polynomial): Monomial {
  let leading = 0n;
  for (const monomial of p.numerators.keys()) if (monomial > leading) leading = monomial;
  return leading;
}

/** The multiple with integer coefficients without a common factor and a positive leading one; zero stays zero. */
export function primitive(p: Polynomial): Polynomial {
  if (p.isZero()) return p;
  let common = 0n;
  for (const value of p.numerators.values()) {
    common = gcd(common, value);
    if (common === 1n) break;
  }
  if (p.numerators.get(leadingMonomial(p))! < 0n) common = -common;
  return common === 1n && p.denominator === 1n
    ? p
    : Polynomial.fromIntegers([...p.numerators].map(([m, value]) => [m, value / common] as const));
}

/** a / b where b divides a, undefined where it does not. Cost: terms of the quotient × terms of b. */
export function divideExactly(a: Polynomial, b: Polynomial): Polynomial | undefined {
  if (b.isZero()) throw new HoldfastError('polynomial: division by zero');
  if (a.isZero()) return a;
  const lead = leadingMonomial(b);
  const leadValue = b.numerators.get(lead)!;
  const rest = new Map(a.numerators);
  // Numerators only; integers stay integers by Gauss's lemma once b is primitive, so b's content goes first.
  let content = 0n;
  for (const value of b.numerators.values()) content = gcd(content, value);
  const divisor = [...b.numerators].map(([m, value]) => [m, value / content] as const);
  const divisorLead = leadValue / content;
  const quotient: [Monomial, bigint][] = [];
  while (rest.size > 0) {
    let top = -1n;
    for (const monomial of rest.keys()) if (monomial > top) top = monomial;
    const value = rest.get(top)!;
    if (!divides(lead, top) || value % divisorLead !== 0n) return undefined;
    const factor = value / divisorLead;
    const step = top - lead;
    quotient.push([step, factor]);
    for (const [monomial, c] of divisor) {
      const at = monomial + step;
      const sum = (rest.get(at) ?? 0n) - c * factor;
      if (sum === 0n) rest.delete(at);
      else rest.set(at, sum);
    }
  }
  return Polynomial.fromIntegers(quotient, a.denominator).scale(rational(b.denominator, content));
}

/** Does monomial a divide b? No variable may borrow from the next. */
function divides(a: Monomial, b: Monomial): boolean {
  if (a > b) return false;
  for (let x = a, y = b; x !== 0n; x >>= EXPONENT_BITS, y >>= EXPONENT_BITS)
    if ((x & MASK) > (y & MASK)) return false;
  return true;
}

/** `initial(b)^power · a = q·b + remainder`, of degree below b's in the variable. */
export function pseudoRemainder(
  a: Polynomial,
  b: Polynomial,
  variable: number,
): { remainder: Polynomial; power: number } {
  const divisor = coefficientsIn(b, variable);
  const degree = divisor.length - 1;
  const initial = divisor[degree]!;
  const one = initial.equals(Polynomial.one);
  let remainder = a;
  let power = 0;
  for (;;) {
    const own = coefficientsIn(remainder, variable);
    if (own.length <= degree) return { remainder, power };
    const factor = shiftIn(own[own.length - 1]!, variable, own.length - 1 - degree);
    remainder = (one ? remainder : remainder.times(initial)).minus(factor.times(b));
    if (!one) power++;
  }
}

/** `denominator^degree · p` with the variable replaced by numerator/denominator, where degree is p's in the variable. */
export function substitute(
  p: Polynomial,
  variable: number,
  numerator: Polynomial,
  denominator: Polynomial,
  degree = degreeIn(p, variable),
): Polynomial {
  const parts = coefficientsIn(p, variable);
  let sum = Polynomial.zero;
  for (let i = degree; i >= 0; i--) {
    // Horner's rule from the highest power; one factor of the denominator comes with every step down.
    const part = parts[i] ?? Polynomial.zero;
    sum = sum.times(numerator).plus(part.isZero() ? part : part.times(power(denominator, degree - i)));
  }
  return sum;
}

export function power(p: Polynomial, exponent: number): Polynomial {
  let result = Polynomial.one;
  for (let i = 0; i < exponent; i++) result = result.times(p);
  return result;
}

export function derivative(p: Polynomial, variable: number): Polynomial {
  const step = 1n << (BigInt(variable) * EXPONENT_BITS);
  return Polynomial.fromIntegers(
    [...p.numerators].flatMap(([monomial, value]) => {
      const e = powerIn(monomial, variable);
      return e === 0 ? [] : [[monomial - step, value * BigInt(e)] as const];
    }),
    p.denominator,
  );
}
