/**
 * Polynomials in one variable with integer coefficients, lowest power first and without leading zeros; zero is the empty list. Up to
 * rational factors they are polynomials over Q: gcds, divisions and root counts below are over Q, by primitive remainders.
 */
import { gcd } from './rational.ts';

export type Univariate = readonly bigint[];

export function trimmed(coefficients: Univariate): bigint[] {
  let length = coefficients.length;
  while (length > 0 && coefficients[length - 1] === 0n) length--;
  return coefficients.slice(0, length);
}

export function degree(f: Univariate): number {
  return f.length - 1;
}

export function productOf(f: Univariate, g: Univariate): bigint[] {
  if (f.length === 0 || g.length === 0) return [];
  const product = new Array<bigint>(f.length + g.length - 1).fill(0n);
  f.forEach((x, i) => {
    if (x === 0n) return;
    g.forEach((y, j) => {
      product[i + j]! += x * y;
    });
  });
  return product;
}

/** Without common integer factors, leading coefficient positive. */
export function primitivePart(f: Univariate): bigint[] {
  let common = 0n;
  for (const v of f) common = gcd(common, v);
  if (common === 0n) return [];
  if (f.at(-1)! < 0n) common = -common;
  return f.map((v) => v / common);
}

/** scale·f = quotient·g + remainder with a positive integer scale: division over Q without fractions. */
export function pseudoDivide(
  f: Univariate,
  g: Univariate,
): { scale: bigint; quotient: bigint[]; remainder: bigint[] } {
  const lead = g.at(-1)!;
  let remainder = [...f];
  let scale = 1n;
  let quotient = new Array<bigint>(Math.max(0, f.length - g.length + 1)).fill(0n);
  while (remainder.length >= g.length) {
    const top = remainder.at(-1)!;
    const common = gcd(top, lead);
    let [factor, step] = [lead / common, top / common];
    if (factor < 0n) [factor, step] = [-factor, -step];
    const at = remainder.length - g.length;
    scale *= factor;
    if (factor !== 1n) {
      remainder = remainder.map((v) => v * factor);
      quotient = quotient.map((v) => v * factor);
    }
    quotient[at]! += step;
    g.forEach((v, j) => {
      remainder[at + j]! -= step * v;
    });
    remainder = trimmed(remainder);
  }
  return { scale, quotient, remainder };
}

/** Greatest common divisor over Q, primitive; the zero polynomial divides only itself. */
export function commonFactor(f: Univariate, g: Univariate): bigint[] {
  let [a, b] = [primitivePart(f), primitivePart(g)];
  while (b.length > 0) [a, b] = [b, primitivePart(pseudoDivide(a, b).remainder)];
  return a;
}

/** f / g up to a rational factor; g must divide f over Q. */
export function quotientOf(f: Univariate, g: Univariate): bigint[] {
  return primitivePart(pseudoDivide(f, g).quotient);
}

export function divides(g: Univariate, f: Univariate): boolean {
  return pseudoDivide(f, g).remainder.length === 0;
}

export function derivative(f: Univariate): bigint[] {
  return f.slice(1).map((v, i) => v * BigInt(i + 1));
}

/** The product of the distinct irreducible factors. */
export function squareFree(f: Univariate): bigint[] {
  return f.length <= 1 ? primitivePart(f) : quotientOf(f, commonFactor(f, derivative(f)));
}

/** denominator^degree · f(numerator/denominator), whose sign is that of f for a positive denominator. */
export function signedValue(f: Univariate, numerator: bigint, denominator: bigint): bigint {
  let value = 0n;
  let power = 1n;
  for (let i = f.length - 1; i >= 0; i--) {
    value = value * numerator + f[i]! * power;
    power *= denominator;
  }
  return value;
}

/** A closed interval of rationals over one denominator. */
export interface Interval {
  readonly low: bigint;
  readonly high: bigint;
  readonly denominator: bigint;
}

/**
 * The distinct real roots in the open interval (low, high), integers at which f does not vanish, each in an interval of its own of
 * the given width or less. By Sturm's theorem and bisection.
 */
export function realRootsBetween(f: Univariate, low: bigint, high: bigint, bits: number): Interval[] {
  const chain: bigint[][] = [squareFree(f)];
  if (chain[0]!.length <= 1) return [];
  chain.push(derivative(chain[0]!));
  for (;;) {
    const [a, b] = [chain.at(-2)!, chain.at(-1)!];
    const remainder = pseudoDivide(a, b).remainder;
    if (remainder.length === 0) break;
    const positive = primitivePart(remainder);
    chain.push(remainder.at(-1)! < 0n ? positive : positive.map((v) => -v));
  }
  const variations = (numerator: bigint, denominator: bigint) => {
    let changes = 0;
    let before = 0n;
    for (const g of chain) {
      const value = signedValue(g, numerator, denominator);
      if (value === 0n) continue;
      if (before !== 0n && value > 0n !== before > 0n) changes++;
      before = value;
    }
    return changes;
  };
  const roots: Interval[] = [];
  /** Roots in (low, high] over the denominator. */
  const search = (from: bigint, to: bigint, denominator: bigint, left: number): void => {
    const count = variations(from, denominator) - variations(to, denominator);
    if (count === 0) return;
    if (left <= 0 && count === 1) {
      roots.push({ low: from, high: to, denominator });
      return;
    }
    const middle = from + to;
    search(2n * from, middle, 2n * denominator, left - 1);
    search(middle, 2n * to, 2n * denominator, left - 1);
  };
  search(low, high, 1n, bits);
  return roots;
}
