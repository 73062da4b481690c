/**
 * Growth of strings at their two ends, cell by cell, and the pencil of an injective chain. `docs/theory.md`, sections 1 to 3.
 */
import { Operator } from '../algebra/operator.ts';
import { phaseExponent } from '../algebra/word.ts';
import { BondGrowth, stringsOfRange } from '../search/bond-growth.ts';
import type { IntegerVector } from '../search/charges.ts';
import { exactNullSpace, MatrixBuilder } from '../search/null-space.ts';
import type { BondsAndFields } from './decompose.ts';
import { type Pencil, pencilFromRelations, type Witness, witnessesOf, ZERO_PENCIL } from './pencil.ts';

/** Wave numbers 0 and π: Q = Σ ω^j τ_j(q) with ω = 1 or −1. */
export type Sign = 1 | -1;

export class CellGrowth extends BondGrowth {
  readonly #terms: readonly { readonly word: number; readonly value: bigint }[];

  constructor(
    readonly model: BondsAndFields,
    omega: Sign = 1,
  ) {
    super(model.bond, model.field, 2 * model.spins, BigInt(omega));
    this.#terms = [...model.bond.numerators].map(([word, value]) => ({ word: Number(word), value }));
  }

  /** Adds the column of `(R − ωA)` of one string on `cells` cells. */
  addColumn(builder: MatrixBuilder, column: number, string: number, cells: number): void {
    const behind = this.cellBits * (cells - 1);
    const moved = string << this.cellBits;
    for (const { word, value } of this.#terms) {
      const after = word << behind;
      let phase = phaseExponent(string, after);
      if ((phase & 1) === 1) builder.add(string ^ after, column, phase === 1 ? -value : value);
      phase = phaseExponent(word, moved);
      if ((phase & 1) === 1) builder.add(word ^ moved, column, this.omega * (phase === 1 ? value : -value));
    }
  }

  /** All strings of range exactly `cells`. */
  strings(cells: number): number[] {
    return stringsOfRange(this.cellBits, cells);
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

  /** The pencil α + (k − 3) β modulo (R − ωA) O_3, with V_2. */
  pencil(): { topParts: Operator[]; pencil: Pencil } {
    const topParts = this.topParts();
    if (topParts.length === 0) return { topParts, pencil: ZERO_PENCIL };
    const inner = topParts.map((f) => this.inner(f));
    return { topParts, pencil: pencilFromRelations(this.#relations(inner), topParts.length) };
  }

  /** Why the pencil loses rank at t, x in O_3: see `witnessesOf`. */
  witnesses(topParts: readonly Operator[], t: bigint): Witness[] {
    return witnessesOf(
      topParts.map((f) => {
        const { alpha, beta } = this.inner(f);
        return [...alpha.plus(beta.times(t)).numerators].map(([word, value]) => [Number(word), value]);
      }),
      this.strings(3),
      (builder, column, string) => this.addColumn(builder, column, string, 3),
    );
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
