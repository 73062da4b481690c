/**
 * Which parts of full range the charges of an injective chain can have, modulo a prime: docs/theory.md, sections 1 to 3, whose proofs
 * hold over GF(p) where the interaction is injective there.
 *
 * The part of range m of a charge of that range is R^{m−2} f, with f in V_2 (lifting) and α(f) + (m − 3) β(f) ∈ (R − A) O_3 (pencil).
 * All of it is found in strings of at most four cells, whatever m is. The rational twin, for all ranges at once, is `theory/growth.ts`.
 */
import { Operator } from '../algebra/operator.ts';
import { eliminate } from '../linear/elimination.ts';
import type { Field } from '../linear/field.ts';
import type { SparseVector } from '../linear/sparse.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { BondGrowth, stringsOfRange } from './bond-growth.ts';

/** Widest cell, in spins, whose strings of three cells are eliminated: 3,600 for two spins, 254,016 for three. */
export const MAX_PENCIL_CELL = 2;

/** The strings of range exactly so many cells, as operators. */
export function stringsOf({ chain }: Hamiltonian, cells: number): Operator[] {
  return stringsOfRange(2 * chain.cell, cells).map((s) => Operator.fromIntegers([[BigInt(s), 1n]]));
}

export class TopParts {
  readonly #h: Hamiltonian;
  readonly #growth: BondGrowth;
  /** A basis of V_2 modulo p, with residues as coefficients. */
  readonly shortest: readonly Operator[];

  /** @param h of range 2, injective modulo p */
  constructor(
    h: Hamiltonian,
    readonly field: Field,
  ) {
    const whole = Operator.fromIntegers(h.density.numerators);
    const part = (range: number) => whole.filter((word) => h.chain.range(word) === range);
    this.#h = h;
    this.#growth = new BondGrowth(part(2), part(1), 2 * h.chain.cell);
    const strings = stringsOf(h, 2);
    const grown = strings.map((q) => this.#growth.grown(q, 2));
    this.shortest = eliminate(rowsOf(grown, field), grown.length, field)
      .nullSpace()
      .map(({ columns, values }) =>
        Operator.fromIntegers(
          columns.map((c, i) => [strings[c]!.numerators.keys().next().value!, BigInt(values[i]!)] as const),
        ),
      );
  }

  /**
   * For every range m = 3 … k a basis of the f that the pencil allows, in coordinates over `shortest`; index m. Yields now and then.
   *
   * Cost: an elimination over the strings of three cells, milliseconds for one spin a cell, half a second for two.
   */
  *allowed(k: number): Generator<void, SparseVector[][]> {
    const { field, shortest } = this;
    const r = shortest.length;
    if (r === 0) return Array.from({ length: k + 1 }, () => []);
    const inner = shortest.map((f) => this.#growth.inner(f));
    const columns: Operator[] = [];
    for (const q of stringsOf(this.#h, 3)) {
      columns.push(this.#growth.grown(q, 3));
      if (columns.length % 256 === 0) yield;
    }
    const image = columns.length;
    columns.push(...inner.map(({ alpha }) => alpha), ...inner.map(({ beta }) => beta));
    const { pivots } = eliminate(rowsOf(columns, field), columns.length, field);
    yield;
    // Rows whose pivot lies beyond the image say which Σ a_i α_i + b_i β_i are in it.
    const ties = [...pivots].filter(([pivot]) => pivot >= image).map(([, row]) => row);
    return Array.from({ length: k + 1 }, (_, m) =>
      m < 3
        ? []
        : eliminate(
            ties.map((row) => atRange(row, image, r, (m - 3) % field.p, field)),
            r,
            field,
          ).nullSpace(),
    );
  }
}

/** A tie of (a, b) with b = t·a. */
function atRange({ columns, values }: SparseVector, from: number, r: number, t: number, field: Field) {
  const sums = new Array<number>(r).fill(0);
  columns.forEach((c, i) => {
    const j = c - from;
    sums[j % r] = (sums[j % r]! + (j < r ? values[i]! : field.multiply(t, values[i]!))) % field.p;
  });
  const kept = sums.flatMap((v, j) => (v === 0 ? [] : [j]));
  return { columns: kept, values: kept.map((j) => sums[j]!) };
}

/** The matrix with these columns, row by row, modulo p. */
export function rowsOf(columns: readonly Operator[], field: Field): SparseVector[] {
  const rows = new Map<bigint, { columns: number[]; values: number[] }>();
  for (const [c, q] of columns.entries())
    for (const [word, value] of q.numerators) {
      const residue = field.residue(value);
      if (residue === 0) continue;
      let row = rows.get(word);
      if (row === undefined) {
        row = { columns: [], values: [] };
        rows.set(word, row);
      }
      row.columns.push(c);
      row.values.push(residue);
    }
  return [...rows.values()];
}
