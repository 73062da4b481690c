/** The trace product of operators: Pauli strings are orthonormal. Bases stay rational, since nothing is divided by a length. */
import type { Operator } from '../algebra/operator.ts';

/** Trace product over the trace of the identity, times the denominators of both. */
export function traceProduct(x: Operator, y: Operator): bigint {
  let sum = 0n;
  for (const [word, value] of x.numerators) sum += value * (y.numerators.get(word) ?? 0n);
  return sum;
}

/** An orthogonal basis of the span, integer and primitive. */
export function orthogonalBasis(vectors: readonly Operator[]): Operator[] {
  const basis: Operator[] = [];
  for (const vector of vectors) {
    const rest = orthogonalTo(basis, vector);
    if (!rest.isZero()) basis.push(rest);
  }
  return basis;
}

/** The part of x orthogonal to an orthogonal basis: a primitive integer multiple of it, or zero. */
function orthogonalTo(basis: readonly Operator[], x: Operator): Operator {
  let rest = x;
  for (const e of basis) {
    const part = traceProduct(e, rest);
    if (part !== 0n) rest = rest.times(traceProduct(e, e)).minus(e.times(part));
  }
  return rest.isZero() ? rest : rest.primitive([...rest.numerators.keys()][0]!);
}

/** The orthogonal projection of x to the span of an orthogonal basis of integer operators, exact. */
export function projection(basis: readonly Operator[], x: Operator): Operator {
  return basis.reduce((sum, e) => {
    const factor = traceProduct(e, x);
    const denominator = traceProduct(e, e) * x.denominator;
    return factor === 0n ? sum : sum.plus(e.times({ numerator: factor, denominator }));
  }, x.minus(x));
}
