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
