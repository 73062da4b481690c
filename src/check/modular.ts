/** Arithmetic modulo a prime p < 2^26, so that products of residues are exact in a double; and a test of linear independence. */
import { Rejected } from './document.ts';

/** Exclusive. */
export const PRIME_BOUND = 2 ** 26;

/** Trial division: at most 4,100 steps. */
export function isPrime(n: number): boolean {
  if (n % 2 === 0) return n === 2;
  for (let d = 3; d * d <= n; d += 2) if (n % d === 0) return false;
  return n > 1;
}

/** 1/a mod p for 0 < a < p, by Euclid's algorithm. */
export function inverse(a: number, p: number): number {
  let [r0, r1, s0, s1] = [p, a, 0, 1];
  while (r1 !== 0) {
    const q = Math.floor(r0 / r1);
    [r0, r1] = [r1, r0 - q * r1];
    [s0, s1] = [s1, s0 - q * s1];
  }
  return s0 < 0 ? s0 + p : s0;
}

/** a·b mod p for 0 ≤ a, b < p < 2^26: the quotient is below 2^26 and rounds down exactly; several times faster than `%` on doubles. */
export function multiply(a: number, b: number, p: number): number {
  const product = a * b;
  return product - Math.floor(product / p) * p;
}

export function residue(value: bigint, p: number): number {
  const r = Number(value % BigInt(p));
  return r < 0 ? r + p : r;
}

/** Distinct columns with non-zero residues. */
export interface Row {
  readonly columns: readonly number[];
  readonly values: readonly number[];
}

/** Limits of the elimination, so that hostile evidence ends in bounded time and memory. */
export const MAX_ROWS = 2 ** 16;
const MAX_ENTRIES = 2 ** 25;

/**
 * Is row after row independent, modulo p, of those before it?
 *
 * Each row is reduced by the pivot rows in the order in which they were found (a pivot row has no entry in the pivot column of an
 * earlier one), then keeps as its own pivot the column that fewest rows use. Any choice of pivots gives the same answer.
 *
 * @param columns number of columns
 * @returns false as soon as a row depends on those before it
 */
export function* independent(rows: readonly Row[], columns: number, p: number): Generator<number, boolean> {
  const usage = new Uint32Array(columns);
  for (const row of rows) for (const c of row.columns) usage[c]!++;
  const accumulator = new Float64Array(columns);
  const pivotColumns = new Uint32Array(rows.length);
  const pivotRows: Row[] = [];
  let stored = 0;
  for (const row of rows) {
    const touched = [...row.columns];
    const seen = new Set(touched);
    row.columns.forEach((c, i) => {
      accumulator[c] = row.values[i]!;
    });
    for (let i = 0; i < pivotRows.length; i++) {
      const value = accumulator[pivotColumns[i]!]!;
      if (value === 0) continue;
      const { columns: others, values } = pivotRows[i]!;
      for (let j = 0; j < others.length; j++) {
        const c = others[j]!;
        if (!seen.has(c)) {
          seen.add(c);
          touched.push(c);
        }
        accumulator[c] = (accumulator[c]! + multiply(p - value, values[j]!, p)) % p;
      }
    }
    const left = touched.filter((c) => accumulator[c] !== 0);
    if (left.length === 0) return false;
    const pivot = left.reduce((best, c) => (usage[c]! < usage[best]! ? c : best));
    const scale = inverse(accumulator[pivot]!, p);
    pivotColumns[pivotRows.length] = pivot;
    pivotRows.push({ columns: left, values: left.map((c) => multiply(accumulator[c]!, scale, p)) });
    for (const c of touched) accumulator[c] = 0;
    stored += left.length;
    if (stored > MAX_ENTRIES)
      throw new Rejected('the elimination of the pivots exceeds the limits of this checker');
    yield left.length;
  }
  return true;
}
