/**
 * Null spaces over the rationals, by two bounds that meet: the rank modulo one prime from below, as many exact vectors from above.
 */
import { LimitError, VerificationError } from '../errors.ts';
import { primeFieldsBelow } from '../linear/field.ts';
import { DistinctValues, type SparseMatrix } from '../linear/sparse.ts';
import { type IntegerVector, liftCharges, modularBasis } from './charges.ts';

/** Collects the entries of a matrix column by column; rows are named by any key. Entries in the same place add up. */
export class MatrixBuilder<K = number> {
  readonly #rows = new Map<K, number>();
  readonly #row: number[] = [];
  readonly #column: number[] = [];
  readonly #value: number[] = [];
  readonly #values = new DistinctValues();

  add(row: K, column: number, value: bigint): void {
    if (value === 0n) return;
    let r = this.#rows.get(row);
    if (r === undefined) {
      r = this.#rows.size;
      this.#rows.set(row, r);
    }
    const v = this.#values.indexOf(value);
    if (v === MAX_VALUES) throw new LimitError(`null space: more than ${MAX_VALUES} different entries`);
    this.#row.push(r);
    this.#column.push(column);
    this.#value.push(v);
  }

  /** @param columns number of unknowns */
  finish(columns: number): SparseMatrix {
    const rows = this.#rows.size;
    const start = new Uint32Array(rows + 1);
    for (const r of this.#row) start[r + 1]!++;
    for (let r = 0; r < rows; r++) start[r + 1]! += start[r]!;
    const next = start.slice();
    const column = new Uint32Array(this.#row.length);
    const value = new Uint16Array(this.#row.length);
    this.#row.forEach((r, i) => {
      const at = next[r]!++;
      column[at] = this.#column[i]!;
      value[at] = this.#value[i]!;
    });
    return { columns, rows, start, column, value, values: this.#values.values };
  }
}

const MAX_VALUES = 65_536;
const MAX_ATTEMPTS = 12;

/**
 * The reduced echelon basis of { x : M x = 0 }, scaled to integers without a common factor; every vector is re-multiplied exactly,
 * and there are no more, since the rank modulo a prime is at most the rank.
 */
export function exactNullSpace(matrix: SparseMatrix): IntegerVector[] {
  const fields = primeFieldsBelow();
  for (let attempt = 0; attempt < MAX_ATTEMPTS; attempt++) {
    const field = fields.next().value!;
    const basis = modularBasis(matrix, null, field);
    const lifted = liftCharges(matrix, null, { basis, field }, fields, () => {});
    if (lifted.ok) return lifted.charges;
  }
  throw new VerificationError(`null space: no prime gave matching bounds in ${MAX_ATTEMPTS} attempts`);
}
