/**
 * Chains that are bilinear in Majorana operators: two charges of every range k ≥ 2, by an argument for all ranges at once
 * (`docs/theory.md`, lemma 9), no ladder needed.
 */
import type { BondsAndFields } from './decompose.ts';

/** Pauli letters by code, X, Y, Z. */
const AXES = [1, 3, 2];

/**
 * Is a spin-1/2 chain, after one rotation of all spins, of the form `a XX + b YY + c XY + d YX + h Z` with a bond that is not the
 * antisymmetric one alone? With J the 3×3 matrix of couplings: an axis n with J n = Jᵀn = 0 and the field along n.
 */
export function isFreeFermionic({ spins, group, bond, field }: BondsAndFields): boolean {
  if (spins !== 1 || group !== 1 || bond.isZero()) return false;
  const j = AXES.map((a) => AXES.map((b) => bond.numerators.get(BigInt(a | (b << 2))) ?? 0n));
  const w = AXES.map((a) => field.numerators.get(BigInt(a)) ?? 0n);
  if (j.every((row, a) => row.every((value, b) => value + j[b]![a]! === 0n))) return false;
  const rows = [...j, ...[0, 1, 2].map((b) => j.map((row) => row[b]!))];
  const annihilates = (n: readonly bigint[]) =>
    n.some((x) => x !== 0n) && rows.every((row) => row.reduce((s, x, i) => s + x * n[i]!, 0n) === 0n);
  // With a field the axis is the field's; without one any axis in the kernel of both will do.
  if (w.some((x) => x !== 0n)) return annihilates(w);
  return (
    rows.some((x) => rows.some((y) => annihilates(cross(x, y)))) ||
    rows.every((x) => rows.every((y) => cross(x, y).every((v) => v === 0n)))
  );
}

function cross(x: readonly bigint[], y: readonly bigint[]): bigint[] {
  return [0, 1, 2].map((i) => {
    const [a, b] = [(i + 1) % 3, (i + 2) % 3];
    return x[a]! * y[b]! - x[b]! * y[a]!;
  });
}
