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

/** A null space, and how it was found. */
export interface Kernel {
  /** A basis of { x : M x = 0 } over GF(p); as many vectors as `columns − rank`. */
  readonly vectors: SparseVector[];
  /** What told something new, in order: row i as i, a column c that became a parameter as −1 − c. */
  readonly steps: readonly number[];
}

/**
 * The null space of a matrix.
 *
 * @param steps those of the same matrix modulo another prime: only these rows are looked at, once each. The result is the null
 *   space of these rows, larger than that of the matrix when a prime is unlucky.
 */
export function kernel(matrix: SparseMatrix, field: Field, steps?: readonly number[]): Kernel {
  const forest = new AffineForest(matrix.columns, field);
  const row = new ReducedRow(matrix, forest);
  const taken: number[] = [];
  const constraints: number[][] = [];
  const left: number[] = [];

  /** Uses a row of at most two roots; false when it has more. */
  const use = (index: number): boolean => {
    row.reduce(index);
    const { length, roots, factors, offset } = row;
    if (length > 2) return false;
    if (length === 0) {
      if (offset.every((v) => v === 0)) return true;
      constraints.push(offset.slice());
    } else if (length === 1) forest.settle(roots[0]!, factors[0]!, offset);
    else forest.tie(roots[0]!, factors[0]!, roots[1]!, factors[1]!, offset);
    taken.push(index);
    return true;
  };
  const promote = (column: number): void => {
    forest.promote(column);
    taken.push(-1 - column);
  };

  if (steps === undefined) {
    let open = Uint32Array.from({ length: matrix.rows }, (_, index) => index);
    const met = new Uint32Array(matrix.columns);
    for (;;) {
      let count = 0;
      met.fill(0);
      let heaviest = -1;
      for (const index of open) {
        if (use(index)) continue;
        open[count++] = index;
        for (let i = 0; i < row.length; i++) {
          const root = row.roots[i]!;
          if (++met[root]! > (heaviest < 0 ? 0 : met[heaviest]!)) heaviest = root;
        }
      }
      const stuck = count === open.length;
      open = open.subarray(0, count);
      if (count === 0) break;
      if (!stuck) continue;
      if (forest.parameters === MAX_PARAMETERS) break;
      promote(heaviest);
    }
    for (const index of open) left.push(index);
  } else
    for (const step of steps) {
      if (step >= 0) {
        if (!use(step)) left.push(step);
      } else if (forest.isRoot(-1 - step)) promote(-1 - step);
    }

  // What is left: roots, then parameters, as columns of the core.
  const coreOf = new Int32Array(matrix.columns).fill(-1);
  let count = 0;
  for (let column = 0; column < matrix.columns; column++) {
    forest.find(column);
    if (forest.root === column) coreOf[column] = count++;
  }
  const rows: SparseVector[] = constraints.map((values) => sparse([], [], values, count));
  for (const index of left) {
    row.reduce(index);
    taken.push(index);
    const { roots, factors, offset } = row;
    const order = Array.from({ length: row.length }, (_, i) => i).sort(
      (a, b) => coreOf[roots[a]!]! - coreOf[roots[b]!]!,
    );
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
  const { p, multiply } = field;
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
  return { vectors, steps: taken };
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

/** A row in terms of what is known: Σ factors·roots + offset·t. The buffers are overwritten by each row. */
class ReducedRow {
  length = 0;
  readonly roots: number[] = [];
  readonly factors: number[] = [];
  readonly offset: number[] = [];
  readonly #residues: readonly number[];

  constructor(
    readonly matrix: SparseMatrix,
    readonly forest: AffineForest,
  ) {
    this.#residues = matrix.values.map((v) => forest.field.residue(v));
  }

  reduce(index: number): void {
    const { matrix, forest, roots, factors, offset } = this;
    const { p, multiply } = forest.field;
    offset.length = forest.parameters;
    offset.fill(0);
    let length = 0;
    for (let i = matrix.start[index]!; i < matrix.start[index + 1]!; i++) {
      forest.find(matrix.column[i]!);
      const value = this.#residues[matrix.value[i]!]!;
      const known = forest.offset;
      for (let j = 0; j < known.length; j++)
        if (known[j] !== 0) offset[j] = (offset[j]! + multiply(value, known[j]!)) % p;
      const { root } = forest;
      if (root < 0) continue;
      const term = multiply(value, forest.weight);
      let at = 0;
      while (at < length && roots[at] !== root) at++;
      if (at === length) {
        roots[length] = root;
        factors[length++] = term;
      } else factors[at] = (factors[at]! + term) % p;
    }
    let kept = 0;
    for (let i = 0; i < length; i++)
      if (factors[i] !== 0) {
        roots[kept] = roots[i]!;
        factors[kept++] = factors[i]!;
      }
    this.length = kept;
  }
}
