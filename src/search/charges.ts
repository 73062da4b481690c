/**
 * From a null space modulo primes to charges with exact coefficients, in the canonical basis.
 *
 * Canonical basis: split into even and odd charges where H is reflection symmetric; in each part the reduced echelon form with
 * strings ordered by falling range, then alphabetically. So a charge's leading string has its full range and occurs in no
 * other charge of its part, and the entries are rationals that do not depend on any prime.
 */
import { gcd, lcm } from '../algebra/rational.ts';
import { reducedBasis } from '../linear/elimination.ts';
import type { Field } from '../linear/field.ts';
import { kernel } from '../linear/kernel.ts';
import { chineseRemainder, rationalReconstruction, reconstructionBound } from '../linear/reconstruct.ts';
import { type Lines, type SparseMatrix, type SparseVector, transpose } from '../linear/sparse.ts';

/** A charge as a column vector: integers without a common factor over the columns of a system, the leading one positive. */
export interface IntegerVector {
  readonly columns: readonly number[];
  readonly values: readonly bigint[];
  readonly parity: 'even' | 'odd' | null;
}

/** Columns of mirror images: `mirror[c]`, −1 where the mirror image is no column. Null without reflection symmetry. */
export type Mirror = Int32Array | null;

/** The canonical basis modulo p, with parities: even part first. */
export interface ModularBasis {
  readonly even: readonly SparseVector[];
  readonly odd: readonly SparseVector[];
  /** How the kernel was found: see `kernel`. */
  readonly steps: readonly number[];
}

/** @param steps those of another prime, to go the same way again */
export function modularBasis(
  matrix: SparseMatrix,
  mirror: Mirror,
  field: Field,
  steps?: readonly number[],
): ModularBasis {
  const { vectors, steps: taken } = kernel(matrix, field, steps);
  if (mirror === null) return { even: reducedBasis(vectors, matrix.columns, field), odd: [], steps: taken };
  const part = (sign: number) =>
    reducedBasis(
      vectors.map((v) => symmetrised(v, mirror, sign, field)),
      matrix.columns,
      field,
    );
  return { even: part(1), odd: part(field.p - 1), steps: taken };
}

/** v + sign · (mirror image of v). The null space is mirror symmetric, so its vectors have no entry without a mirror column. */
function symmetrised(
  v: SparseVector,
  mirror: Int32Array,
  sign: number,
  { p, multiply }: Field,
): SparseVector {
  const sum = new Map<number, number>();
  const put = (c: number, value: number) => void sum.set(c, ((sum.get(c) ?? 0) + value) % p);
  v.columns.forEach((c, i) => {
    put(c, v.values[i]!);
    if (mirror[c]! >= 0) put(mirror[c]!, multiply(sign, v.values[i]!));
  });
  const entries = [...sum].filter(([, value]) => value !== 0).sort((a, b) => a[0] - b[0]);
  return { columns: entries.map(([c]) => c), values: entries.map(([, value]) => value) };
}

/** Outcome of lifting: the charges, or the reason to start again from another prime. */
export type Lifted =
  | { readonly ok: true; readonly charges: IntegerVector[]; readonly primes: number[] }
  | { readonly ok: false; readonly reason: 'unlucky' };

/** Give up after so many primes for the coefficients of one search: 26 bits each. */
const MAX_PRIMES = 400;

/**
 * Lifts a basis modulo the first prime to exact integers, with as many primes as it takes, and re-multiplies every charge with
 * the integer matrix: what is returned satisfies every equation exactly.
 *
 * "Unlucky" when another prime contradicts the first: its dimension or support was too large.
 */
export function liftCharges(
  matrix: SparseMatrix,
  mirror: Mirror,
  first: { basis: ModularBasis; field: Field },
  fields: Iterator<Field>,
  onPrime: (count: number) => void,
): Lifted {
  const primes = [first.field.p];
  const shape = shapeOf(first.basis);
  const columns = transpose(
    { start: matrix.start, index: matrix.column, value: matrix.value },
    matrix.columns,
  );
  let modulus = BigInt(first.field.p);
  let residues = flatten(first.basis).map((v) => v.values.map(BigInt));
  for (;;) {
    const charges = integersOf(first.basis, residues, modulus);
    if (charges?.every((charge) => isAnnihilated(matrix, columns, charge)))
      return { ok: true, charges, primes };
    if (primes.length === MAX_PRIMES) return { ok: false, reason: 'unlucky' };
    onPrime(primes.length);
    const next = fields.next();
    if (next.done) return { ok: false, reason: 'unlucky' };
    const field = next.value;
    const basis = modularBasis(matrix, mirror, field, first.basis.steps);
    const dimension = basis.even.length + basis.odd.length;
    if (dimension < residues.length) return { ok: false, reason: 'unlucky' };
    if (shapeOf(basis) !== shape) continue;
    const p = BigInt(field.p);
    const inverse = BigInt(field.inverse(field.residue(modulus)));
    residues = flatten(basis).map((v, i) =>
      align(first.basis, i, v).map((b, j) => chineseRemainder(residues[i]![j]!, modulus, b, p, inverse)),
    );
    modulus *= p;
    primes.push(field.p);
  }
}

function flatten(basis: ModularBasis): readonly SparseVector[] {
  return [...basis.even, ...basis.odd];
}

/** Leading columns by parity: two primes whose shapes differ do not belong together. */
function shapeOf(basis: ModularBasis): string {
  return `${basis.even.map((v) => v.columns[0])}|${basis.odd.map((v) => v.columns[0])}`;
}

/** The residues of a vector on the support that the first prime found; anything outside it fails the exact check later. */
function align(first: ModularBasis, index: number, v: SparseVector): bigint[] {
  const value = new Map(v.columns.map((c, i) => [c, v.values[i]!]));
  return flatten(first)[index]!.columns.map((c) => BigInt(value.get(c) ?? 0));
}

/** Rational reconstruction of every vector over a common denominator; undefined as soon as one entry has none. */
function integersOf(basis: ModularBasis, residues: bigint[][], modulus: bigint): IntegerVector[] | undefined {
  const bound = reconstructionBound(modulus);
  const charges: IntegerVector[] = [];
  for (const [index, v] of flatten(basis).entries()) {
    // Once the common denominator D is known, D·x is an integer of small residue: no Euclid needed.
    let denominator = 1n;
    const scaled: { numerator: bigint; denominator: bigint }[] = [];
    for (const residue of residues[index]!) {
      let value = (residue * denominator) % modulus;
      if (2n * value > modulus) value -= modulus;
      if (value <= bound && -value <= bound) {
        scaled.push({ numerator: value, denominator });
        continue;
      }
      const found = rationalReconstruction(residue, modulus, bound);
      if (found === undefined) return undefined;
      denominator = lcm(denominator, found.denominator);
      if (denominator > bound) return undefined;
      scaled.push(found);
    }
    charges.push({
      columns: v.columns,
      // The leading entry is 1, so numerators over the common denominator have no common factor beyond the denominator's own.
      values: scaled.map((s) => (s.numerator * denominator) / s.denominator),
      parity: parityOf(basis, index),
    });
  }
  return charges.map(primitive);
}

function parityOf(basis: ModularBasis, index: number): IntegerVector['parity'] {
  return index < basis.even.length ? 'even' : 'odd';
}

function primitive(charge: IntegerVector): IntegerVector {
  let common = 0n;
  for (const value of charge.values) {
    common = gcd(common, value);
    if (common === 1n) return charge;
  }
  return { ...charge, values: charge.values.map((v) => v / common) };
}

/** Does every equation hold exactly? In integers, over the rows that meet the vector. */
function isAnnihilated(
  matrix: SparseMatrix,
  { start, index: row, value }: Lines,
  charge: IntegerVector,
): boolean {
  const sums = new Map<number, bigint>();
  for (const [i, column] of charge.columns.entries())
    for (let at = start[column]!; at < start[column + 1]!; at++)
      sums.set(row[at]!, (sums.get(row[at]!) ?? 0n) + charge.values[i]! * matrix.values[value[at]!]!);
  for (const sum of sums.values()) if (sum !== 0n) return false;
  return true;
}
