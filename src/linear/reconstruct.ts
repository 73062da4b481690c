/** From residues to rationals: Chinese remaindering and rational reconstruction, in integers throughout. */
import { gcd, type Rational } from '../algebra/rational.ts';

/** The residue modulo m·p of the number that is `a` modulo m and `b` modulo p, for coprime m and p. `mInverse` is 1/m modulo p. */
export function chineseRemainder(a: bigint, m: bigint, b: bigint, p: bigint, mInverse: bigint): bigint {
  let step = ((b - a) * mInverse) % p;
  if (step < 0n) step += p;
  return a + m * step;
}

/**
 * The one fraction n/d ≡ a (mod m) with |n|, d ≤ √(m/2) and gcd(d, m) = 1, or undefined where there is none.
 *
 * The first remainder below the bound in the extended Euclidean algorithm; unique because 2·n·d < m.
 * Method: "Reconstruction of rational numbers", Proc. SYMSAC (1981), as common practice has it. Cost: quadratic in the digits.
 */
export function rationalReconstruction(
  a: bigint,
  m: bigint,
  bound = reconstructionBound(m),
): Rational | undefined {
  let [r0, r1] = [m, ((a % m) + m) % m];
  let [t0, t1] = [0n, 1n];
  while (r1 > bound) {
    const q = r0 / r1;
    [r0, r1] = [r1, r0 - q * r1];
    [t0, t1] = [t1, t0 - q * t1];
  }
  const denominator = t1 < 0n ? -t1 : t1;
  if (denominator === 0n || denominator > bound) return undefined;
  // A common factor of the pair would divide m; then there is no fraction with this residue.
  if (r1 === 0n) return denominator === 1n ? { numerator: 0n, denominator: 1n } : undefined;
  if (gcd(r1, denominator) !== 1n) return undefined;
  return { numerator: t1 < 0n ? -r1 : r1, denominator };
}

/** ⌊√(m/2)⌋ less what strictness 2·N·D < m asks for; by Newton's iteration in integers, since a float root overflows or rounds. */
export function reconstructionBound(m: bigint): bigint {
  return integerSquareRoot((m - 1n) / 2n);
}

/** ⌊√n⌋ for n ≥ 0. */
export function integerSquareRoot(n: bigint): bigint {
  if (n < 2n) return n;
  let x = 1n << BigInt((n.toString(2).length + 1) >> 1);
  for (;;) {
    const next = (x + n / x) >> 1n;
    if (next >= x) return x;
    x = next;
  }
}
