/**
 * Greatest common divisors and factors of small polynomials in several variables over the rationals.
 *
 * Euclid's algorithm with primitive pseudo-remainders, variable by variable, and a value modulo a prime first that shows most
 * pairs coprime at once. Factors: contents, square-free part, then by degree: a primitive polynomial of degree one in a variable is
 * irreducible, one of degree two splits exactly when its discriminant is a square; above that, powers are halved where all are even and
 * linear factors tried. What is not split is not wrong, only less readable.
 * Method: textbook computer algebra, common practice, no source.
 */

import { EXPONENT_BITS, type Monomial, Polynomial } from './polynomial.ts';
import {
  coefficientsIn,
  degreeIn,
  derivative,
  divideExactly,
  leadingMonomial,
  powerIn,
  primitive,
  pseudoRemainder,
  substitute,
  variablesOf,
} from './polynomial-division.ts';
import { rational, squareRoot as rootOf } from './rational.ts';

/** The greatest common divisor, primitive; of zero and p it is p. */
export function polynomialGcd(a: Polynomial, b: Polynomial): Polynomial {
  if (a.isZero()) return primitive(b);
  if (b.isZero()) return primitive(a);
  if (isConstant(a) || isConstant(b)) return Polynomial.one;
  const [ma, mb] = [commonMonomial(a), commonMonomial(b)];
  const shared = monomialGcd(ma, mb);
  const rest = gcdWithoutMonomials(stripped(primitive(a), ma), stripped(primitive(b), mb));
  return shared === 0n ? rest : rest.times(Polynomial.fromIntegers([[shared, 1n]]));
}

function gcdWithoutMonomials(a: Polynomial, b: Polynomial): Polynomial {
  if (isConstant(a) || isConstant(b)) return Polynomial.one;
  if (a.equals(b)) return a;
  const [small, large] = a.size <= b.size ? [a, b] : [b, a];
  if (divideExactly(large, small) !== undefined) return small;
  const [va, vb] = [variablesOf(a), variablesOf(b)];
  // A variable of one alone: the divisor lies in the content.
  const onlyA = va.find((v) => !vb.includes(v));
  if (onlyA !== undefined) return polynomialGcd(contentIn(a, onlyA, b), b);
  const onlyB = vb.find((v) => !va.includes(v));
  if (onlyB !== undefined) return polynomialGcd(a, contentIn(b, onlyB, a));
  const v = va.reduce((best, u) =>
    degreeIn(a, u) + degreeIn(b, u) < degreeIn(a, best) + degreeIn(b, best) ? u : best,
  );
  const [ca, cb] = [contentIn(a, v), contentIn(b, v)];
  const content = polynomialGcd(ca, cb);
  let [p, q] = [divideExactly(a, ca)!, divideExactly(b, cb)!];
  if (coprimeAtAPoint(p, q, v)) return content;
  if (degreeIn(p, v) < degreeIn(q, v)) [p, q] = [q, p];
  for (;;) {
    const { remainder } = pseudoRemainder(p, q, v);
    if (remainder.isZero()) return content.times(q);
    if (degreeIn(remainder, v) === 0) return content;
    p = q;
    q = primitive(divideExactly(remainder, contentIn(remainder, v))!);
  }
}

/** The common divisor of the coefficients by powers of a variable, and of another polynomial if given. */
function contentIn(p: Polynomial, variable: number, start: Polynomial = Polynomial.zero): Polynomial {
  let content = start;
  for (const c of coefficientsIn(p, variable).sort((x, y) => x.size - y.size)) {
    if (c.isZero()) continue;
    content = polynomialGcd(content, c);
    if (isConstant(content)) return Polynomial.one;
  }
  return content;
}

/** A prime below 2²⁶, for values that show polynomials coprime. */
const PRIME = 67108859;

/** Proof, when true, that p and q have no common factor of positive degree in the variable. */
function coprimeAtAPoint(p: Polynomial, q: Polynomial, variable: number): boolean {
  let a = imageIn(p, variable);
  let b = imageIn(q, variable);
  if (a.length !== degreeIn(p, variable) + 1 || b.length !== degreeIn(q, variable) + 1) return false;
  while (b.length > 0) {
    const inverse = modularPower(b[b.length - 1]!, PRIME - 2);
    const r = a.slice();
    while (r.length >= b.length) {
      const factor = modularProduct(r[r.length - 1]!, inverse);
      const offset = r.length - b.length;
      for (let i = 0; i < b.length; i++)
        r[offset + i] = (r[offset + i]! + PRIME - modularProduct(factor, b[i]!)) % PRIME;
      while (r.length > 0 && r[r.length - 1] === 0) r.pop();
    }
    [a, b] = [b, r];
  }
  return a.length === 1;
}

/** Coefficients mod p with the other variables at fixed, scattered values. */
function imageIn(p: Polynomial, variable: number): number[] {
  const image: number[] = [];
  for (const [monomial, value] of p.numerators) {
    let term = Number(((value % BigInt(PRIME)) + BigInt(PRIME)) % BigInt(PRIME));
    for (const v of variablesOf(Polynomial.fromIntegers([[monomial, 1n]])))
      if (v !== variable)
        term = modularProduct(
          term,
          modularPower((7919 * (v + 1) * (v + 3) + 104_729) % PRIME, powerIn(monomial, v)),
        );
    const e = powerIn(monomial, variable);
    while (image.length <= e) image.push(0);
    image[e] = (image[e]! + term) % PRIME;
  }
  while (image.length > 0 && image[image.length - 1] === 0) image.pop();
  return image;
}

function modularProduct(a: number, b: number): number {
  const t = a * b;
  return t - Math.floor(t / PRIME) * PRIME;
}

function modularPower(base: number, exponent: number): number {
  let result = 1;
  for (let b = base, e = exponent; e > 0; e = Math.floor(e / 2)) {
    if (e % 2 === 1) result = modularProduct(result, b);
    b = modularProduct(b, b);
  }
  return result;
}

export function isConstant(p: Polynomial): boolean {
  return p.size === 0 || (p.size === 1 && p.numerators.has(0n));
}

/** The largest monomial that divides every term. */
export function commonMonomial(p: Polynomial): Monomial {
  let common: Monomial | undefined;
  for (const monomial of p.numerators.keys()) {
    common = common === undefined ? monomial : monomialGcd(common, monomial);
    if (common === 0n) break;
  }
  return common ?? 0n;
}

const MASK = (1n << EXPONENT_BITS) - 1n;

function monomialGcd(a: Monomial, b: Monomial): Monomial {
  let common = 0n;
  for (
    let x = a, y = b, at = 0n;
    x !== 0n && y !== 0n;
    x >>= EXPONENT_BITS, y >>= EXPONENT_BITS, at += EXPONENT_BITS
  ) {
    const [e, f] = [x & MASK, y & MASK];
    common |= (e < f ? e : f) << at;
  }
  return common;
}

function stripped(p: Polynomial, monomial: Monomial): Polynomial {
  return monomial === 0n
    ? p
    : Polynomial.fromIntegers(
        [...p.numerators].map(([m, value]) => [m - monomial, value] as const),
        p.denominator,
      );
}

/** The distinct factors of positive degree, primitive, smallest first: their product vanishes where p does. Empty for constants. */
export function factorsOf(p: Polynomial): Polynomial[] {
  if (isConstant(p)) return [];
  const monomial = commonMonomial(p);
  const factors = variablesOf(Polynomial.fromIntegers([[monomial, 1n]])).map((v) => Polynomial.variable(v));
  for (const f of split(stripped(primitive(p), monomial)))
    if (!factors.some((g) => g.equals(f))) factors.push(f);
  return factors.sort((a, b) => a.size - b.size);
}

/** Of a primitive polynomial without a monomial factor. */
function split(p: Polynomial): Polynomial[] {
  if (isConstant(p)) return [];
  const variables = variablesOf(p).sort((a, b) => degreeIn(p, a) - degreeIn(p, b));
  for (const v of variables) {
    const content = contentIn(p, v);
    if (!isConstant(content)) return [...split(content), ...split(primitive(divideExactly(p, content)!))];
  }
  const v = variables[0]!;
  const degree = degreeIn(p, v);
  if (degree === 1) return [p];
  const repeated = polynomialGcd(p, derivative(p, v));
  if (!isConstant(repeated)) return split(primitive(divideExactly(p, repeated)!));
  if (degree === 2) return splitQuadratic(p, v) ?? [p];
  return splitByTrial(p, variables) ?? [p];
}

function splitQuadratic(p: Polynomial, v: number): Polynomial[] | undefined {
  const [c, b, a] = coefficientsIn(p, v) as [Polynomial, Polynomial, Polynomial];
  const root = squareRoot(b.times(b).minus(a.times(c).scale(rational(4n))));
  if (root === undefined) return undefined;
  const factor = a.scale(rational(2n)).times(Polynomial.variable(v)).plus(b).minus(root);
  const first = primitive(divideExactly(factor, contentIn(factor, v))!);
  return [first, primitive(divideExactly(p, first)!)];
}

/** The polynomial whose square p is, if there is one: leading term first, then term by term. */
export function squareRoot(p: Polynomial): Polynomial | undefined {
  if (p.isZero()) return p;
  const lead = leadingMonomial(p);
  const top = rootOf(p.coefficient(lead));
  for (let rest = lead; rest !== 0n; rest >>= EXPONENT_BITS) if ((rest & 1n) === 1n) return undefined;
  if (top === undefined) return undefined;
  let root = Polynomial.fromIntegers([[lead / 2n, top.numerator]], top.denominator);
  const first = root.scale(rational(2n));
  for (let terms = 0; terms <= p.size; terms++) {
    const rest = p.minus(root.times(root));
    if (rest.isZero()) return root;
    const m = leadingMonomial(rest);
    const c = rest.coefficient(m);
    const next = divideExactly(Polynomial.fromIntegers([[m, c.numerator]], c.denominator), first);
    if (next === undefined || leadingMonomial(next) >= leadingMonomial(root)) return undefined;
    root = root.plus(next);
  }
  return undefined;
}

/** Values tried for a variable besides those of other variables. */
const TRIAL_VALUES = [1n, 2n, 3n, 4n].flatMap((n) =>
  [1n, 2n, 3n].flatMap(
    (d) =>
      [
        [n, d],
        [-n, d],
      ] as [bigint, bigint][],
  ),
);

function splitByTrial(p: Polynomial, variables: readonly number[]): Polynomial[] | undefined {
  for (const v of variables) {
    const one = Polynomial.variable(v);
    for (const [n, d] of TRIAL_VALUES)
      for (const u of [-1, ...variables]) {
        if (u === v) continue;
        const value = u < 0 ? Polynomial.one : Polynomial.variable(u);
        const numerator = value.scale(rational(n));
        const denominator = Polynomial.constant(rational(d));
        if (!substitute(p, v, numerator, denominator).isZero()) continue;
        const factor = primitive(one.scale(rational(d)).minus(numerator));
        return [factor, ...split(primitive(divideExactly(p, factor)!))];
      }
  }
  for (const v of variables) {
    if (![...p.numerators.keys()].every((m) => powerIn(m, v) % 2 === 0)) continue;
    const at = BigInt(v) * EXPONENT_BITS;
    const rescaled = (q: Polynomial, times: (e: bigint) => bigint) =>
      Polynomial.fromIntegers(
        [...q.numerators].map(([m, value]) => {
          const e = BigInt(powerIn(m, v));
          return [m + ((times(e) - e) << at), value] as const;
        }),
      );
    const halves = split(primitive(rescaled(p, (e) => e / 2n)));
    if (halves.length > 1) return halves.flatMap((q) => split(primitive(rescaled(q, (e) => 2n * e))));
    const back = halves[0] && primitive(rescaled(halves[0], (e) => 2n * e));
    if (back !== undefined && degreeIn(back, v) === 2) return splitQuadratic(back, v);
  }
  return undefined;
}
