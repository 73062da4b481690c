/**
 * Growth of strings at their two ends, cell by cell, and the pencil of an injective chain. `docs/theory.md`, sections 1 to 3.
 *
 * `O_j` are the densities of range exactly j. All commutators are taken as `i[·,·]/2`, so everything is real and integer.
 */
import { Operator } from '../algebra/operator.ts';
import { phaseExponent, type Word } from '../algebra/word.ts';
import type { IntegerVector } from '../search/charges.ts';
import { exactNullSpace, MatrixBuilder } from '../search/null-space.ts';
import type { BondsAndFields } from './decompose.ts';
import { type Pencil, pencilFromRelations, ZERO_PENCIL } from './pencil.ts';

/** Wave numbers 0 and π: Q = Σ ω^j τ_j(q) with ω = 1 or −1. */
export type Sign = 1 | -1;

export class CellGrowth {
  readonly #bits: number;
  readonly #terms: readonly { readonly word: number; readonly value: bigint }[];
  readonly #omega: bigint;

  constructor(
    readonly model: BondsAndFields,
    omega: Sign = 1,
  ) {
    this.#bits = 2 * model.spins;
    this.#terms = [...model.bond.numerators].map(([word, value]) => ({ word: Number(word), value }));
    this.#omega = BigInt(omega);
  }

  /** `R q = [q, h]`, h on the last cell and a new one behind it; q on `cells` cells. */
  right(q: Operator, cells: number): Operator {
    return q.bracket(this.#bondAt(cells - 1));
  }

  /** `ω A q = ω [h, q]`, h on a new cell in front and the first cell of q. */
  left(q: Operator): Operator {
    return this.model.bond.bracket(this.#moved(q, 1)).times(this.#omega);
  }

  #moved(q: Operator, cells: number): Operator {
    return q.mapWords((word) => word << BigInt(this.#bits * cells));
  }

  #bondAt(cell: number): Operator {
    return this.#moved(this.model.bond, cell);
  }

  #fieldAt(cell: number): Operator {
    return this.#moved(this.model.field, cell);
  }

  /** Adds the column of `(R − ωA)` of one string on `cells` cells. */
  addColumn(builder: MatrixBuilder, column: number, string: number, cells: number): void {
    const behind = this.#bits * (cells - 1);
    const moved = string << this.#bits;
    for (const { word, value } of this.#terms) {
      const after = word << behind;
      let phase = phaseExponent(string, after);
      if ((phase & 1) === 1) builder.add(string ^ after, column, phase === 1 ? -value : value);
      phase = phaseExponent(word, moved);
      if ((phase & 1) === 1) builder.add(word ^ moved, column, this.#omega * (phase === 1 ? value : -value));
    }
  }

  /** All strings of range exactly `cells`. */
  strings(cells: number): number[] {
    const letters = 2 ** this.#bits;
    const inner = letters ** Math.max(0, cells - 2);
    const list: number[] = [];
    if (cells === 1) for (let a = 1; a < letters; a++) list.push(a);
    else
      for (let last = 1; last < letters; last++)
        for (let middle = 0; middle < inner; middle++)
          for (let first = 1; first < letters; first++) list.push(first + letters * (middle + inner * last));
    return list;
  }

  /** V_2 = ker(R − ωA) on O_2. */
  topParts(): Operator[] {
    const strings = this.strings(2);
    const builder = new MatrixBuilder();
    strings.forEach((string, column) => {
      this.addColumn(builder, column, string, 2);
    });
    return exactNullSpace(builder.finish(strings.length)).map(({ columns, values }) =>
      Operator.fromIntegers(columns.map((c, i) => [BigInt(strings[c]!), values[i]!] as const)),
    );
  }

  /** α(f) and β(f) in O_4, by section 2. */
  inner(f: Operator): { alpha: Operator; beta: Operator } {
    const f3 = this.right(f, 2);
    const f4 = this.left(f3);
    const m = f4.bracket(this.#bondAt(1));
    const g = f3.bracket(this.#fieldAt(1));
    const last = BigInt(2 * this.#bits);
    const first = (1n << BigInt(this.#bits)) - 1n;
    const eLeft = f3
      .bracket(this.model.bond.plus(this.model.field))
      .filter((word: Word) => (word & first) !== 0n);
    const eRight = f3
      .bracket(this.#bondAt(1).plus(this.#fieldAt(2)))
      .filter((word: Word) => word >> last !== 0n);
    return {
      alpha: this.right(g.plus(eLeft).plus(eRight), 3),
      beta: m.plus(this.right(g, 3)),
    };
  }

  /** The pencil α + (k − 3) β modulo (R − ωA) O_3, with V_2. */
  pencil(): { topParts: Operator[]; pencil: Pencil } {
    const topParts = this.topParts();
    if (topParts.length === 0) return { topParts, pencil: ZERO_PENCIL };
    const inner = topParts.map((f) => this.inner(f));
    return { topParts, pencil: pencilFromRelations(this.#relations(inner), topParts.length) };
  }

  /**
   * Why the pencil loses rank at t: combinations c of the top parts and x in O_3 with Σ c_i (α_i + t β_i) = (R − ωA) x, the c independent.
   */
  witnesses(
    topParts: readonly Operator[],
    t: bigint,
  ): { readonly parts: readonly bigint[]; readonly x: Operator }[] {
    const builder = new MatrixBuilder();
    topParts.forEach((f, i) => {
      const { alpha, beta } = this.inner(f);
      for (const [word, value] of alpha.plus(beta.times(t)).numerators) builder.add(Number(word), i, value);
    });
    const strings = this.strings(3);
    const v = topParts.length;
    strings.forEach((string, i) => {
      this.addColumn(builder, v + i, string, 3);
    });
    return exactNullSpace(builder.finish(v + strings.length)).flatMap(({ columns, values }) => {
      if (columns[0]! >= v) return [];
      const parts = new Array<bigint>(v).fill(0n);
      const x: [bigint, bigint][] = [];
      columns.forEach((c, i) => {
        if (c < v) parts[c] = values[i]!;
        else x.push([BigInt(strings[c - v]!), -values[i]!]);
      });
      return [{ parts, x: Operator.fromIntegers(x) }];
    });
  }

  #relations(inner: readonly { alpha: Operator; beta: Operator }[]): IntegerVector[] {
    const builder = new MatrixBuilder();
    const r = inner.length;
    inner.forEach(({ alpha, beta }, i) => {
      for (const [word, value] of alpha.numerators) builder.add(Number(word), i, value);
      for (const [word, value] of beta.numerators) builder.add(Number(word), r + i, value);
    });
    const strings = this.strings(3);
    strings.forEach((string, i) => {
      this.addColumn(builder, 2 * r + i, string, 3);
    });
    return exactNullSpace(builder.finish(2 * r + strings.length));
  }
}

/**
 * Have `a ↦ [a⊗1, h]` and `a ↦ [h, 1⊗a]` no kernel on traceless one-cell operators? Kernels, empty for an injective interaction.
 */
export function injectivity({ bond, spins }: BondsAndFields): { left: Operator[]; right: Operator[] } {
  const letters = 4 ** spins;
  const kernelOf = (shift: number): Operator[] => {
    const builder = new MatrixBuilder();
    for (let a = 1; a < letters; a++)
      for (const [word, value] of bond.numerators) {
        const string = a << shift;
        const phase = phaseExponent(string, Number(word));
        if ((phase & 1) === 1) builder.add(string ^ Number(word), a - 1, phase === 1 ? -value : value);
      }
    return exactNullSpace(builder.finish(letters - 1)).map(({ columns, values }) =>
      Operator.fromIntegers(columns.map((c, i) => [BigInt(c + 1), values[i]!] as const)),
    );
  };
  return { left: kernelOf(0), right: kernelOf(2 * spins) };
}
