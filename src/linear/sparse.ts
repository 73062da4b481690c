/**
 * A sparse integer matrix, rows stored one after another. Entries are small integers: the matrices of a search hold the
 * integer coefficients of a Hamiltonian by reference to `values`, so one structure serves every prime.
 */
export interface SparseMatrix {
  readonly columns: number;
  readonly rows: number;
  /** Row i is the stretch `start[i] … start[i + 1]` of the two arrays below. */
  readonly start: Uint32Array;
  readonly column: Uint32Array;
  /** Index into `values`, of each entry. */
  readonly value: Uint16Array;
  /** The distinct entries, exact. */
  readonly values: readonly bigint[];
}

/** A vector with few non-zeros: strictly rising columns, residues in 1 … p − 1. */
export interface SparseVector {
  readonly columns: number[];
  readonly values: number[];
}

/** Distinct entries in the order they first come up: the `values` of a matrix while it is built. */
export class DistinctValues {
  readonly values: bigint[] = [];
  readonly #index = new Map<bigint, number>();

  indexOf(value: bigint): number {
    let index = this.#index.get(value);
    if (index === undefined) {
      index = this.values.length;
      this.#index.set(value, index);
      this.values.push(value);
    }
    return index;
  }
}

/** Entries line by line, lines being all rows or all columns: line i is the stretch `start[i] … start[i + 1]`. */
export interface Lines {
  readonly start: Uint32Array;
  /** Position across the lines, of each entry. */
  readonly index: Uint32Array;
  readonly value: Uint16Array;
}

/** Rows from columns, or columns from rows. A counting sort: linear, and each new line has its entries in rising order. */
export function transpose({ start, index, value }: Lines, lines: number): Lines {
  const size = start[start.length - 1]!;
  const newStart = new Uint32Array(lines + 1);
  for (let i = 0; i < size; i++) newStart[index[i]! + 1]!++;
  for (let line = 0; line < lines; line++) newStart[line + 1]! += newStart[line]!;
  const next = newStart.slice();
  const newIndex = new Uint32Array(size);
  const newValue = new Uint16Array(size);
  for (let line = 0; line + 1 < start.length; line++)
    for (let i = start[line]!; i < start[line + 1]!; i++) {
      const at = next[index[i]!]!++;
      newIndex[at] = line;
      newValue[at] = value[i]!;
    }
  return { start: newStart, index: newIndex, value: newValue };
}

/** Some columns of a matrix, and the rows that meet them; both keep their order. */
export interface Restriction {
  readonly matrix: SparseMatrix;
  /** New numbers of the old columns and rows, −1 for those left out. */
  readonly columnOf: Int32Array;
  readonly rowOf: Int32Array;
}

/** @param keep 1 for the columns that stay */
export function restrictColumns(matrix: SparseMatrix, keep: Uint8Array): Restriction {
  const columnOf = new Int32Array(matrix.columns);
  let columns = 0;
  for (let c = 0; c < matrix.columns; c++) columnOf[c] = keep[c] === 1 ? columns++ : -1;
  const rowOf = new Int32Array(matrix.rows);
  const start = new Uint32Array(matrix.rows + 1);
  const column = new Uint32Array(matrix.column.length);
  const value = new Uint16Array(matrix.column.length);
  let rows = 0;
  let size = 0;
  for (let row = 0; row < matrix.rows; row++) {
    for (let i = matrix.start[row]!; i < matrix.start[row + 1]!; i++) {
      const c = columnOf[matrix.column[i]!]!;
      if (c < 0) continue;
      column[size] = c;
      value[size++] = matrix.value[i]!;
    }
    rowOf[row] = size > start[rows]! ? rows++ : -1;
    start[rows] = size;
  }
  return {
    matrix: {
      columns,
      rows,
      start: start.slice(0, rows + 1),
      column: column.slice(0, size),
      value: value.slice(0, size),
      values: matrix.values,
    },
    columnOf,
    rowOf,
  };
}
