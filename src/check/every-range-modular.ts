/**
 * Certificates of the kind `every-range-modular`: the bound of `every-range` for cells whose functionals on four cells are too many
 * to list. The pencil is computed modulo the prime of the evidence and must keep its rank at every element of GF(p), except at
 * one negative integer t, a root that exact witnesses show to be there over the rationals already: for most models t = −2, and H is
 * the witness. Numbers such as M2 are those of docs/certificate.md, "Kind `every-range-modular`".
 */
import { fields, list, Malformed, Rejected, string, type Value } from './document.ts';
import {
  type Density,
  density,
  type EveryRangeClaim,
  provenTopParts,
  readEveryRange,
  type Steps,
} from './every-range.ts';
import type { Parts } from './exhaustive.ts';
import { Echelon, imageOfGrowth, modulo, type Row } from './growth.ts';
import { inverse, multiply, residue } from './modular.ts';

export const EVERY_RANGE_MODULAR = 'every-range-modular';

export function* checkEveryRangeModular(parts: Parts): Generator<number, string> {
  const claim: EveryRangeClaim = readEveryRange(parts);
  const { chain, atMost, words } = claim;
  const evidence = fields(parts.evidence, ['prime', 'free', 'topParts', 'root', 'witnesses'], 'evidence');
  const { p, topParts } = yield* provenTopParts(claim, evidence);
  yield* boundByPencil(chain, 3, topParts, atMost, p, evidence, (x) =>
    density(x, claim.cell, 3, 'a witness'),
  );
  return words;
}

/**
 * M1 to M4: at every integer t ≥ 0 the pencil leaves at most so many top parts.
 *
 * @param length of the densities whose growth is divided out
 * @param read a density of that length
 */
export function* boundByPencil(
  chain: Steps,
  length: number,
  topParts: readonly Density[],
  atMost: number,
  p: number,
  evidence: { readonly root: Value; readonly witnesses: Value },
  read: (x: Value) => Density,
): Generator<number> {
  const root = integer(evidence.root, 'root');
  if (root >= 0n) throw new Rejected('the root is not below every range');
  const image = yield* imageOfGrowth(chain, p, length);
  // M1: α and β modulo (R − A) O_3 and p; M2: as rows (α_1 … α_v, β_1 … β_v), a few independent ones.
  const inner = topParts.map((f) => chain.inner(f));
  const coordinates = new Map<number, Row>();
  inner.forEach(({ alpha, beta }, i) => {
    for (const [offset, part] of [
      [1, alpha],
      [1 + topParts.length, beta],
    ] as const)
      for (const [coordinate, value] of image.reduce(modulo(part, p))) {
        const row = coordinates.get(coordinate) ?? new Map<number, number>();
        row.set(i + offset, value);
        coordinates.set(coordinate, row);
      }
  });
  const echelon = new Echelon(p);
  const pencil: Linear[][] = [];
  for (const row of coordinates.values())
    if (echelon.insert(row))
      pencil.push(topParts.map((_, i) => [row.get(i + 1) ?? 0, row.get(i + 1 + topParts.length) ?? 0]));
  yield 0.9;
  const size = topParts.length - atMost;
  const common = size > 0 ? commonRoots(pencil, topParts.length, size, p) : [1];
  // M3: no common root, or the one of the evidence, once.
  if (common.length === 1) return;
  if (common.length !== 2 || (common[0]! + multiply(residue(root, p), common[1]!, p)) % p !== 0)
    throw new Rejected(`the pencil does not keep rank ${size} at every element of the field`);
  // M4: the rank is less at the root, exactly.
  const found = new Echelon(p);
  let count = 0;
  for (const value of list(evidence.witnesses, 'witnesses', topParts.length)) {
    const { parts: factors, x } = fields(value, ['parts', 'x'], 'a witness');
    const c = list(factors, 'parts', topParts.length).map((v) => integer(v, 'a part'));
    if (c.length !== topParts.length) throw new Rejected('a witness with another number of parts');
    const total: Density = new Map();
    const put = (q: Density, factor: bigint) => {
      for (const [s, v] of q) total.set(s, (total.get(s) ?? 0n) + factor * v);
    };
    inner.forEach(({ alpha, beta }, i) => {
      put(alpha, c[i]!);
      put(beta, root * c[i]!);
    });
    put(chain.growth(read(x), length), -1n);
    if ([...total.values()].some((v) => v !== 0n)) throw new Rejected('a witness does not hold');
    if (found.insert(modulo(new Map(c.map((v, i) => [i + 1, v])), p))) count++;
  }
  if (count <= atMost) throw new Rejected('too few witnesses of the root');
}

function integer(value: Value, what: string): bigint {
  const text = string(value, what);
  if (!/^(0|-?[1-9]\d{0,4000})$/.test(text)) throw new Malformed(`${what} is not an integer`);
  return BigInt(text);
}

type Linear = readonly [constant: number, linear: number];
/** Coefficients modulo p by rising power of t, the last one not zero. */
type Polynomial = readonly number[];

/** The greatest common divisor of the minors of a size: empty where all vanish, of length 1 where they have no common root. */
function commonRoots(pencil: readonly Linear[][], columns: number, size: number, p: number): Polynomial {
  let common: Polynomial = [];
  for (const rows of subsets(pencil.length, size))
    for (const chosen of subsets(columns, size)) {
      const minor = determinant(
        rows.map((r) => chosen.map((c) => trimmed([...pencil[r]![c]!]))),
        p,
      );
      common = commonDivisor(common, minor, p);
      if (common.length === 1) return common;
    }
  return common;
}

function* subsets(count: number, size: number, from = 0): Generator<number[]> {
  if (size === 0) yield [];
  else
    for (let i = from; i <= count - size; i++)
      for (const rest of subsets(count, size - 1, i + 1)) yield [i, ...rest];
}

function determinant(matrix: readonly (readonly Polynomial[])[], p: number): Polynomial {
  if (matrix.length === 0) return [1];
  let sum: Polynomial = [];
  matrix[0]!.forEach((entry, c) => {
    const minor = determinant(
      matrix.slice(1).map((row) => row.filter((_, j) => j !== c)),
      p,
    );
    sum = plusProduct(sum, c % 2 === 0 ? entry : entry.map((v) => (v === 0 ? 0 : p - v)), minor, p);
  });
  return sum;
}

/** a + b·c. */
function plusProduct(a: Polynomial, b: Polynomial, c: Polynomial, p: number): Polynomial {
  const result = [...a];
  b.forEach((x, i) => {
    c.forEach((y, j) => {
      while (result.length <= i + j) result.push(0);
      result[i + j] = (result[i + j]! + multiply(x, y, p)) % p;
    });
  });
  return trimmed(result);
}

/** Euclid's algorithm. */
function commonDivisor(a: Polynomial, b: Polynomial, p: number): Polynomial {
  let [x, y] = [a, b];
  while (y.length > 0) [x, y] = [y, remainder(x, y, p)];
  return x;
}

function remainder(a: Polynomial, b: Polynomial, p: number): Polynomial {
  let rest = [...a];
  const scale = inverse(b.at(-1)!, p);
  while (rest.length >= b.length) {
    const factor = multiply(rest.at(-1)!, scale, p);
    const shift = rest.length - b.length;
    b.forEach((v, i) => {
      rest[i + shift] = (rest[i + shift]! + p - multiply(factor, v, p)) % p;
    });
    rest = trimmed(rest);
  }
  return rest;
}

function trimmed(coefficients: number[]): number[] {
  while (coefficients.at(-1) === 0) coefficients.pop();
  return coefficients;
}
