/** Polynomials in one variable and diagonal forms: planted roots, planted ranks, division with remainder. */
import { expect } from 'vitest';
import { rational } from '../../src/algebra/rational.ts';
import { diagonalForm } from '../../src/linear/diagonal.ts';
import {
  addMultiple,
  degree,
  divideUnivariate,
  evaluate,
  greatestCommonDivisor,
  integerRoots,
  timesUnivariate,
  type Univariate,
  univariate,
  univariateOf,
} from '../../src/linear/univariate.ts';
import { property, type Random } from '../support/random.ts';

function anyPolynomial(random: Random, most: number): Univariate {
  return univariate(Array.from({ length: random.integer(0, most + 1) }, () => random.rational()));
}

property('a = q b + r with r of smaller degree', 200, (random) => {
  const [a, b] = [anyPolynomial(random, 6), anyPolynomial(random, 4)];
  if (b.length === 0) return;
  const { quotient, remainder } = divideUnivariate(a, b);
  expect(degree(remainder)).toBeLessThan(degree(b));
  expect(addMultiple(timesUnivariate(quotient, b), remainder, rational(1n))).toEqual(a);
});

property('a planted common factor divides the greatest common divisor', 100, (random) => {
  const common = anyPolynomial(random, 3);
  if (common.length === 0) return;
  const [a, b] = [anyPolynomial(random, 3), anyPolynomial(random, 3)].map((x) => timesUnivariate(x, common));
  const divisor = greatestCommonDivisor(a!, b!);
  if (divisor.length === 0) return;
  expect(divideUnivariate(divisor, common).remainder).toEqual([]);
});

property('integer roots are those that were planted, large and multiple ones included', 150, (random) => {
  const roots = Array.from({ length: random.integer(0, 4) }, () =>
    random.chance(0.2) ? random.big(80) : BigInt(random.integer(-5, 9)),
  );
  // Without real roots, or with one that is no integer.
  let p = random.chance(0.5) ? univariateOf(1, 0, random.integer(1, 5)) : univariateOf(-1, 2);
  for (const r of roots) p = timesUnivariate(p, univariateOf(-r, 1n));
  const expected = [...new Set(roots)].filter((r) => r >= 0n).sort((x, y) => (x < y ? -1 : 1));
  expect(integerRoots(p, 0n)).toEqual(expected);
});

property('a diagonal form has the rank of the matrix at every point', 60, (random) => {
  const [rows, columns] = [random.integer(0, 4), random.integer(1, 4)];
  const matrix = Array.from({ length: rows }, () =>
    Array.from({ length: columns }, () => (random.chance(0.6) ? anyPolynomial(random, 2) : [])),
  );
  const diagonal = diagonalForm(matrix);
  for (let t = -3; t <= 3; t++) {
    const at = rational(BigInt(t));
    const constant = matrix.map((row) => row.map((p) => univariate([evaluate(p, at)])));
    const rank = diagonal.filter((p) => evaluate(p, at).numerator !== 0n).length;
    expect(rank).toBe(diagonalForm(constant).length);
  }
});
