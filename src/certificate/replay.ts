/**
 * The evidence of an exhaustive search: which sweeps over which outputs leave which core. The same walk that a checker makes, by
 * this library's own code; the rules of the walk are those of docs/certificate.md.
 *
 * Cost: a gather a swept output. Memory: 8 bytes a packed candidate.
 */
import type { Field } from '../linear/field.ts';
import { WeightedForest } from '../linear/forest.ts';
import type { SparseVector } from '../linear/sparse.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { type WindowTable, windowTable } from '../search/windows.ts';

export class Replay {
  readonly #table: WindowTable;
  readonly #forest: WeightedForest;
  readonly #coefficients: Float64Array;
  readonly #limit: number;
  readonly #reach: number;
  /** The row reduced last: so many representatives of classes, and factors, none zero. */
  #count = 0;
  readonly #classes: Uint32Array;
  readonly #factors: Uint32Array;

  /** @param range n(range + 2r − 2) ≤ 16: a term that sticks out on the left of the longest output still fits 32 bits */
  constructor(
    readonly h: Hamiltonian,
    readonly range: number,
    readonly field: Field,
  ) {
    this.#table = windowTable(h);
    const { cellBits, values } = this.#table;
    this.#limit = 2 ** (cellBits * range);
    this.#reach = h.range;
    // "Nothing in the first cell, X in the second" is no representative: its place is the zero root's.
    this.#forest = new WeightedForest(this.#limit - 1, 2 ** cellBits, field);
    this.#coefficients = Float64Array.from(values, (v) => field.residue(v));
    const room = this.#table.start.reduce(
      (most, end, w, start) => Math.max(most, end - (start[w - 1] ?? 0)),
      0,
    );
    this.#classes = new Uint32Array(room * (range + 2 * h.range));
    this.#factors = new Uint32Array(this.#classes.length);
  }

  /** Equations used so far: the rank they prove. */
  get uses(): number {
    return this.#forest.uses;
  }

  /** Visits the outputs of `cells` cells from … to − 1, rising: uses those with one class or two left. @returns those with more */
  sweep(cells: number, from: number, to: number): number[] {
    const cellMask = 2 ** this.#table.cellBits - 1;
    const open: number[] = [];
    for (let output = from; output < to; output++)
      if ((output & cellMask) !== 0 && !this.#visit(output, cells)) open.push(output);
    return open;
  }

  /**
   * The same sweep once more. A row that was used, or had no class left, has none for good: only those left open are visited.
   *
   * @returns those that still are
   */
  sweepAgain(cells: number, open: readonly number[]): number[] {
    return open.filter((output) => !this.#visit(output, cells));
  }

  #visit(output: number, cells: number): boolean {
    this.#reduce(output, cells);
    const classes = this.#classes;
    if (this.#count === 1) this.#forest.setZero(classes[0]!);
    else if (this.#count === 2)
      this.#forest.tie(classes[0]!, this.#factors[0]!, classes[1]!, this.#factors[1]!);
    return this.#count <= 2;
  }

  /** The row of an output, in classes that may be non-zero. */
  #reduce(output: number, cells: number): void {
    const { cellBits, bits, start, image } = this.#table;
    const { link, zero } = this.#forest;
    const limit = this.#limit;
    const cellMask = 2 ** cellBits - 1;
    const mask = 2 ** bits - 1;
    this.#count = 0;
    for (let at = 1 - this.#reach; at < cells; at++) {
      // Inside, a term leaves both ends alone, and the parent is as long as the output.
      if (at === 1 && cells > this.range) at = Math.max(1, cells - this.#reach);
      const shifted = at < 0 ? (output << (-at * cellBits)) >>> 0 : output;
      const shift = at < 0 ? 0 : at * cellBits;
      const window = (shifted >>> shift) & mask;
      for (let i = start[window]!; i < start[window + 1]!; i++) {
        let parent = (shifted ^ ((image[i]! ^ window) << shift)) >>> 0;
        while ((parent & cellMask) === 0) parent >>>= cellBits;
        if (parent < limit && link[parent] !== zero) this.#add(parent, i);
      }
    }
    const classes = this.#classes;
    const factors = this.#factors;
    let kept = 0;
    for (let i = 0; i < this.#count; i++)
      if (factors[i] !== 0) {
        classes[kept] = classes[i]!;
        factors[kept++] = factors[i]!;
      }
    this.#count = kept;
  }

  #add(parent: number, entry: number): void {
    const forest = this.#forest;
    const root = forest.root(parent);
    if (root === forest.zero) return;
    const { multiply, p } = this.field;
    const classes = this.#classes;
    const factors = this.#factors;
    const term = multiply(this.#coefficients[this.#table.backward[entry]!]!, forest.rootWeight);
    let at = 0;
    while (at < this.#count && classes[at] !== root) at++;
    if (at === this.#count) {
      classes[at] = root;
      factors[at] = term;
      this.#count++;
    } else factors[at] = (factors[at]! + term) % p;
  }

  /** The rows of outputs with a class left, in classes numbered from 0 on as they come up. */
  core(layers: Iterable<readonly [cells: number, outputs: readonly number[]]>): Core {
    const index = new Map<number, number>();
    const outputs: number[] = [];
    const rows: SparseVector[] = [];
    for (const [cells, open] of layers)
      for (const output of open) {
        this.#reduce(output, cells);
        if (this.#count === 0) continue;
        const entries = Array.from(this.#classes.subarray(0, this.#count), (c, i) => {
          if (!index.has(c)) index.set(c, index.size);
          return [index.get(c)!, this.#factors[i]!] as const;
        });
        entries.sort((a, b) => a[0] - b[0]);
        outputs.push(output);
        rows.push({ columns: entries.map(([c]) => c), values: entries.map(([, v]) => v) });
      }
    return { outputs, rows, columns: index.size };
  }
}

/** What the sweeps leave: rows that tie three or more classes. */
export interface Core {
  readonly outputs: readonly number[];
  readonly rows: readonly SparseVector[];
  readonly columns: number;
}
