/**
 * Diagonal form of a sparse matrix over Q[ω, 1/ω] by invertible row and column operations.
 *
 * Monomials are the units. Entries that are units are pivots first: the row and the column of one leave the matrix, in sparse
 * arithmetic. What is left goes through Euclid's algorithm until one entry stands alone in its row and column. At every ω ≠ 0 the
 * rank is the number of unit pivots and of diagonal entries that do not vanish there: the Smith form without its divisibility,
 * common practice, no source. Exact; cost: that of sparse elimination, and of bigint polynomials on the rest.
 */
import { gcd } from '../algebra/rational.ts';
import { primitivePart, productOf, pseudoDivide, trimmed, type Univariate } from '../algebra/univariate.ts';

/** ω^shift · Σ coefficients[i] ω^i; the lowest and the highest coefficient are not zero. Zero has no entry. */
export interface Laurent {
  readonly shift: number;
  readonly coefficients: Univariate;
}

export type LaurentRow = Map<number, Laurent>;

export interface DiagonalForm {
  /** Columns less rank at all but finitely many ω. */
  readonly nullity: number;
  /** Diagonal entries that are no units, primitive and without factors ω: each root costs one rank. */
  readonly divisors: readonly Univariate[];
}

export function laurent(shift: number, coefficients: Univariate): Laurent | undefined {
  let first = 0;
  while (first < coefficients.length && coefficients[first] === 0n) first++;
  const rest = trimmed(coefficients.slice(first));
  return rest.length === 0 ? undefined : { shift: shift + first, coefficients: rest };
}

/** a·x − b·y, either product absent where an argument is. */
function combination(
  a: Laurent,
  x: Laurent | undefined,
  b: Laurent,
  y: Laurent | undefined,
): Laurent | undefined {
  const p = x === undefined ? [] : productOf(a.coefficients, x.coefficients);
  const q = y === undefined ? [] : productOf(b.coefficients, y.coefficients);
  const [i, j] = [a.shift + (x?.shift ?? 0), b.shift + (y?.shift ?? 0)];
  if (x === undefined)
    return laurent(
      j,
      q.map((v) => -v),
    );
  if (y === undefined) return laurent(i, p);
  const low = Math.min(i, j);
  const sum = new Array<bigint>(Math.max(i - low + p.length, j - low + q.length)).fill(0n);
  p.forEach((v, k) => {
    sum[i - low + k]! += v;
  });
  q.forEach((v, k) => {
    sum[j - low + k]! -= v;
  });
  return laurent(low, sum);
}

/** @param rows is used up */
export function diagonalForm(
  rows: LaurentRow[],
  columns: number,
  onProgress: () => void = () => {},
): DiagonalForm {
  const rowsOf: Set<number>[] = Array.from({ length: columns }, () => new Set());
  rows.forEach((row, r) => {
    for (const c of row.keys()) rowsOf[c]!.add(r);
  });
  const open = new Set(rows.map((_, r) => r));
  let rank = 0;
  /** row := a·row − b·source, and what keeps its numbers small. */
  const combine = (r: number, a: Laurent, b: Laurent, source: LaurentRow): void => {
    const row = rows[r]!;
    const result: LaurentRow = new Map();
    for (const c of new Set([...row.keys(), ...source.keys()])) {
      const value = combination(a, row.get(c), b, source.get(c));
      if (value === undefined) rowsOf[c]!.delete(r);
      else {
        result.set(c, value);
        rowsOf[c]!.add(r);
      }
    }
    rows[r] = withoutContent(result);
  };
  const remove = (r: number): void => {
    for (const c of rows[r]!.keys()) rowsOf[c]!.delete(r);
    open.delete(r);
  };

  // Unit pivots, short rows first.
  for (let limit = 1; ; ) {
    let changed = false;
    for (const r of [...open]) {
      const row = rows[r]!;
      if (row.size === 0) {
        open.delete(r);
        continue;
      }
      if (row.size > limit) continue;
      let pivot = -1;
      for (const [c, v] of row)
        if (v.coefficients.length === 1 && (pivot < 0 || rowsOf[c]!.size < rowsOf[pivot]!.size)) pivot = c;
      if (pivot < 0) continue;
      onProgress();
      const unit = row.get(pivot)!;
      remove(r);
      for (const other of [...rowsOf[pivot]!]) combine(other, unit, rows[other]!.get(pivot)!, row);
      rank++;
      changed = true;
    }
    if (changed) limit = 1;
    else if ([...open].every((r) => rows[r]!.size <= limit)) break;
    else limit *= 2;
  }

  // Euclid on the rest, by rows and, through the transposed loop, by columns.
  const divisors: Univariate[] = [];
  for (;;) {
    let best: { r: number; c: number; size: number } | undefined;
    for (const r of open)
      for (const [c, v] of rows[r]!)
        if (best === undefined || v.coefficients.length < best.size)
          best = { r, c, size: v.coefficients.length };
    if (best === undefined) break;
    onProgress();
    const { r, c } = best;
    const pivotRow = rows[r]!;
    const pivot = pivotRow.get(c)!;
    let clean = true;
    for (const other of [...rowsOf[c]!]) {
      if (other === r) continue;
      const { scale, quotient, remainder } = divided(rows[other]!.get(c)!, pivot);
      combine(other, scale, quotient, pivotRow);
      if (remainder) clean = false;
    }
    if (!clean) continue;
    // The column holds the pivot alone: column operations change nothing but the pivot's row.
    for (const [d, v] of [...pivotRow]) {
      if (d === c) continue;
      const rest = pseudoDivide(v.coefficients, pivot.coefficients).remainder;
      const reduced = laurent(v.shift, rest);
      if (reduced === undefined) {
        pivotRow.delete(d);
        rowsOf[d]!.delete(r);
        continue;
      }
      // Column d was scaled by a rational number, a unit, and less a multiple of column c: exact up to units of the whole column.
      const scale = pseudoDivide(v.coefficients, pivot.coefficients).scale;
      for (const other of rowsOf[d]!)
        if (other !== r) {
          const entry = rows[other]!.get(d)!;
          rows[other]!.set(d, { ...entry, coefficients: entry.coefficients.map((x) => x * scale) });
        }
      pivotRow.set(d, reduced);
      clean = false;
    }
    if (!clean) continue;
    rank++;
    if (pivot.coefficients.length > 1) divisors.push(primitivePart(pivot.coefficients));
    remove(r);
  }
  return { nullity: columns - rank, divisors };
}

/** scale·a = quotient·b + a remainder, in the ring with 1/ω. */
function divided(a: Laurent, b: Laurent): { scale: Laurent; quotient: Laurent; remainder: boolean } {
  const { scale, quotient, remainder } = pseudoDivide(a.coefficients, b.coefficients);
  return {
    scale: { shift: 0, coefficients: [scale] },
    // A quotient of zero is never needed: the pivot is the shortest entry of all.
    quotient: { shift: a.shift - b.shift, coefficients: quotient },
    remainder: remainder.length > 0,
  };
}

function withoutContent(row: LaurentRow): LaurentRow {
  let common = 0n;
  for (const { coefficients } of row.values())
    for (const v of coefficients) {
      common = gcd(common, v);
      if (common === 1n) return row;
    }
  if (common <= 1n) return row;
  for (const [c, v] of row) row.set(c, { ...v, coefficients: v.coefficients.map((x) => x / common) });
  return row;
}
