/**
 * Null space of a sparse matrix modulo p: a forest with a few parameters first, then elimination on the core that is left.
 *
 * Nearly every row of a search says, once what is known is used, that an unknown is zero, a multiple of another, or one of
 * these plus parameters. Those rows cost near-linear time; what still ties three or more roots forms the core.
 */
import { AffineForest } from './affine-forest.ts';
import { eliminate } from './elimination.ts';
import type { Field } from './field.ts';
import type { SparseMatrix, SparseVector } from './sparse.ts';

/** Beyond so many parameters, plain sparse elimination of the rest is cheaper. */
const MAX_PARAMETERS = 96;

/** A basis of { x : M x = 0 } over GF(p); as many vectors as `columns − rank`. */
export function kernel(matrix: SparseMatrix, field: Field): SparseVector[] {
  const { p, multiply } = field;
  const residues = matrix.values.map((v) => field.residue(v));
  const forest = new AffineForest(matrix.columns, field);
  const roots: number[] = [];
  const factors: number[] = [];
  const offset: number[] = [];

  /** Leaves the row as Σ factors·roots + offset·t. */
  const reduce = (row: number): void => {
    roots.length = 0;
    factors.length = 0;
    offset.length = 0;
    for (let i = matrix.start[row]!; i < matrix.start[row + 1]!; i++) {
      forest.find(matrix.column[i]!);
      const value = residues[matrix.value[i]!]!;
      for (let j = 0; j < forest.offset.length; j++)
        if (forest.offset[j] !== 0) offset[j] = ((offset[j] ?? 0) + multiply(value, forest.offset[j]!)) % p;
        else offset[j] ??= 0;
      if (forest.root < 0) continue;
      const term = multiply(value, forest.weight);
      const at = roots.indexOf(forest.root);
      if (at < 0) {
        roots.push(forest.root);
        factors.push(term);
      } else factors[at] = (factors[at]! + term) % p;
    }
    let kept = 0;
    for (let i = 0; i < roots.length; i++)
      if (factors[i] !== 0) {
        roots[kept] = roots[i]!;
        factors[kept++] = factors[i]!;
      }
    roots.length = kept;
    factors.length = kept;
  };

  const constraints: number[][] = [];
  let open: number[] = Array.from({ length: matrix.rows }, (_, row) => row);
  const met = new Uint32Array(matrix.columns);
  for (;;) {
    const left: number[] = [];
    met.fill(0);
    let heaviest = -1;
    for (const row of open) {
      reduce(row);
      if (roots.length === 0) {
        if (offset.some((v) => v !== 0)) constraints.push(offset.slice());
      } else if (roots.length === 1) forest.settle(roots[0]!, factors[0]!, offset);
      else if (roots.length === 2) forest.tie(roots[0]!, factors[0]!, roots[1]!, factors[1]!, offset);
      else {
        left.push(row);
        for (const root of roots) if (++met[root]! > (heaviest < 0 ? 0 : met[heaviest]!)) heaviest = root;
      }
    }
    const stuck = left.length === open.length;
    open = left;
    if (open.length === 0) break;
    if (!stuck) continue;
    if (forest.parameters === MAX_PARAMETERS) break;
    forest.promote(heaviest);
  }

  // What is left: roots, then parameters, as columns of the core.
  const coreOf = new Int32Array(matrix.columns).fill(-1);
  let count = 0;
  for (let column = 0; column < matrix.columns; column++) {
    forest.find(column);
    if (forest.root === column) coreOf[column] = count++;
  }
  const rows: SparseVector[] = constraints.map((values) => sparse([], [], values, count));
  for (const row of open) {
    reduce(row);
    const order = roots.map((_, i) => i).sort((a, b) => coreOf[roots[a]!]! - coreOf[roots[b]!]!);
    rows.push(
      sparse(
        order.map((i) => coreOf[roots[i]!]!),
        order.map((i) => factors[i]!),
        offset,
        count,
      ),
    );
  }
  const space = eliminate(rows, count + forest.parameters, field).nullSpace();
  const value = new Float64Array(count + forest.parameters);
  const vectors = space.map((): { columns: number[]; values: number[] } => ({ columns: [], values: [] }));
  // Where a core unknown is non-zero: vectors by core column.
  const users: number[][] = Array.from(value, () => []);
  space.forEach((core, v) => {
    for (const c of core.columns) users[c]!.push(v);
  });
  const dense = space.map((core) => {
    const map = new Map<number, number>();
    core.columns.forEach((c, i) => void map.set(c, core.values[i]!));
    return map;
  });
  for (let column = 0; column < matrix.columns; column++) {
    forest.find(column);
    const touched = new Set<number>(forest.root < 0 ? [] : users[coreOf[forest.root]!]);
    for (let j = 0; j < forest.offset.length; j++)
      if (forest.offset[j] !== 0) for (const v of users[count + j]!) touched.add(v);
    for (const v of touched) {
      let sum = forest.root < 0 ? 0 : multiply(forest.weight, dense[v]!.get(coreOf[forest.root]!) ?? 0);
      for (let j = 0; j < forest.offset.length; j++)
        if (forest.offset[j] !== 0)
          sum = (sum + multiply(forest.offset[j]!, dense[v]!.get(count + j) ?? 0)) % p;
      if (sum === 0) continue;
      vectors[v]!.columns.push(column);
      vectors[v]!.values.push(sum);
    }
  }
  return vectors;
}

/** A row of the core: roots first, parameters from column `count` on. */
function sparse(columns: number[], values: number[], offset: readonly number[], count: number): SparseVector {
  offset.forEach((v, j) => {
    if (v === 0) return;
    columns.push(count + j);
    values.push(v);
  });
  return { columns, values };
}
