/**
 * Sparse elimination over GF(p) for the core of a search and for canonical bases: short rows first, each reduced by the
 * pivot rows found so far, leftmost column as pivot.
 */
import type { Field } from './field.ts';
import type { SparseVector } from './sparse.ts';

export interface Echelon {
  readonly rank: number;
  /** Pivot rows by falling pivot column, each with a leading 1. */
  readonly pivots: ReadonlyMap<number, SparseVector>;
  /** A basis of the vectors that every row annihilates: one a free column. */
  nullSpace(): SparseVector[];
}

/** Row echelon form. Cost: rows × length of the reduced rows; all sparse. */
export function eliminate(rows: readonly SparseVector[], columns: number, field: Field): Echelon {
  const { p, multiply, inverse } = field;
  const pivots = new Map<number, SparseVector>();
  const scratch = new Scratch(columns);
  const byLength = rows
    .map((_, i) => i)
    .sort((a, b) => rows[a]!.columns.length - rows[b]!.columns.length || a - b);
  for (const index of byLength) {
    if (pivots.size === columns) break;
    scratch.load(rows[index]!);
    const reduced = reduceLeading(scratch, pivots, field);
    if (reduced === undefined) continue;
    const scale = inverse(reduced.values[0]!);
    pivots.set(reduced.columns[0]!, {
      columns: reduced.columns,
      values: reduced.values.map((v) => multiply(v, scale)),
    });
  }
  return {
    rank: pivots.size,
    pivots,
    nullSpace() {
      const order = [...pivots.keys()].sort((a, b) => b - a);
      const free: number[] = [];
      for (let c = 0; c < columns; c++) if (!pivots.has(c)) free.push(c);
      // Each pivot unknown as a combination of free ones, from the last pivot up.
      const solved = new Map<number, Map<number, number>>();
      for (const pivot of order) {
        const sum = new Map<number, number>();
        const row = pivots.get(pivot)!;
        for (let i = 1; i < row.columns.length; i++) {
          const c = row.columns[i]!;
          const factor = p - row.values[i]!;
          for (const [f, v] of solved.get(c) ?? [[c, 1] as const])
            sum.set(f, ((sum.get(f) ?? 0) + multiply(factor, v)) % p);
        }
        for (const [f, v] of sum) if (v === 0) sum.delete(f);
        solved.set(pivot, sum);
      }
      const vectors = new Map(free.map((f) => [f, [[f, 1]] as [number, number][]]));
      for (const [pivot, sum] of solved) for (const [f, v] of sum) vectors.get(f)!.push([pivot, v]);
      return free.map((f) => {
        const entries = vectors.get(f)!.sort((a, b) => a[0] - b[0]);
        return { columns: entries.map(([c]) => c), values: entries.map(([, v]) => v) };
      });
    },
  };
}

/** The reduced row echelon form of the span of the rows: leading entries 1, sorted by pivot, no row has an entry in another's pivot. */
export function reducedBasis(rows: readonly SparseVector[], columns: number, field: Field): SparseVector[] {
  const { pivots } = eliminate(rows, columns, field);
  const order = [...pivots.keys()].sort((a, b) => b - a);
  const scratch = new Scratch(columns);
  const done = new Map<number, SparseVector>();
  for (const pivot of order) {
    const row = pivots.get(pivot)!;
    scratch.load(row);
    for (const c of row.columns) {
      const other = c === pivot ? undefined : done.get(c);
      if (other !== undefined) scratch.subtract(other, scratch.value[c]!, field);
    }
    done.set(pivot, scratch.unload());
  }
  return order.reverse().map((pivot) => done.get(pivot)!);
}

function reduceLeading(
  scratch: Scratch,
  pivots: ReadonlyMap<number, SparseVector>,
  field: Field,
): SparseVector | undefined {
  for (;;) {
    const column = scratch.takeLowest();
    if (column < 0) return undefined;
    const value = scratch.value[column]!;
    if (value === 0) continue;
    const pivot = pivots.get(column);
    if (pivot === undefined) return scratch.unload(column);
    scratch.subtract(pivot, value, field);
  }
}

/** A dense accumulator with a heap of the columns in use, so that a sparse row costs what it holds. */
class Scratch {
  readonly value: Float64Array;
  readonly #listed: Uint8Array;
  readonly #heap: number[] = [];

  constructor(columns: number) {
    this.value = new Float64Array(columns);
    this.#listed = new Uint8Array(columns);
  }

  load(row: SparseVector): void {
    row.columns.forEach((c, i) => {
      this.#list(c);
      this.value[c] = row.values[i]!;
    });
  }

  /** Subtracts `factor` times a row. */
  subtract(row: SparseVector, factor: number, { p, multiply }: Field): void {
    const negative = p - factor;
    for (let i = 0; i < row.columns.length; i++) {
      const c = row.columns[i]!;
      if (this.#listed[c] === 0) this.#list(c);
      const sum = this.value[c]! + multiply(negative, row.values[i]!);
      this.value[c] = sum >= p ? sum - p : sum;
    }
  }

  #list(column: number): void {
    if (this.#listed[column] === 1) return;
    this.#listed[column] = 1;
    const heap = this.#heap;
    let at = heap.length;
    heap.push(column);
    while (at > 0) {
      const parent = (at - 1) >> 1;
      if (heap[parent]! <= column) break;
      heap[at] = heap[parent]!;
      at = parent;
    }
    heap[at] = column;
  }

  /** Removes and returns the lowest listed column, −1 when there is none. Its value stays until `unload`. */
  takeLowest(): number {
    const heap = this.#heap;
    if (heap.length === 0) return -1;
    const lowest = heap[0]!;
    const last = heap.pop()!;
    if (heap.length > 0) {
      let at = 0;
      for (;;) {
        let child = 2 * at + 1;
        if (child >= heap.length) break;
        if (child + 1 < heap.length && heap[child + 1]! < heap[child]!) child++;
        if (heap[child]! >= last) break;
        heap[at] = heap[child]!;
        at = child;
      }
      heap[at] = last;
    }
    this.#listed[lowest] = 0;
    return lowest;
  }

  /** Empties the accumulator into a sparse row; `first` is a column already taken from the heap that still counts. */
  unload(first = -1): SparseVector {
    const columns: number[] = [];
    const values: number[] = [];
    for (let c = first < 0 ? this.takeLowest() : first; c >= 0; c = this.takeLowest()) {
      if (this.value[c] !== 0) {
        columns.push(c);
        values.push(this.value[c]!);
      }
      this.value[c] = 0;
    }
    return { columns, values };
  }
}
