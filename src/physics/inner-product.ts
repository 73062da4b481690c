/**
 * The inner product of translation-invariant sums at infinite temperature, per cell.
 *
 * For A = Σ_j τ_j(a) and B = Σ_j τ_j(b): `(A|B) = lim ⟨A B⟩ / L`, with `⟨·⟩ = tr(·)/2^N`. Pauli strings are orthonormal under ⟨· ·⟩, so
 * it is the sum of products of coefficients of representatives. With a magnetisation the state is the product state in which
 * every spin has ⟨Z⟩ = μ, and the product is the symmetrised connected one, `Σ_d ½⟨{a, τ_d b}⟩ − ⟨a⟩⟨b⟩`; it is stationary, as
 * the bounds need, only where ΣZ is conserved.
 */
import type { Operator } from '../algebra/operator.ts';
import { multiply, ONE, type Rational, rational } from '../algebra/rational.ts';
import { letterCounts, product, type Word } from '../algebra/word.ts';
import type { Chain } from '../lattice/chain.ts';

export function innerProduct(chain: Chain, a: Operator, b: Operator, magnetisation?: Rational): Rational {
  const [p, q] = [chain.normalise(a), chain.normalise(b)];
  if (magnetisation === undefined || magnetisation.numerator === 0n) {
    let sum = 0n;
    for (const [word, value] of p.numerators) sum += value * (q.numerators.get(word) ?? 0n);
    return rational(sum, p.denominator * q.denominator);
  }
  // Powers of μ collect integers; one exact evaluation at the end.
  const byPower = new Map<number, bigint>();
  const put = (power: number, value: bigint) => void byPower.set(power, (byPower.get(power) ?? 0n) + value);
  for (const [w, x] of p.numerators) {
    const range = chain.range(w);
    for (const [v, y] of q.numerators) {
      const other = chain.range(v);
      const left = chain.translate(w, other - 1);
      for (let d = 0; d < range + other - 1; d++) {
        const { word, phase } = product(left, chain.translate(v, d));
        const power = zPower(word);
        // Strings that anticommute cancel in the symmetrised product; phase is then 1 or 3.
        if (power >= 0 && (phase & 1) === 0) put(power, phase === 0 ? x * y : -x * y);
        const [m, n] = [zPower(w), zPower(v)];
        if (m >= 0 && n >= 0) put(m + n, -x * y);
      }
    }
  }
  let sum = rational(0n);
  for (const [power, value] of byPower) {
    let term = rational(value);
    for (let i = 0; i < power; i++) term = multiply(term, magnetisation);
    sum = rational(
      sum.numerator * term.denominator + term.numerator * sum.denominator,
      sum.denominator * term.denominator,
    );
  }
  return multiply(sum, rational(ONE.numerator, p.denominator * q.denominator));
}

/** ⟨word⟩ = μ^power in the product state; −1 where it vanishes. */
function zPower(word: Word): number {
  const [x, y, z] = letterCounts(word);
  return x + y === 0 ? z : -1;
}
