/** The equations of a lattice search on the candidates that are left, as a sparse matrix with columns in canonical order. */
import { compareWords, type Word } from '../../algebra/word.ts';
import { LimitError } from '../../errors.ts';
import { type SparseMatrix, transpose } from '../../linear/sparse.ts';
import { KeyIndex, type StringSpace } from './space.ts';

/** An entry of the system: `value · ω^exponent`, ω the root of unity of the translations. */
export interface Entry {
  readonly value: bigint;
  readonly exponent: number;
}

export interface LatticeSystem {
  /** `values` are those of ω = 1; see `matrixAt`. An entry may stand twice in a row: they add. */
  readonly matrix: SparseMatrix;
  readonly entries: readonly Entry[];
  /** Keys of the columns, one after another, and the same as words. */
  readonly keys: Uint32Array;
  readonly words: readonly Word[];
}

/** The same matrix with ω^e replaced by integers: `power(e)`. */
export function matrixAt(
  { matrix, entries }: LatticeSystem,
  power: (exponent: number) => bigint,
): SparseMatrix {
  return { ...matrix, values: entries.map((e) => e.value * power(e.exponent)) };
}

/**
 * Columns: falling volume of the box around the string, then extents, then alphabetical. Memory: about 20 bytes a non-zero.
 *
 * @param reduce brings exponents to a canonical range: modulo the order of ω, or as they are
 */
export function latticeSystem(
  space: StringSpace,
  keys: Uint32Array,
  columns: Uint32Array,
  reduce: (exponent: number) => number,
  onProgress: (done: number) => void = () => {},
): LatticeSystem {
  const { limbs } = space;
  const order = Array.from(columns, (index) => {
    const word = space.word(keys, index);
    const extent = space.extent(word);
    return { index, word, extent, volume: extent.reduce((a, b) => a * b, 1) };
  }).sort((a, b) => {
    if (a.volume !== b.volume) return b.volume - a.volume;
    for (let d = 0; d < a.extent.length; d++)
      if (a.extent[d] !== b.extent[d]) return b.extent[d]! - a.extent[d]!;
    return compareWords(a.word, b.word);
  });
  const sorted = new Uint32Array(order.length * limbs);
  order.forEach(({ index }, column) => {
    sorted.set(keys.subarray(index * limbs, (index + 1) * limbs), column * limbs);
  });
  const rowOf = new KeyIndex(limbs, 4 * order.length);
  const entries: Entry[] = [];
  const entryIndex = new Map<string, number>();
  // The few distinct entries by value and exponent, looked up without a text for each.
  const known = new Map<number, number>();
  let rows = new Uint32Array(16 * order.length + 64);
  let values = new Uint16Array(rows.length);
  const columnStart = new Uint32Array(order.length + 1);
  let size = 0;
  for (let column = 0; column < order.length; column++) {
    if ((column & 0xfff) === 0) onProgress(column / order.length);
    space.visit(sorted, column);
    if (size + space.count > rows.length) {
      const wider = new Uint32Array(2 * rows.length + space.count);
      wider.set(rows);
      rows = wider;
      const widerValues = new Uint16Array(rows.length);
      widerValues.set(values);
      values = widerValues;
    }
    for (let i = 0; i < space.count; i++) {
      const exponent = reduce(space.imageExponents[i]!);
      const value = space.imageValues[i]!;
      const code = value * 65_536 + exponent + 32_768;
      let entry = known.get(code);
      if (entry === undefined) {
        const text = `${space.values[value]} ${exponent}`;
        entry = entryIndex.get(text) ?? entries.length;
        if (entry === entries.length) {
          entries.push({ value: space.values[value]!, exponent });
          entryIndex.set(text, entry);
          if (entries.length > 65_536)
            throw new LimitError('search: more than 65536 distinct couplings and phases');
        }
        known.set(code, entry);
      }
      rows[size] = rowOf.indexOf(space.images, i);
      values[size++] = entry;
    }
    columnStart[column + 1] = size;
  }
  const byRow = transpose({ start: columnStart, index: rows, value: values }, rowOf.size);
  return {
    entries,
    keys: sorted,
    words: order.map((o) => o.word),
    matrix: {
      columns: order.length,
      rows: rowOf.size,
      start: byRow.start,
      column: byRow.index,
      value: byRow.value,
      values: entries.map((e) => e.value),
    },
  };
}

/** The same equations on some of the columns: `kept`, rising. */
export function restricted(
  space: StringSpace,
  system: LatticeSystem,
  kept: Uint32Array,
  reduce: (exponent: number) => number,
): LatticeSystem {
  return kept.length === system.words.length ? system : latticeSystem(space, system.keys, kept, reduce);
}
