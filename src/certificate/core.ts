/**
 * Which rows of a core to list: linearly independent modulo p, in an order in which they are cheap to eliminate again.
 *
 * Short rows first, each reduced by the earlier ones in the order in which they were found; its pivot is the column that fewest
 * rows use. Cost and memory: what the elimination fills in.
 */
import { LimitError } from '../errors.ts';
import type { Field } from '../linear/field.ts';
import type { SparseVector } from '../linear/sparse.ts';

/** Most rows and most stored entries of an elimination that a checker is asked for. */
const MAX_ROWS = 2 ** 16;
const MAX_ENTRIES = 2 ** 24;

/**
 * Indices of independent rows, in the order of elimination; as many as the rank, and at most `enough`.
 *
 * Yields after every row that is found, for progress.
 *
 * @throws LimitError where the core is too large to be checked in reasonable time
 */
export function* independentRows(
  rows: readonly SparseVector[],
  columns: number,
  enough: number,
  field: Field,
): Generator<number, number[]> {
  if (enough > MAX_ROWS) throw tooLarge(enough);
  const { p, multiply, inverse } = field;
  const usage = new Uint32Array(columns);
  for (const row of rows) for (const c of row.columns) usage[c]!++;
  const order = rows
    .map((_, i) => i)
    .sort((a, b) => rows[a]!.columns.length - rows[b]!.columns.length || a - b);
  const value = new Float64Array(columns);
  const mark = new Int32Array(columns).fill(-1);
  const chosen: number[] = [];
  const pivotColumns: number[] = [];
  const pivotRows: SparseVector[] = [];
  let stored = 0;
  for (const index of order) {
    if (chosen.length === enough) break;
    const row = rows[index]!;
    const touched = [...row.columns];
    row.columns.forEach((c, i) => {
      value[c] = row.values[i]!;
      mark[c] = index;
    });
    for (let i = 0; i < pivotRows.length; i++) {
      const factor = value[pivotColumns[i]!]!;
      if (factor === 0) continue;
      const pivot = pivotRows[i]!;
      for (let j = 0; j < pivot.columns.length; j++) {
        const c = pivot.columns[j]!;
        if (mark[c] !== index) {
          mark[c] = index;
          touched.push(c);
        }
        const sum = value[c]! + multiply(p - factor, pivot.values[j]!);
        value[c] = sum >= p ? sum - p : sum;
      }
    }
    const left = touched.filter((c) => value[c] !== 0);
    if (left.length > 0) {
      const pivot = left.reduce((best, c) => (usage[c]! < usage[best]! ? c : best));
      const scale = inverse(value[pivot]!);
      pivotColumns.push(pivot);
      pivotRows.push({ columns: left, values: left.map((c) => multiply(value[c]!, scale)) });
      chosen.push(index);
      stored += left.length;
      if (stored > MAX_ENTRIES)
        throw new LimitError(
          `certificate: eliminating the core fills in more than ${MAX_ENTRIES.toLocaleString('en')} entries; a smaller range needs less`,
        );
    }
    for (const c of touched) value[c] = 0;
    yield chosen.length / Math.max(1, enough);
  }
  return chosen;
}

export function tooLarge(rows: number): LimitError {
  return new LimitError(
    `certificate: the sweeps leave ${rows.toLocaleString('en')} equations or more that tie three unknowns each; a certificate lists at most ` +
      `${MAX_ROWS.toLocaleString('en')}. A smaller range leaves fewer, and so do spin axes in which the couplings are diagonal`,
  );
}
