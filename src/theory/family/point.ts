/** Points of a case: random ones modulo a prime, for proposals, and small rational ones, as witnesses that it is not empty. */
import type { Polynomial } from '../../algebra/polynomial.ts';
import { coefficientsIn, powerIn, variablesOf } from '../../algebra/polynomial-division.ts';
import { type Rational, rational } from '../../algebra/rational.ts';
import type { Field } from '../../linear/field.ts';
import { type Case, completePoint, contains, mainVariable } from './case.ts';

/** p at a point modulo a prime. Its denominator must not vanish there: primes in use are larger than any that a formula names. */
export function residueAt(p: Polynomial, point: readonly number[], field: Field): number {
  let sum = 0;
  const variables = variablesOf(p);
  for (const [monomial, value] of p.numerators) {
    let term = field.residue(value);
    for (const v of variables)
      for (let e = powerIn(monomial, v); e > 0; e--) term = field.multiply(term, point[v]!);
    sum = (sum + term) % field.p;
  }
  return p.denominator === 1n ? sum : field.multiply(sum, field.inverse(field.residue(p.denominator)));
}

/** Attempts at a point before the prime is given up: a carried equation has a root at about every other one. */
const ATTEMPTS = 60;

/** A point of the case modulo p: one value a parameter, solved ones left 0. Undefined when none was found. */
export function modularPoint(
  where: Case,
  parameters: number,
  field: Field,
  random: () => number,
): number[] | undefined {
  for (let attempt = 0; attempt < ATTEMPTS; attempt++) {
    const point = Array.from({ length: parameters }, () => 1 + Math.floor(random() * (field.p - 1)));
    for (const { variable } of where.solved) point[variable] = 0;
    const complete = where.carried.every((equation) => {
      const v = mainVariable(equation);
      const root = rootOf(
        coefficientsIn(equation, v).map((c) => residueAt(c, point, field)),
        field,
        random,
      );
      if (root === undefined) return false;
      point[v] = root;
      return true;
    });
    if (complete && where.nonZero.every((p) => residueAt(p, point, field) !== 0)) return point;
  }
  return undefined;
}

type Dense = number[];

/** A root in GF(p) of a polynomial with the given coefficients, lowest first, if there is one. Method: Rabin's, common practice. */
function rootOf(coefficients: readonly number[], field: Field, random: () => number): number | undefined {
  const { p, multiply, inverse } = field;
  const f = trimmed(coefficients.slice());
  if (f.length < 2) return undefined;
  // The product of the linear factors of f: gcd(x^p − x, f).
  const xp = powerModulo([0, 1], p, f, field);
  let g = gcdOf(f, trimmed(minus(xp, [0, 1], p)), field);
  for (let attempt = 0; g.length > 2 && attempt < 40; attempt++) {
    const shifted = powerModulo([Math.floor(random() * p), 1], (p - 1) / 2, g, field);
    const h = gcdOf(g, trimmed(minus(shifted, [1], p)), field);
    if (h.length > 1 && h.length < g.length) g = h;
  }
  return g.length === 2 ? multiply(p - g[0]!, inverse(g[1]!)) % p : undefined;
}

function trimmed(f: Dense): Dense {
  while (f.length > 0 && f.at(-1) === 0) f.pop();
  return f;
}

function minus(a: Dense, b: Dense, p: number): Dense {
  return Array.from({ length: Math.max(a.length, b.length) }, (_, i) => ((a[i] ?? 0) + p - (b[i] ?? 0)) % p);
}

function remainderOf(a: Dense, f: Dense, { p, multiply, inverse }: Field): Dense {
  const r = trimmed(a.slice());
  const scale = inverse(f.at(-1)!);
  while (r.length >= f.length) {
    const factor = multiply(r.at(-1)!, scale);
    const offset = r.length - f.length;
    for (let i = 0; i < f.length; i++) r[offset + i] = (r[offset + i]! + p - multiply(factor, f[i]!)) % p;
    trimmed(r);
  }
  return r;
}

function gcdOf(a: Dense, b: Dense, field: Field): Dense {
  let [x, y] = [a, b];
  while (y.length > 0) [x, y] = [y, remainderOf(x, y, field)];
  return x;
}

function powerModulo(base: Dense, exponent: number, f: Dense, field: Field): Dense {
  const times = (a: Dense, b: Dense): Dense => {
    const product: Dense = new Array<number>(Math.max(0, a.length + b.length - 1)).fill(0);
    a.forEach((x, i) => {
      b.forEach((y, j) => {
        product[i + j] = (product[i + j]! + field.multiply(x, y)) % field.p;
      });
    });
    return remainderOf(product, f, field);
  };
  let result: Dense = [1];
  let b = remainderOf(base, f, field);
  for (let e = exponent; e > 0; e = Math.floor(e / 2)) {
    if (e % 2 === 1) result = times(result, b);
    b = times(b, b);
  }
  return result;
}

/** A small rational point of the case: proof that it is not empty. Undefined when a carried equation hides them. */
export function rationalPoint(where: Case, parameters: number, random: () => number): Rational[] | undefined {
  for (let attempt = 0; attempt < 400; attempt++) {
    const height = 3 + Math.floor(attempt / 10);
    const draw = () => {
      const n = 1 + Math.floor(random() * height);
      return rational(
        BigInt(random() < 0.4 ? -n : n),
        BigInt(random() < 0.6 ? 1 : 1 + Math.floor(random() * 3)),
      );
    };
    const free = Array.from({ length: parameters }, draw);
    for (const { variable } of where.solved) free[variable] = rational(0n);
    const complete = where.carried.every((equation) => {
      const v = mainVariable(equation);
      const root = rationalRoots(coefficientsIn(equation, v).map((c) => c.evaluate(free)))[0];
      if (root === undefined) return false;
      free[v] = root;
      return true;
    });
    if (!complete || where.nonZero.some((p) => p.evaluate(free).numerator === 0n)) continue;
    const point = completePoint(where, free);
    if (contains(where, point)) return point;
  }
  return undefined;
}

/** Rational roots p/q with |p|, q up to a bound, by trial: witnesses need no more. Coefficients lowest first. */
function rationalRoots(coefficients: readonly Rational[]): Rational[] {
  const denominator = coefficients.reduce((d, c) => d * c.denominator, 1n);
  const integers = coefficients.map((c) => (c.numerator * denominator) / c.denominator);
  const roots: Rational[] = [];
  for (let q = 1n; q <= 12n; q++)
    for (let n = -60n; n <= 60n; n++) {
      let value = 0n;
      let scale = 1n;
      for (let i = integers.length - 1; i >= 0; i--) {
        value = value * n + integers[i]! * scale;
        scale *= q;
      }
      if (value === 0n) roots.push(rational(n, q));
    }
  return roots;
}

/** A seeded generator of numbers in [0, 1): proposals must not differ from run to run. */
export function seededRandom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}
