/**
 * A case of a family: conditions on its real parameters, kept so that a coefficient can be reduced to a form that is zero only
 * if it vanishes identically on the case.
 *
 * Equations of degree one in a parameter are solved for it and gone; the others form a triangular set (one a main variable, with a
 * leading coefficient that is known non-zero) and reduce by pseudo-division. A new condition splits the case where it must: by its
 * factors, by a leading coefficient that may vanish, by Euclid's algorithm where two conditions share a main variable.
 * Method: triangular sets with dynamic evaluation, as in textbooks; common practice, no source.
 */
import { Polynomial } from '../../algebra/polynomial.ts';
import {
  coefficientsIn,
  degreeIn,
  divideExactly,
  powerIn,
  primitive,
  pseudoRemainder,
  substitute,
  totalDegree,
  variablesOf,
} from '../../algebra/polynomial-division.ts';
import { factorsOf, isConstant } from '../../algebra/polynomial-factor.ts';
import { add, divide, multiply, ONE, type Rational } from '../../algebra/rational.ts';

/** A parameter that an equation gave away: numerator / denominator in the free parameters, the denominator known non-zero. */
export interface Solved {
  readonly variable: number;
  readonly numerator: Polynomial;
  readonly denominator: Polynomial;
}

export interface Case {
  readonly solved: readonly Solved[];
  /** Carried equations in the free parameters, rising main variable; none is of degree one in its main variable. */
  readonly carried: readonly Polynomial[];
  /** Known non-zero: primitive, factored, in the free parameters, reduced. */
  readonly nonZero: readonly Polynomial[];
}

export const EVERYWHERE: Case = { solved: [], carried: [], nonZero: [] };

/** The highest variable. */
export function mainVariable(p: Polynomial): number {
  return variablesOf(p).at(-1) ?? -1;
}

/** p on the case times something non-zero: free parameters only, reduced by the carried equations, primitive. Zero if p vanishes on the case. */
export function reduceOn(where: Case, p: Polynomial): Polynomial {
  let q = p;
  for (const { variable, numerator, denominator } of where.solved)
    q = substitute(q, variable, numerator, denominator);
  for (let i = where.carried.length - 1; i >= 0; i--) {
    const equation = where.carried[i]!;
    q = pseudoRemainder(q, equation, mainVariable(equation)).remainder;
  }
  return primitive(q);
}

/** The part of the case where p ≠ 0; undefined where that is nowhere. */
export function exclude(where: Case, p: Polynomial): Case | undefined {
  const q = reduceOn(where, p);
  if (q.isZero()) return undefined;
  const fresh = factorsOf(q).filter((f) => !where.nonZero.some((g) => g.equals(f)));
  return fresh.length === 0 ? where : { ...where, nonZero: [...where.nonZero, ...fresh] };
}

/** The part of the case where p = 0, as disjoint cases; empty where there is none. */
export function impose(where: Case, p: Polynomial): Case[] {
  const q = reduceOn(where, p);
  if (q.isZero()) return [where];
  const cases: Case[] = [];
  let rest: Case | undefined = where;
  for (const factor of openFactors(where, q)) {
    cases.push(...imposeFactor(rest, factor));
    rest = exclude(rest, factor);
    if (rest === undefined) break;
  }
  return cases;
}

export function imposeAll(where: Case, equations: readonly Polynomial[]): Case[] {
  return equations.reduce<Case[]>((cases, p) => cases.flatMap((c) => impose(c, p)), [where]);
}

/** The factors of a reduced polynomial that are not known to be non-zero. */
export function openFactors({ nonZero }: Case, q: Polynomial): Polynomial[] {
  return factorsOf(q).filter((f) => !nonZero.some((g) => g.equals(f)));
}

function imposeFactor(where: Case, f: Polynomial): Case[] {
  const forms = realZeros(f);
  if (forms !== undefined) return forms === 'none' ? [] : imposeAll(where, forms);
  // Degree one in a parameter: a constant coefficient first, then a known one, then the simplest.
  const linear = variablesOf(f)
    .filter((v) => degreeIn(f, v) === 1)
    .map((v) => ({ v, coefficient: coefficientsIn(f, v)[1]! }))
    .map((l) => ({
      ...l,
      known: isConstant(l.coefficient) || openFactors(where, l.coefficient).length === 0,
    }));
  const rank = (l: (typeof linear)[number]) =>
    (l.known ? 0 : 1000) +
    (isConstant(l.coefficient) ? 0 : 100) +
    totalDegree(l.coefficient) * 10 +
    l.coefficient.size;
  linear.sort((a, b) => rank(a) - rank(b) || b.v - a.v);
  const best = linear[0];
  const v = best?.v ?? mainVariable(f);
  const coefficients = coefficientsIn(f, v);
  const initial = coefficients.at(-1)!;
  if (!isConstant(initial) && openFactors(where, initial).length > 0) {
    const tail = f.minus(initial.times(powerOf(v, coefficients.length - 1)));
    const vanishing = impose(where, initial).flatMap((c) => impose(c, tail));
    const rest = exclude(where, initial);
    return rest === undefined ? vanishing : [...vanishing, ...impose(rest, f)];
  }
  if (best !== undefined) return solve(where, v, coefficients[0]!, initial);
  return carry(where, v, f);
}

function powerOf(v: number, e: number): Polynomial {
  let p = Polynomial.one;
  for (let i = 0; i < e; i++) p = p.times(Polynomial.variable(v));
  return p;
}

/** Solves initial · v + constant = 0 with a known initial: v leaves every condition. */
function solve(where: Case, variable: number, constant: Polynomial, initial: Polynomial): Case[] {
  const numerator = constant.scale({ numerator: -1n, denominator: 1n });
  const into = (p: Polynomial) => substitute(p, variable, numerator, initial);
  const solved: Solved[] = where.solved.map((s) => {
    const degree = Math.max(degreeIn(s.numerator, variable), degreeIn(s.denominator, variable));
    return lowestTerms(
      s.variable,
      substitute(s.numerator, variable, numerator, initial, degree),
      substitute(s.denominator, variable, numerator, initial, degree),
    );
  });
  solved.push(lowestTerms(variable, numerator, initial));
  let cases: Case[] = [{ solved, carried: [], nonZero: [] }];
  const keep = (p: Polynomial) => {
    cases = cases.flatMap((c) => exclude(c, into(p)) ?? []);
  };
  where.nonZero.forEach(keep);
  for (const equation of where.carried) cases = cases.flatMap((c) => impose(c, into(equation)));
  // Reduction by the carried equations may show a non-zero condition to be violated.
  if (where.carried.length > 0) where.nonZero.forEach(keep);
  return cases;
}

function lowestTerms(variable: number, numerator: Polynomial, denominator: Polynomial): Solved {
  // Common factors of both are powers of known initials: exact division by factors of the denominator finds them.
  let [n, d] = [numerator, denominator];
  for (const f of factorsOf(d))
    for (;;) {
      const [a, b] = [divideExactly(n, f), divideExactly(d, f)];
      if (a === undefined || b === undefined) break;
      [n, d] = [a, b];
    }
  const constant = d.asConstant();
  return constant === undefined
    ? { variable, numerator: n, denominator: d }
    : { variable, numerator: n.scale(divide(ONE, constant)), denominator: Polynomial.one };
}

/** Adds an equation with a known leading coefficient to the triangular set. */
function carry(where: Case, variable: number, f: Polynomial): Case[] {
  const same = where.carried.find((q) => mainVariable(q) === variable);
  const others = where.carried.filter((q) => q !== same);
  if (same !== undefined) {
    // Euclid: f has the lower degree, being reduced; {f = same = 0} = {f = remainder = 0}.
    const { remainder } = pseudoRemainder(same, f, variable);
    return rebuilt({ ...where, carried: others }, [f]).flatMap((c) => impose(c, remainder));
  }
  const above = others.filter((q) => mainVariable(q) > variable);
  const below = others.filter((q) => mainVariable(q) < variable);
  const next: Case = { ...where, carried: [...below, f], nonZero: [] };
  let cases: Case[] = [next];
  const keep = (p: Polynomial) => {
    cases = cases.flatMap((c) => exclude(c, p) ?? []);
  };
  where.nonZero.forEach(keep);
  for (const q of above) cases = cases.flatMap((c) => impose(c, q));
  if (above.length > 0) where.nonZero.forEach(keep);
  return cases;
}

function rebuilt(where: Case, equations: readonly Polynomial[]): Case[] {
  let cases = imposeAll({ ...where, carried: [], nonZero: [] }, []);
  const keep = (p: Polynomial) => {
    cases = cases.flatMap((c) => exclude(c, p) ?? []);
  };
  where.nonZero.forEach(keep);
  for (const q of [...where.carried, ...equations].sort((a, b) => mainVariable(a) - mainVariable(b)))
    cases = cases.flatMap((c) => impose(c, q));
  where.nonZero.forEach(keep);
  return cases;
}

/**
 * Simple means over the reals. A polynomial with even powers and coefficients of one sign vanishes where all its monomials do; a
 * semi-definite quadratic form (homogenised by a constant) where its linear forms do. Undefined where neither applies.
 */
export function realZeros(f: Polynomial): Polynomial[] | 'none' | undefined {
  const entries = [...f.numerators];
  const positive = entries[0]![1] > 0n;
  const variables = variablesOf(f);
  if (
    entries.every(([m, value]) => value > 0n === positive && variables.every((v) => powerIn(m, v) % 2 === 0))
  ) {
    if (f.numerators.has(0n)) return 'none';
    return entries.map(([m]) =>
      variables.reduce((p, v) => (powerIn(m, v) > 0 ? p.times(Polynomial.variable(v)) : p), Polynomial.one),
    );
  }
  return totalDegree(f) === 2 ? semiDefiniteZeros(f, variables) : undefined;
}

/** Lagrange's reduction: f = Σ d_i l_i²; definite when all d_i have one sign. The constant counts as one more variable. */
function semiDefiniteZeros(f: Polynomial, variables: readonly number[]): Polynomial[] | 'none' | undefined {
  const size = variables.length + 1;
  const basis = [...variables.map((v) => Polynomial.variable(v)), Polynomial.one];
  const matrix: Rational[][] = basis.map((a, i) =>
    basis.map((b, j) => {
      const [monomial] = a.times(b).numerators.keys();
      const c = f.coefficient(monomial!);
      return i === j ? c : divide(c, { numerator: 2n, denominator: 1n });
    }),
  );
  const forms: Polynomial[] = [];
  let sign = 0;
  for (let step = 0; step < size; step++) {
    const pivot = matrix.findIndex((row, i) => row[i]!.numerator !== 0n);
    if (pivot < 0) {
      if (matrix.some((row) => row.some((c) => c.numerator !== 0n))) return undefined;
      break;
    }
    const d = matrix[pivot]![pivot]!;
    const own = d.numerator > 0n ? 1 : -1;
    if (sign !== 0 && own !== sign) return undefined;
    sign = own;
    const row = matrix[pivot]!.slice();
    forms.push(row.reduce((p, c, j) => p.plus(basis[j]!.scale(divide(c, d))), Polynomial.zero));
    for (let i = 0; i < size; i++)
      for (let j = 0; j < size; j++)
        matrix[i]![j] = add(matrix[i]![j]!, {
          numerator: -multiply(divide(row[i]!, d), row[j]!).numerator,
          denominator: multiply(divide(row[i]!, d), row[j]!).denominator,
        });
  }
  // One square alone is no condition that the factors would not have given.
  if (forms.length < 2) return forms.length === 1 && isConstant(forms[0]!) ? 'none' : undefined;
  return forms.some((l) => isConstant(l) && !l.isZero()) ? 'none' : forms;
}

/** All equations of the case, primitive, in the given parameters: the solved ones multiplied out, then the carried ones. */
export function equationsOf({ solved, carried }: Case): Polynomial[] {
  return [
    ...[...solved]
      .sort((a, b) => a.variable - b.variable)
      .map((s) => primitive(s.denominator.times(Polynomial.variable(s.variable)).minus(s.numerator))),
    ...carried,
  ];
}

/** The point of the case at values of its free parameters: solved parameters follow. */
export function completePoint({ solved }: Case, free: readonly Rational[]): Rational[] {
  const point = [...free];
  for (const s of solved)
    point[s.variable] = divide(s.numerator.evaluate(free), s.denominator.evaluate(free));
  return point;
}

/** Does the point satisfy every condition of the case? Exact. */
export function contains(where: Case, point: readonly Rational[]): boolean {
  return (
    where.nonZero.every((p) => p.evaluate(point).numerator !== 0n) &&
    equationsOf(where).every((p) => p.evaluate(point).numerator === 0n)
  );
}
