/**
 * The Hamiltonian as a table: for every content of a window of r cells, the terms that do not commute with it.
 *
 * `i[T, P]/2 = ε·(T XOR P)` and T anticommutes with P exactly when it does with T XOR P, so one table serves both ways: from a
 * string P to the outputs it reaches, and from an output to the strings that reach it. Terms stand at the first cell of the window.
 */
import { phaseExponent } from '../algebra/word.ts';
import { LimitError } from '../errors.ts';
import { DistinctValues } from '../linear/sparse.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';

/** Widest window, in spins, whose table is written out: 4¹⁰ entries a term. */
const MAX_WINDOW = 10;

export interface WindowTable {
  /** Bits of a cell, 2n, and of the window, 2nr. */
  readonly cellBits: number;
  readonly bits: number;
  /** Entries of window w: the stretch start[w] … start[w + 1]. */
  readonly start: Uint32Array;
  /** The string on the window after the term has acted. */
  readonly image: Uint32Array;
  /** Index into `values` of ε·J where the *image* is the output, and where the window itself is the output. */
  readonly forward: Uint16Array;
  readonly backward: Uint16Array;
  /** ±J_T, integers: the Hamiltonian times its common denominator. */
  readonly values: readonly bigint[];
}

/** @throws LimitError when the interaction covers more than `MAX_WINDOW` spins */
export function windowTable(h: Hamiltonian): WindowTable {
  const cellBits = 2 * h.chain.cell;
  const spins = h.chain.cell * h.range;
  if (spins > MAX_WINDOW)
    throw new LimitError(
      `search: an interaction over ${h.range} cells of ${h.chain.cell} spins covers ${spins} spins; the search takes up to ${MAX_WINDOW}`,
    );
  const size = 4 ** spins;
  const distinct = new DistinctValues();
  const terms = [...h.density.numerators].map(([word, value]) => ({
    word: Number(word),
    plus: distinct.indexOf(value),
    minus: distinct.indexOf(-value),
  }));
  const start = new Uint32Array(size + 1);
  for (let w = 0; w < size; w++) {
    let count = 0;
    for (const t of terms) count += phaseExponent(t.word, w) & 1;
    start[w + 1] = start[w]! + count;
  }
  const image = new Uint32Array(start[size]!);
  const forward = new Uint16Array(start[size]!);
  const backward = new Uint16Array(start[size]!);
  for (let w = 0, at = 0; w < size; w++)
    for (const t of terms) {
      const phase = phaseExponent(t.word, w);
      if ((phase & 1) === 0) continue;
      image[at] = t.word ^ w;
      // i·i^1 = −1, i·i^3 = 1; and T·(T w) has the opposite phase of T·w.
      forward[at] = phase === 1 ? t.minus : t.plus;
      backward[at++] = phase === 1 ? t.plus : t.minus;
    }
  return { cellBits, bits: 2 * spins, start, image, forward, backward, values: distinct.values };
}

/**
 * What one string is tied to by the terms of H: for every translate of every term that does not commute with it, the
 * representative of the product. The buffers are overwritten by each visit.
 *
 * Strings are packed into plain numbers: bitwise where they fit 32 bits, by exact arithmetic of doubles up to 2⁵³ = 26 spins.
 */
export class Neighbourhood {
  readonly images: Float64Array;
  /** Index of the table entry behind each image. */
  readonly entries: Uint32Array;
  count = 0;
  readonly #reach: number;

  constructor(
    readonly table: WindowTable,
    longest: number,
  ) {
    this.#reach = table.bits / table.cellBits;
    // A string, moved to leave room on its left; no product is longer.
    if (table.cellBits * (longest + this.#reach - 1) > 53)
      throw new LimitError(
        `search: strings of ${longest} cells with an interaction of ${this.#reach} cells are too long to pack`,
      );
    let widest = 0;
    for (let w = 0; w + 1 < table.start.length; w++)
      widest = Math.max(widest, table.start[w + 1]! - table.start[w]!);
    const room = widest * (longest + this.#reach);
    this.images = new Float64Array(room);
    this.entries = new Uint32Array(room);
  }

  /** @param string a representative of the given number of cells */
  visit(string: number, cells: number): void {
    const { start, image, cellBits, bits } = this.table;
    const { images, entries } = this;
    const cellMask = 2 ** cellBits - 1;
    const mask = 2 ** bits - 1;
    let count = 0;
    for (let s = 1 - this.#reach; s <= 0; s++) {
      // Room on the left: everything moves right by −s cells, and back after the term has acted.
      const room = -s * cellBits;
      const window = (string << room) & mask;
      const rest = string * 2 ** room - window;
      for (let i = start[window]!; i < start[window + 1]!; i++) {
        let product = rest + image[i]!;
        while ((product & cellMask) === 0) product /= cellMask + 1;
        images[count] = product;
        entries[count++] = i;
      }
    }
    const wide = cellBits * cells > 32;
    for (let s = 1; s < cells; s++) {
      const unit = 2 ** (s * cellBits);
      const window = wide ? Math.floor(string / unit) & mask : (string >>> (s * cellBits)) & mask;
      for (let i = start[window]!; i < start[window + 1]!; i++) {
        images[count] = string + (image[i]! - window) * unit;
        entries[count++] = i;
      }
    }
    this.count = count;
  }
}

/** A string that reaches an output by a term on its end cell: the window of the output there, before the term has acted. */
export interface EndParent {
  /** The window after the term has been taken off. */
  readonly image: number;
  /** Identity cells at that end: the parent's range is so much less; 0 where the term only changed the end. */
  readonly lost: number;
  /** Content of the end cell of the image, 0 when it is lost. */
  readonly cell: number;
  /** Index into the table's values of the coefficient. */
  readonly value: number;
}

export interface End {
  readonly window: number;
  /** Content of the end cell. */
  readonly cell: number;
  readonly parents: readonly EndParent[];
}

/**
 * The two ends: for each content of the first (last) r cells of an output, the strings that terms on the end cell come from.
 * Outputs of 2r cells or more have separate ends, and a parent of smaller range must have grown at one of them.
 */
export function endParents(h: Hamiltonian, table: WindowTable): { first: End[]; last: End[] } {
  const { cellBits, bits } = table;
  const cellMask = 2 ** cellBits - 1;
  const cells = bits / cellBits;
  const valueIndex = new Map(table.values.map((v, i) => [v, i]));
  const cellFrom = (window: number, cell: number, side: 'first' | 'last') =>
    (window >>> (cellBits * (side === 'first' ? cell : cells - 1 - cell))) & cellMask;
  const parentsOf = (window: number, side: 'first' | 'last'): EndParent[] => {
    const parents: EndParent[] = [];
    for (const [word, value] of h.density.numerators) {
      const term =
        side === 'first' ? Number(word) : Number(word) * 2 ** (cellBits * (cells - h.chain.range(word)));
      const phase = phaseExponent(term, window);
      if ((phase & 1) === 0) continue;
      const image = term ^ window;
      let lost = 0;
      while (cellFrom(image, lost, side) === 0) lost++;
      parents.push({
        image,
        lost,
        cell: cellFrom(image, 0, side),
        value: valueIndex.get(phase === 1 ? value : -value)!,
      });
    }
    return parents;
  };
  const first: End[] = [];
  const last: End[] = [];
  for (let window = 0; window < 2 ** bits; window++) {
    const [a, b] = [cellFrom(window, 0, 'first'), cellFrom(window, 0, 'last')];
    if (a !== 0) first.push({ window, cell: a, parents: parentsOf(window, 'first') });
    if (b !== 0) last.push({ window, cell: b, parents: parentsOf(window, 'last') });
  }
  return { first, last };
}
