/**
 * The pencil: one small matrix, linear in the range, that bounds the number of charges of every range at once.
 *
 * Whatever the growth at the two ends of a string is made of (whole cells in `growth.ts`, half steps in `half-steps.ts`), the
 * theorem has one form: a charge of length t + t₀ with top part f exists only if `α(f) + t β(f)` lies in the image of growth.
 * See `docs/theory.md`, theorems 5 and 8.
 */
import { diagonalForm } from '../linear/diagonal.ts';
import { integerRoots, type Univariate, univariateOf } from '../linear/univariate.ts';
import type { IntegerVector } from '../search/charges.ts';
import { exactNullSpace, MatrixBuilder } from '../search/null-space.ts';

/** A pencil `a + t b`, reduced: dim N(t) = columns − rank. Rows are lists of integers. */
export interface Pencil {
  /** The dimension of the space of top parts. */
  readonly columns: number;
  readonly constant: readonly (readonly bigint[])[];
  readonly linear: readonly (readonly bigint[])[];
}

/** dim N(t) for every integer t ≥ `from`. */
export interface PencilBounds {
  /** For all t but the exceptional ones. */
  readonly generic: number;
  readonly exceptional: readonly { readonly t: number; readonly dimension: number }[];
}

/**
 * From the relations `Σ a_i α_i + b_i β_i ∈ image`, a subspace of 2r-space with coordinates (a, b), to the pencil whose rows
 * are the functionals that vanish on it.
 */
export function pencilFromRelations(relations: readonly IntegerVector[], columns: number): Pencil {
  const builder = new MatrixBuilder();
  relations.forEach((relation, row) => {
    relation.columns.forEach((c, i) => {
      if (c < 2 * columns) builder.add(row, c, relation.values[i]!);
    });
  });
  const functionals = exactNullSpace(builder.finish(2 * columns));
  const part = (offset: number) =>
    functionals.map((f) => {
      const row: bigint[] = new Array(columns).fill(0n);
      f.columns.forEach((c, i) => {
        if (c >= offset && c < offset + columns) row[c - offset] = f.values[i]!;
      });
      return row;
    });
  return { columns, constant: part(0), linear: part(columns) };
}

/** The diagonal form of a + t b: at every t the rank is the number of entries that do not vanish there. */
export function diagonalOf({ constant, linear }: Pencil): Univariate[] {
  return diagonalForm(constant.map((row, i) => row.map((a, j) => univariateOf(a, linear[i]![j]!))));
}

/** @param from smallest t of interest, exceptional values below it are left out */
export function boundsOf(pencil: Pencil, from: number): PencilBounds {
  const { columns } = pencil;
  const diagonal = diagonalOf(pencil);
  const drops = new Map<bigint, number>();
  for (const entry of diagonal)
    for (const root of integerRoots(entry, BigInt(from))) drops.set(root, (drops.get(root) ?? 0) + 1);
  const generic = columns - diagonal.length;
  return {
    generic,
    exceptional: [...drops]
      .map(([t, drop]) => ({ t: Number(t), dimension: generic + drop }))
      .sort((a, b) => a.t - b.t),
  };
}

/** The rank of the pencil at one t, straight from its rows; a second way that tests the first. */
export function dimensionAt({ columns, constant, linear }: Pencil, t: bigint): number {
  const matrix = constant.map((row, i) => row.map((a, j) => univariateOf(a + t * linear[i]![j]!)));
  return columns - diagonalForm(matrix).length;
}

/** Why a pencil loses rank at t: Σ parts_i (α_i + t β_i) is the growth of x, string by string. */
export interface Witness {
  readonly parts: readonly bigint[];
  readonly x: ReadonlyMap<number, bigint>;
}

/**
 * All reasons why a pencil loses rank at one t, their parts independent.
 *
 * @param columns α_i + t β_i for every top part, as strings with coefficients
 * @param strings those that x may have
 * @param addColumn adds the growth of a string
 */
export function witnessesOf(
  columns: readonly (readonly (readonly [string: number, value: bigint])[])[],
  strings: readonly number[],
  addColumn: (builder: MatrixBuilder, column: number, string: number) => void,
): Witness[] {
  const builder = new MatrixBuilder();
  columns.forEach((column, i) => {
    for (const [string, value] of column) builder.add(string, i, value);
  });
  const v = columns.length;
  strings.forEach((string, i) => {
    addColumn(builder, v + i, string);
  });
  return exactNullSpace(builder.finish(v + strings.length)).flatMap((relation) => {
    if (relation.columns[0]! >= v) return [];
    const parts = new Array<bigint>(v).fill(0n);
    const x = new Map<number, bigint>();
    relation.columns.forEach((c, i) => {
      if (c < v) parts[c] = relation.values[i]!;
      else x.set(strings[c - v]!, -relation.values[i]!);
    });
    return [{ parts, x }];
  });
}

export const ZERO_PENCIL: Pencil = { columns: 0, constant: [], linear: [] };
