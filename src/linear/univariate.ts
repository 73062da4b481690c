/**
 * Polynomials in one variable over the rationals, exact: what the minors of a small pencil are made of.
 *
 * Coefficients stand lowest power first, without zeros at the end; the zero polynomial is the empty list.
 */
import { add, divide, lcm, multiply, type Rational, rational, ZERO } from '../algebra/rational.ts';

export type Univariate = readonly Rational[];

export function univariate(coefficients: readonly Rational[]): Univariate {
  let length = coefficients.length;
  while (length > 0 && coefficients[length - 1]!.numerator === 0n) length--;
  return coefficients.slice(0, length);
}

/** From integers, lowest power first. */
export function univariateOf(...coefficients: readonly (bigint | number)[]): Univariate {
  return univariate(coefficients.map((c) => rational(BigInt(c))));
}

export function degree(a: Univariate): number {
  return a.length - 1;
}

/** a + factor·x^power·b, the step of every algorithm below. */
export function addMultiple(a: Univariate, b: Univariate, factor: Rational, power = 0): Univariate {
  const sum: Rational[] = Array.from(
    { length: Math.max(a.length, b.length + power) },
    (_, i) => a[i] ?? ZERO,
  );
  b.forEach((c, i) => {
    sum[i + power] = add(sum[i + power]!, multiply(factor, c));
  });
  return univariate(sum);
}

export function timesUnivariate(a: Univariate, b: Univariate): Univariate {
  let product: Univariate = [];
  a.forEach((c, i) => {
    product = addMultiple(product, b, c, i);
  });
  return product;
}

/** Quotient and remainder. The divisor is not zero. */
export function divideUnivariate(
  a: Univariate,
  b: Univariate,
): { quotient: Univariate; remainder: Univariate } {
  const lead = b[b.length - 1]!;
  const quotient: Rational[] = new Array(Math.max(0, a.length - b.length + 1)).fill(ZERO);
  let remainder = a;
  while (remainder.length >= b.length) {
    const power = remainder.length - b.length;
    const factor = divide(remainder[remainder.length - 1]!, lead);
    quotient[power] = factor;
    remainder = addMultiple(remainder, b, { ...factor, numerator: -factor.numerator }, power);
  }
  return { quotient: univariate(quotient), remainder };
}

/** Monic; zero for two zeros. */
export function greatestCommonDivisor(a: Univariate, b: Univariate): Univariate {
  let [x, y] = [a, b];
  while (y.length > 0) [x, y] = [y, divideUnivariate(x, y).remainder];
  return monic(x);
}

export function monic(a: Univariate): Univariate {
  const lead = a[a.length - 1];
  return lead === undefined ? a : a.map((c) => divide(c, lead));
}

export function derivative(a: Univariate): Univariate {
  return univariate(a.slice(1).map((c, i) => multiply(c, rational(BigInt(i + 1)))));
}

/** The product of the distinct irreducible factors, monic. */
export function squareFree(a: Univariate): Univariate {
  return a.length <= 1
    ? monic(a)
    : monic(divideUnivariate(a, greatestCommonDivisor(a, derivative(a))).quotient);
}

export function evaluate(a: Univariate, at: Rational): Rational {
  return a.reduceRight<Rational>((sum, c) => add(multiply(sum, at), c), ZERO);
}

/**
 * The integer roots ≥ `from`, rising. By Sturm's theorem and bisection, so that no constant term has to be factored; the bound on
 * the roots is Cauchy's.
 */
export function integerRoots(a: Univariate, from: bigint): bigint[] {
  if (a.length <= 1) return [];
  const chain = sturmChain(squareFree(a));
  const p = chain[0]!;
  const scale = p.reduce((d, c) => lcm(d, c.denominator), 1n);
  const sizes = p.map(({ numerator, denominator }) => {
    const value = (numerator * scale) / denominator;
    return value < 0n ? -value : value;
  });
  const lead = sizes[sizes.length - 1]!;
  let largest = 0n;
  for (const size of sizes) if (size > largest) largest = size;
  const bound = largest / lead + 2n;
  const roots: bigint[] = [];
  // Roots in (low, high], each half searched while it holds one.
  const search = (low: bigint, high: bigint, below: number, above: number): void => {
    if (below === above || low >= high) return;
    if (high - low === 1n) {
      if (evaluate(p, rational(high)).numerator === 0n) roots.push(high);
      return;
    }
    const middle = low + (high - low) / 2n;
    const changes = signChanges(chain, middle);
    search(low, middle, below, changes);
    search(middle, high, changes, above);
  };
  search(from - 1n, bound, signChanges(chain, from - 1n), signChanges(chain, bound));
  return roots;
}

function sturmChain(squareFreePolynomial: Univariate): Univariate[] {
  const chain = [squareFreePolynomial, derivative(squareFreePolynomial)];
  for (;;) {
    const [a, b] = [chain[chain.length - 2]!, chain[chain.length - 1]!];
    if (b.length === 0) return chain.slice(0, -1);
    const { remainder } = divideUnivariate(a, b);
    chain.push(remainder.map((c) => ({ ...c, numerator: -c.numerator })));
  }
}

/** Zeros are left out, as Sturm's theorem on half-open intervals (low, high] asks for. */
function signChanges(chain: readonly Univariate[], at: bigint): number {
  let changes = 0;
  let last = 0;
  for (const p of chain) {
    const { numerator } = evaluate(p, rational(at));
    const sign = numerator > 0n ? 1 : numerator < 0n ? -1 : 0;
    if (sign === 0) continue;
    if (last !== 0 && sign !== last) changes++;
    last = sign;
  }
  return changes;
}
