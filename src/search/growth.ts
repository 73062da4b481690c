/**
 * The output-sensitive first stage, for injective nearest-neighbour interactions: candidates that are zero are never visited.
 *
 * Write R and A for growth by the bond at the right and left end, and V_m for the densities of range m that R − A kills. Where
 * the interaction is injective, V_m = R^{m−2} V_2 (docs/theory.md, the lifting lemma; it holds over any field in which the
 * interaction is injective, GF(p) included). So the strings of range m of a charge are a vector of V_m, one parameter a basis
 * vector, plus a particular solution of (R − A) x = −D, where D is what longer strings leave on outputs of range m + 1. Where no longer
 * ones are left, m is the range of the charge, and only the vectors of V_m that the pencil allows come in question. Outputs
 * where D vanishes and strings that no such output ties to the rest of it need not be looked at: their part is in V_m.
 *
 * Every string known so far is a combination of the parameters. Layers go down from the longest range; a layer is solved
 * component by component, and equations that are left over tie the parameters to each other.
 * Cost: a look at each living string and its neighbours; nothing grows with the number of candidates.
 */
import { eliminate, reducedBasis } from '../linear/elimination.ts';
import type { Field } from '../linear/field.ts';
import type { SparseVector } from '../linear/sparse.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { cellsOf } from './assemble.ts';
import { candidateCount } from './estimate.ts';
import type { OnProgress } from './sweep.ts';
import { MAX_PENCIL_CELL, TopParts } from './top-parts.ts';
import { Neighbourhood, type WindowTable, windowTable } from './windows.ts';

/** A combination of the parameters; shorter than their number where the rest is zero. */
type Combination = readonly number[];

/** Residues by string. */
type Vector = ReadonlyMap<number, number>;

/** Equation of one output: growth parents with coefficients, and what longer strings leave there. */
interface Row {
  readonly parents: readonly number[];
  readonly coefficients: readonly number[];
  readonly rest: Combination;
}

/**
 * A set of packed strings that holds the support of every charge of range ≤ `range`, modulo p.
 *
 * Undefined where the lemma does not apply: interactions of range other than 2, or not injective modulo p.
 */
export function livingByGrowth(
  h: Hamiltonian,
  range: number,
  field: Field,
  onProgress: OnProgress = () => {},
): Float64Array | undefined {
  if (h.range !== 2) return undefined;
  const table = windowTable(h);
  const coefficients = table.values.map((v) => field.residue(v));
  if (!isInjective(table, coefficients, field)) return undefined;
  return new Growth(h, table, coefficients, range, field, onProgress).run();
}

/** Have `a ↦ [a⊗1, h]` and `a ↦ [h, 1⊗a]` no kernel on one-cell operators without a trace, h being the two-cell part? */
function isInjective(table: WindowTable, coefficients: readonly number[], field: Field): boolean {
  const { cellBits, start, image, forward } = table;
  const cells = 2 ** cellBits;
  return [0, cellBits].every((offset) => {
    const index = new Map<number, number>();
    const rows: SparseVector[] = [];
    for (let a = 1; a < cells; a++) {
      const window = a << offset;
      const entries = new Map<number, number>();
      for (let i = start[window]!; i < start[window + 1]!; i++) {
        const other = offset === 0 ? image[i]! >>> cellBits : image[i]! & (cells - 1);
        // Growth to the other cell: the term is a bond.
        if (other === 0) continue;
        const column = index.get(image[i]!) ?? index.size;
        index.set(image[i]!, column);
        entries.set(column, coefficients[forward[i]!]!);
      }
      const order = [...entries].sort((x, y) => x[0] - y[0]);
      rows.push({ columns: order.map(([c]) => c), values: order.map(([, v]) => v) });
    }
    return eliminate(rows, index.size, field).rank === cells - 1;
  });
}

/** The layer at hand: outputs of range m + 1, strings of range m. */
interface Layer {
  readonly m: number;
  /** Outputs whose equation has been used. */
  readonly done: Set<number>;
  /** Strings whose value has been settled; their part in V_m comes on top. */
  readonly known: Set<number>;
  /** Outputs to start from. */
  readonly waiting: number[];
}

/** a + factor·b. */
function sum(a: Combination, factor: number, b: Combination, { p, multiply }: Field): Combination {
  if (b.length === 0) return a;
  const total = a.slice();
  for (const [j, v] of b.entries()) total[j] = ((total[j] ?? 0) + (v === 0 ? 0 : multiply(factor, v))) % p;
  return total;
}

class Growth {
  readonly #near: Neighbourhood;
  readonly #values = new Map<number, Combination>();
  #parameters = 0;
  #constraints: SparseVector[] = [];

  constructor(
    readonly h: Hamiltonian,
    readonly table: WindowTable,
    readonly coefficients: readonly number[],
    readonly range: number,
    readonly field: Field,
    readonly onProgress: OnProgress,
  ) {
    this.#near = new Neighbourhood(table, range + 1);
  }

  run(): Float64Array {
    // Ranges 1 and 2 are few and go to the final system whole.
    const short = 2 ** (2 * this.table.cellBits);
    const cellMask = 2 ** this.table.cellBits - 1;
    const { shortest, allowed } = this.#topParts();
    for (let m = this.range; m >= 3; m--) {
      this.#solveLayer(m);
      // Below longer strings a particular solution is known, and any vector of V_m may have to make up for its choice.
      for (const part of this.#parameters === 0 ? allowed[m]! : shortest) {
        let vector = part;
        for (let cells = 2; cells < m; cells++) vector = this.#grow(vector, cells);
        const parameter = this.#parameters++;
        for (const [string, value] of vector) this.#add(string, parameter, value);
      }
    }
    const strings: number[] = [];
    for (let string = 1; string < Math.min(short, 2 ** (this.range * this.table.cellBits)); string++)
      if ((string & cellMask) !== 0) strings.push(string);
    for (const string of this.#values.keys()) if (string >= short) strings.push(string);
    return Float64Array.from(strings);
  }

  /**
   * A basis of V_2; and for every range m ≥ 3 one of the f in V_2 for which R^{m−2} f can be the part of full range of a charge: those
   * that the pencil allows, and all where the cell is too wide for it.
   */
  #topParts(): { shortest: readonly Vector[]; allowed: readonly (readonly Vector[])[] } {
    if (this.range < 3) return { shortest: [], allowed: [] };
    const parts = new TopParts(this.h, this.field);
    const shortest = parts.shortest.map(
      (f) => new Map([...f.numerators].map(([word, value]) => [Number(word), Number(value)])),
    );
    if (this.h.chain.cell > MAX_PENCIL_CELL)
      return { shortest, allowed: Array.from({ length: this.range + 1 }, () => shortest) };
    const steps = parts.allowed(this.range);
    for (;;) {
      const step = steps.next();
      this.#report(this.range);
      if (step.done)
        return {
          shortest,
          allowed: step.value.map((basis) => basis.map((f) => this.#combined(shortest, f))),
        };
    }
  }

  #combined(vectors: readonly Vector[], { columns, values }: SparseVector): Vector {
    const { p, multiply } = this.field;
    const total = new Map<number, number>();
    columns.forEach((c, i) => {
      for (const [string, value] of vectors[c]!)
        total.set(string, ((total.get(string) ?? 0) + multiply(values[i]!, value)) % p);
    });
    return total;
  }

  /** R on a density of range m: the bond at the last cell. */
  #grow(vector: Vector, m: number): Vector {
    const { start, image, forward, cellBits } = this.table;
    const { p, multiply } = this.field;
    const unit = 2 ** (cellBits * (m - 1));
    const grown = new Map<number, number>();
    for (const [string, value] of vector) {
      const last = Math.floor(string / unit);
      for (let i = start[last]!; i < start[last + 1]!; i++) {
        if (image[i]! >>> cellBits === 0) continue;
        const output = string + (image[i]! - last) * unit;
        grown.set(output, ((grown.get(output) ?? 0) + multiply(value, this.coefficients[forward[i]!]!)) % p);
      }
    }
    for (const [output, value] of grown) if (value === 0) grown.delete(output);
    return grown;
  }

  /** The strings of range m that outputs of range m + 1 tie to longer ones. */
  #solveLayer(m: number): void {
    const layer: Layer = { m, done: new Set(), known: new Set(), waiting: [] };
    let looked = 0;
    for (const string of [...this.#values.keys()]) {
      const cells = cellsOf(string, this.table.cellBits);
      if (cells > m + 2) continue;
      if ((++looked & 0xff) === 0) this.#report(m);
      for (const output of this.#outputs(string, cells, m + 1)) layer.waiting.push(output);
      while (layer.waiting.length > 0 && !this.#isExhausted())
        this.#solveComponent(layer.waiting.pop()!, layer);
      if (this.#isExhausted()) break;
    }
    this.#substitute();
    this.#report(m);
  }

  /** Do the constraints tie every parameter to zero? Then nothing long is left, and the rest of the layer says nothing new. */
  #isExhausted(): boolean {
    if (this.#constraints.length < this.#parameters) return false;
    this.#constraints = reducedBasis(this.#constraints, this.#parameters, this.field);
    return this.#constraints.length === this.#parameters;
  }

  /** The outputs of a range that a string reaches, each once. */
  #outputs(string: number, cells: number, range: number): number[] {
    const outputs: number[] = [];
    this.#near.visit(string, cells);
    for (let i = 0; i < this.#near.count; i++) {
      const output = this.#near.images[i]!;
      if (cellsOf(output, this.table.cellBits) === range && !outputs.includes(output)) outputs.push(output);
    }
    return outputs;
  }

  #report(m: number): void {
    this.onProgress({
      stage: 'sweep',
      layer: m,
      done: 1 - m / (this.range + 1),
      candidates: candidateCount(this.table.cellBits / 2, this.range),
    });
  }

  /** The equation of an output of range m + 1. */
  #rowOf(output: number, m: number): Row {
    const { cellBits, backward } = this.table;
    const { p, multiply } = this.field;
    const parents: number[] = [];
    const coefficients: number[] = [];
    const rest: number[] = [];
    this.#near.visit(output, m + 1);
    const growth = 2 ** (cellBits * m);
    for (let i = 0; i < this.#near.count; i++) {
      const parent = this.#near.images[i]!;
      const coefficient = this.coefficients[backward[this.#near.entries[i]!]!]!;
      if (parent < growth) {
        const at = parents.indexOf(parent);
        if (at < 0) {
          parents.push(parent);
          coefficients.push(coefficient);
        } else coefficients[at] = (coefficients[at]! + coefficient) % p;
        continue;
      }
      const value = this.#values.get(parent);
      if (value === undefined) continue;
      for (let j = 0; j < value.length; j++)
        rest[j] = ((rest[j] ?? 0) + (value[j] === 0 ? 0 : multiply(coefficient, value[j]!))) % p;
    }
    return { parents, coefficients, rest: rest.every((v) => v === 0) ? [] : rest };
  }

  /**
   * Everything that is tied to one output, solved in terms of the parameters.
   *
   * An output with one unknown parent settles it, at once and before anything else is explored: a contradiction between two
   * such outputs is a constraint on the parameters, and constraints found early spare the rest. What no output settles alone
   * is eliminated together.
   */
  #solveComponent(first: number, layer: Layer): void {
    const { m, done, known, waiting } = layer;
    const { multiply, inverse, p } = this.field;
    const rows = new Map<number, Row>();
    const rowOf = (output: number): Row => {
      let row = rows.get(output);
      if (row === undefined) {
        row = this.#rowOf(output, m);
        rows.set(output, row);
      }
      return row;
    };
    const unknown = new Set<number>();
    const explored = new Set<number>();
    const queue = [first];
    const settling: { string: number; value: Combination }[] = [];

    /** Uses an output that has at most one unknown parent. `reaching`: settle a parent not met before, too. */
    const use = (output: number, reaching: boolean): void => {
      if (done.has(output)) return;
      const { parents, coefficients, rest } = rowOf(output);
      let open = -1;
      for (const [i, parent] of parents.entries()) {
        if (known.has(parent)) continue;
        if (open >= 0) return;
        open = i;
      }
      if (open >= 0 && !reaching && !unknown.has(parents[open]!)) return;
      done.add(output);
      let total = rest;
      for (const [i, parent] of parents.entries())
        if (i !== open) total = sum(total, coefficients[i]!, this.#values.get(parent) ?? [], this.field);
      if (open < 0) this.#constrain(total);
      else {
        const factor = p - inverse(coefficients[open]!);
        settling.push({
          string: parents[open]!,
          value: total.map((v) => (v === 0 ? 0 : multiply(factor, v))),
        });
      }
    };
    const settle = (): void => {
      for (let next = settling.pop(); next !== undefined; next = settling.pop()) {
        const { string, value } = next;
        if (known.has(string)) {
          // Two outputs settled the same string: they must agree.
          this.#constrain(sum(value, p - 1, this.#values.get(string) ?? [], this.field));
          continue;
        }
        known.add(string);
        unknown.delete(string);
        let isZero = true;
        for (const [j, v] of value.entries())
          if (v !== 0) {
            isZero = false;
            this.#add(string, j, v);
          }
        for (const output of this.#outputs(string, m, m + 1)) {
          use(output, !isZero || rowOf(output).rest.length > 0);
          if (!isZero) waiting.push(output);
        }
        if (this.#isExhausted()) return;
      }
    };

    while (queue.length > 0) {
      const output = queue.pop()!;
      if (done.has(output) || explored.has(output)) continue;
      explored.add(output);
      for (const parent of rowOf(output).parents) {
        if (unknown.has(parent) || known.has(parent)) continue;
        unknown.add(parent);
        const outputs = this.#outputs(parent, m, m + 1);
        for (const o of outputs) use(o, true);
        settle();
        if (this.#isExhausted()) return;
        if (unknown.has(parent)) queue.push(...outputs);
      }
      use(output, true);
      settle();
      if (this.#isExhausted()) return;
    }

    const columns = new Map([...unknown].map((string, i) => [string, i]));
    const count = columns.size;
    const system: SparseVector[] = [];
    for (const output of explored) {
      if (done.has(output)) continue;
      done.add(output);
      const row = rowOf(output);
      let { rest } = row;
      const entries: [number, number][] = [];
      for (const [i, parent] of row.parents.entries()) {
        const column = columns.get(parent);
        if (column !== undefined) entries.push([column, row.coefficients[i]!]);
        else rest = sum(rest, row.coefficients[i]!, this.#values.get(parent) ?? [], this.field);
      }
      for (const [j, value] of rest.entries()) if (value !== 0) entries.push([count + j, value]);
      if (entries.length === 0) continue;
      entries.sort((a, b) => a[0] - b[0]);
      system.push({ columns: entries.map(([c]) => c), values: entries.map(([, v]) => v) });
    }
    const strings = [...columns.keys()];
    for (const string of strings) known.add(string);
    for (const { columns: cs, values } of reducedBasis(system, count + this.#parameters, this.field)) {
      if (cs[0]! >= count) {
        this.#constraints.push({ columns: cs.map((c) => c - count), values });
        continue;
      }
      // A free string of the component belongs to V_m, which has parameters of its own: zero in this particular solution.
      for (let i = 1; i < cs.length; i++)
        if (cs[i]! >= count) this.#add(strings[cs[0]!]!, cs[i]! - count, p - values[i]!);
    }
  }

  #constrain(combination: Combination): void {
    const columns: number[] = [];
    const values: number[] = [];
    for (const [j, v] of combination.entries())
      if (v !== 0) {
        columns.push(j);
        values.push(v);
      }
    if (columns.length > 0) this.#constraints.push({ columns, values });
  }

  #add(string: number, parameter: number, value: number): void {
    const old = this.#values.get(string);
    const sum = old === undefined ? [] : old.slice();
    for (let j = sum.length; j <= parameter; j++) sum.push(0);
    sum[parameter] = (sum[parameter]! + value) % this.field.p;
    this.#values.set(string, sum);
  }

  /** Writes everything in terms of the parameters that the constraints leave free, and numbers these anew. */
  #substitute(): void {
    if (this.#constraints.length === 0) return;
    const { p, multiply } = this.field;
    const reduced = reducedBasis(this.#constraints, this.#parameters, this.field);
    this.#constraints = reduced;
    const pivots = new Map(reduced.map((row) => [row.columns[0]!, row]));
    const renumbered: number[] = [];
    let free = 0;
    for (let j = 0; j < this.#parameters; j++) renumbered.push(pivots.has(j) ? -1 : free++);
    for (const [string, value] of this.#values) {
      const sum = new Array<number>(free).fill(0);
      for (const [j, v] of value.entries()) {
        if (v === 0) continue;
        const pivot = pivots.get(j);
        if (pivot === undefined) sum[renumbered[j]!] = (sum[renumbered[j]!]! + v) % p;
        else
          for (let i = 1; i < pivot.columns.length; i++) {
            const k = renumbered[pivot.columns[i]!]!;
            sum[k] = (sum[k]! + multiply(v, p - pivot.values[i]!)) % p;
          }
      }
      if (sum.every((v) => v === 0)) this.#values.delete(string);
      else this.#values.set(string, sum);
    }
    this.#parameters = free;
    this.#constraints = [];
  }
}
