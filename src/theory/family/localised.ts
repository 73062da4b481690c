/**
 * Coefficients on a case: polynomials in the free parameters, with the case's known non-zero polynomials inverted.
 *
 * A coefficient is a numerator times integer powers of the units; numerators are kept free of units and reduced by the carried
 * equations, so that it is zero exactly when its numerator is. Products of units, the bulk of a run, only add exponents. Every
 * coefficient also carries its value at one random point of the case modulo a prime: a non-zero value proves it non-zero.
 */
import { type Monomial, Polynomial } from '../../algebra/polynomial.ts';
import {
  coefficientsIn,
  divideExactly,
  powerIn,
  pseudoRemainder,
  variablesOf,
} from '../../algebra/polynomial-division.ts';
import { commonMonomial, factorsOf, isConstant } from '../../algebra/polynomial-factor.ts';
import { divide, ONE, rational } from '../../algebra/rational.ts';
import type { Field } from '../../linear/field.ts';
import { type Case, mainVariable } from './case.ts';
import { residueAt } from './point.ts';

export interface Coefficient {
  readonly numerator: Polynomial;
  /** Exponents of the units, by their place in `Localisation.units`; missing ones are 0. */
  readonly powers: readonly number[];
  /** At the shadow point. */
  readonly value: number;
}

export class Localisation {
  readonly units: Polynomial[] = [];
  /** Each unit at a fixed integer point. */
  readonly #samples: bigint[] = [];
  /** Unit index of a variable that is a unit itself. */
  readonly #unitOf = new Map<number, number>();
  readonly #carried: readonly { equation: Polynomial; variable: number }[];
  /** Leading coefficients of the carried equations. */
  readonly #initials: Coefficient[] = [];
  readonly one: Coefficient;
  readonly zero: Coefficient = { numerator: Polynomial.zero, powers: [], value: 0 };

  constructor(
    where: Case,
    readonly field: Field,
    /** A value for every free parameter, on the case. */
    readonly point: readonly number[],
  ) {
    this.one = { numerator: Polynomial.one, powers: [], value: 1 };
    for (const unit of where.nonZero) this.addUnit(unit);
    this.#carried = where.carried
      .map((equation) => ({ equation, variable: mainVariable(equation) }))
      .reverse();
    // Lowest main variable first: a leading coefficient is reduced by the equations below it.
    for (let i = this.#carried.length - 1; i >= 0; i--) {
      const { equation, variable } = this.#carried[i]!;
      this.#initials[i] = this.of(coefficientsIn(equation, variable).at(-1)!);
    }
  }

  /** False when the unit vanishes at the shadow point, which then is no point of the case. */
  addUnit(unit: Polynomial): boolean {
    const value = residueAt(unit, this.point, this.field);
    if (value === 0) return false;
    const [variable] = variablesOf(unit);
    if (unit.size === 1 && variable !== undefined) this.#unitOf.set(variable, this.units.length);
    this.units.push(unit);
    this.#samples.push(integerValue(unit));
    return true;
  }

  of(p: Polynomial): Coefficient {
    return this.#normalised(p, [], residueAt(p, this.point, this.field));
  }

  negative(a: Coefficient): Coefficient {
    return {
      numerator: a.numerator.scale(rational(-1n)),
      powers: a.powers,
      value: a.value === 0 ? 0 : this.field.p - a.value,
    };
  }

  times(a: Coefficient, b: Coefficient): Coefficient {
    const value = this.field.multiply(a.value, b.value);
    const powers = addPowers(a.powers, b.powers);
    if (a.numerator === Polynomial.one) return { numerator: b.numerator, powers, value };
    if (b.numerator === Polynomial.one) return { numerator: a.numerator, powers, value };
    const numerator = a.numerator.times(b.numerator);
    // A product of unit-free numerators is unit-free; it may need reduction, and after that a look for units.
    return this.#carried.length > 0 && !isConstant(a.numerator) && !isConstant(b.numerator)
      ? this.#normalised(numerator, powers, value)
      : { numerator, powers, value };
  }

  sum(parts: readonly Coefficient[]): Coefficient {
    if (parts.length === 0) return this.zero;
    if (parts.length === 1) return parts[0]!;
    const width = Math.max(...parts.map((c) => c.powers.length));
    const least: number[] = [];
    for (let u = 0; u < width; u++) least.push(Math.min(...parts.map((c) => c.powers[u] ?? 0)));
    let value = 0;
    let numerator = Polynomial.zero;
    for (const part of parts) {
      value = (value + part.value) % this.field.p;
      let term = part.numerator;
      for (let u = 0; u < width; u++)
        for (let e = (part.powers[u] ?? 0) - least[u]!; e > 0; e--) term = term.times(this.units[u]!);
      numerator = numerator.plus(term);
    }
    return this.#normalised(numerator, least, value);
  }

  /** A product of units and a constant: it vanishes nowhere on the case. False says that this is not known. */
  isUnit(a: Coefficient): boolean {
    return a.numerator.size === 1 && isConstant(a.numerator);
  }

  /** −b/a for a unit a. */
  minusRatio(b: Coefficient, a: Coefficient): Coefficient {
    const inverse: Coefficient = {
      numerator: Polynomial.constant(divide(ONE, a.numerator.asConstant()!)),
      powers: a.powers.map((e) => -e),
      value: this.field.inverse(a.value),
    };
    return this.negative(this.times(b, inverse));
  }

  /** The same coefficient once units that were added later have been taken out. */
  renewed(a: Coefficient): Coefficient {
    return this.#normalised(a.numerator, a.powers, a.value);
  }

  /** Numerators over the smallest common product of units: polynomials. */
  withoutDenominators(all: readonly Coefficient[]): Polynomial[] {
    const least = this.units.map((_, u) => Math.min(...all.map((c) => c.powers[u] ?? 0)));
    return all.map((c) => {
      let p = c.numerator;
      this.units.forEach((unit, u) => {
        for (let e = (c.powers[u] ?? 0) - least[u]!; e > 0; e--) p = p.times(unit);
      });
      return p;
    });
  }

  #normalised(numerator: Polynomial, powers: readonly number[], value: number): Coefficient {
    if (numerator.isZero()) return this.zero;
    let p = numerator;
    let exponents = powers;
    let added: number[] | undefined;
    for (let i = 0; i < this.#carried.length; i++) {
      const { equation, variable } = this.#carried[i]!;
      const { remainder, power } = pseudoRemainder(p, equation, variable);
      p = remainder;
      if (power === 0) continue;
      const initial = this.#initials[i]!;
      exponents = addPowers(
        exponents,
        initial.powers.map((e) => -e * power),
      );
      const constant = divide(ONE, initial.numerator.asConstant()!);
      for (let e = 0; e < power; e++) p = p.scale(constant);
    }
    if (p.isZero()) return this.zero;
    if (isConstant(p))
      return { numerator: p.equals(Polynomial.one) ? Polynomial.one : p, powers: exponents, value };
    const add = (u: number, e: number) => {
      added ??= exponents.slice();
      while (added.length <= u) added.push(0);
      added[u]! += e;
    };
    const monomial = commonMonomial(p);
    if (monomial !== 0n) {
      let out = 0n;
      for (const [v, u] of this.#unitOf) {
        const e = powerIn(monomial, v);
        if (e === 0) continue;
        add(u, e);
        out += [...this.units[u]!.numerators.keys()][0]! * BigInt(e);
      }
      if (out !== 0n)
        p = Polynomial.fromIntegers(
          [...p.numerators].map(([m, c]) => [m - out, c] as const),
          p.denominator,
        );
    }
    let sample = p.size > 1 ? integerValue(p) : 0n;
    for (let u = 0; u < this.units.length && p.size > 1; u++) {
      const unit = this.units[u]!;
      if (unit.size === 1 || unit.size > p.size * 4) continue;
      const own = this.#samples[u]!;
      // A divisor divides at every integer point: most units are ruled out by one.
      while (own === 0n || sample % own === 0n) {
        const quotient = divideExactly(p, unit);
        if (quotient === undefined) break;
        p = quotient;
        sample = integerValue(p);
        add(u, 1);
      }
    }
    return { numerator: p.equals(Polynomial.one) ? Polynomial.one : p, powers: added ?? exponents, value };
  }

  /** The factors of a coefficient that are not units. */
  openFactors(a: Coefficient): Polynomial[] {
    return factorsOf(a.numerator).filter((f) => !this.units.some((u) => u.equals(f)));
  }
}

function addPowers(a: readonly number[], b: readonly number[]): readonly number[] {
  if (a.length === 0) return b;
  if (b.length === 0) return a;
  const sum: number[] = [];
  for (let i = 0; i < a.length || i < b.length; i++) sum.push((a[i] ?? 0) + (b[i] ?? 0));
  return sum;
}

/** The numerators of a polynomial at a fixed integer point with large, unrelated coordinates. */
function integerValue(p: Polynomial): bigint {
  let sum = 0n;
  for (const [monomial, value] of p.numerators) sum += value * valueOfMonomial(monomial);
  return sum;
}

const COORDINATES = [1_009n, 2_003n, 3_511n, 4_801n, 6_007n, 7_109n, 8_209n, 9_311n];
const MONOMIAL_VALUES = new Map<Monomial, bigint>([[0n, 1n]]);

function valueOfMonomial(monomial: Monomial): bigint {
  const known = MONOMIAL_VALUES.get(monomial);
  if (known !== undefined) return known;
  let value = 1n;
  for (const v of variablesOf(Polynomial.fromIntegers([[monomial, 1n]])))
    value *=
      (COORDINATES[v % COORDINATES.length]! + BigInt(Math.floor(v / COORDINATES.length))) **
      BigInt(powerIn(monomial, v));
  if (MONOMIAL_VALUES.size > 100_000) MONOMIAL_VALUES.clear();
  MONOMIAL_VALUES.set(monomial, value);
  return value;
}
