/**
 * Null space of a sparse matrix modulo p: weighted forest first, then elimination on the small core that is left.
 *
 * Nearly every row of a search says, once what is known is used, that an unknown is zero or a multiple of another. Those rows
 * cost near-linear time; a few passes settle them. Rows that still tie three or more classes form the core.
 */
import { eliminate } from './elimination.ts';
import type { Field } from './field.ts';
import { WeightedForest } from './forest.ts';
import type { SparseMatrix, SparseVector } from './sparse.ts';

/** A basis of { x : M x = 0 } over GF(p); as many vectors as `columns − rank`. */
export function kernel(matrix: SparseMatrix, field: Field): SparseVector[] {
  const { multiply } = field;
  const residues = matrix.values.map((v) => field.residue(v));
  const forest = new WeightedForest(matrix.columns, matrix.columns + 1, field);
  const classes: number[] = [];
  const factors: number[] = [];

  /** Leaves the row, written in classes that may be non-zero, in `classes` and `factors`. */
  const reduce = (row: number): void => {
    classes.length = 0;
    factors.length = 0;
    for (let i = matrix.start[row]!; i < matrix.start[row + 1]!; i++) {
      const column = matrix.column[i]!;
      const root = forest.root(column + 1);
      if (root === forest.zero) continue;
      const term = multiply(residues[matrix.value[i]!]!, forest.rootWeight);
      const at = classes.indexOf(root);
      if (at < 0) {
        classes.push(root);
        factors.push(term);
      } else factors[at] = (factors[at]! + term) % field.p;
    }
    let kept = 0;
    for (let i = 0; i < classes.length; i++)
      if (factors[i] !== 0) {
        classes[kept] = classes[i]!;
        factors[kept++] = factors[i]!;
      }
    classes.length = kept;
    factors.length = kept;
  };

  let open: number[] = Array.from({ length: matrix.rows }, (_, row) => row);
  for (let before = open.length + 1; open.length < before; ) {
    before = open.length;
    const left: number[] = [];
    for (const row of open) {
      reduce(row);
      if (classes.length === 1) forest.setZero(classes[0]!);
      else if (classes.length === 2) forest.tie(classes[0]!, factors[0]!, classes[1]!, factors[1]!);
      else if (classes.length > 2) left.push(row);
    }
    open = left;
  }

  const coreOf = new Int32Array(matrix.columns + 1).fill(-1);
  const members: number[][] = [];
  for (let column = 0; column < matrix.columns; column++) {
    const root = forest.root(column + 1);
    if (root === forest.zero) continue;
    if (coreOf[root] === -1) {
      coreOf[root] = members.length;
      members.push([]);
    }
    members[coreOf[root]!]!.push(column);
  }
  const rows: SparseVector[] = open.map((row) => {
    reduce(row);
    const order = classes.map((c, i) => [coreOf[c]!, factors[i]!] as const).sort((a, b) => a[0] - b[0]);
    return { columns: order.map(([c]) => c), values: order.map(([, f]) => f) };
  });
  return eliminate(rows, members.length, field)
    .nullSpace()
    .map((core) => {
      const entries: [number, number][] = [];
      core.columns.forEach((c, i) => {
        for (const column of members[c]!) {
          forest.root(column + 1);
          entries.push([column, multiply(core.values[i]!, forest.rootWeight)]);
        }
      });
      entries.sort((a, b) => a[0] - b[0]);
      return { columns: entries.map(([c]) => c), values: entries.map(([, f]) => f) };
    });
}
