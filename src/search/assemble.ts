/**
 * The equations of a search restricted to some candidates, as a sparse matrix: columns in canonical order, one row for every
 * output that a listed candidate reaches. Memory: about 20 bytes a non-zero while it is built.
 */
import { type SparseMatrix, transpose } from '../linear/sparse.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { Neighbourhood, windowTable } from './windows.ts';

export interface RestrictedSystem {
  readonly matrix: SparseMatrix;
  /** The candidate of each column, packed. */
  readonly strings: Float64Array;
}

/**
 * @param strings packed representatives, any order; sorted in place into canonical order: falling range, then alphabetical
 * @param range the largest range among them
 */
export function assemble(
  h: Hamiltonian,
  strings: Float64Array,
  range: number,
  onProgress: (done: number) => void = () => {},
): RestrictedSystem {
  const table = windowTable(h);
  const near = new Neighbourhood(table, range);
  sortCanonically(strings, table.cellBits, range);
  const rowOf = new StringIndex(strings.length * 4);
  let rows: Uint32Array = new Uint32Array(strings.length * 16 + 64);
  let value: Uint16Array = new Uint16Array(rows.length);
  const columnStart = new Uint32Array(strings.length + 1);
  let entries = 0;
  for (let column = 0; column < strings.length; column++) {
    if ((column & 0xfff) === 0) onProgress(column / strings.length);
    near.visit(strings[column]!, cellsOf(strings[column]!, table.cellBits));
    if (entries + near.count > rows.length) {
      rows = grown(rows, new Uint32Array(2 * rows.length + near.count));
      value = grown(value, new Uint16Array(rows.length));
    }
    for (let i = 0; i < near.count; i++) {
      rows[entries] = rowOf.indexOf(near.images[i]!);
      value[entries++] = table.forward[near.entries[i]!]!;
    }
    columnStart[column + 1] = entries;
  }
  const byRow = transpose({ start: columnStart, index: rows, value }, rowOf.size);
  return {
    strings,
    matrix: {
      columns: strings.length,
      rows: rowOf.size,
      start: byRow.start,
      column: byRow.index,
      value: byRow.value,
      values: table.values,
    },
  };
}

/** Cells of a packed representative. */
export function cellsOf(string: number, cellBits: number): number {
  const high = Math.floor(string / 2 ** 30);
  const bits = high > 0 ? 62 - Math.clz32(high) : 32 - Math.clz32(string);
  return Math.ceil(bits / cellBits);
}

/** Falling range, then alphabetical by letter from the first spin on. Sorts keys as numbers: range, then letters, in base 4. */
function sortCanonically(strings: Float64Array, cellBits: number, range: number): void {
  const spins = (range * cellBits) / 2;
  const unit = 4 ** spins;
  for (let i = 0; i < strings.length; i++) {
    const string = strings[i]!;
    strings[i] = (range - cellsOf(string, cellBits)) * unit + alphabetical(string, spins);
  }
  strings.sort();
  for (let i = 0; i < strings.length; i++) strings[i] = alphabetical(strings[i]! % unit, spins);
}

/** The letters in reverse order with Y and Z (codes 3 and 2) exchanged: an involution between packed strings and sort keys. */
function alphabetical(value: number, spins: number): number {
  let key = 0;
  let rest = value;
  for (let i = 0; i < spins; i++) {
    const letter = rest % 4;
    key = key * 4 + (letter > 1 ? 5 - letter : letter);
    rest = (rest - letter) / 4;
  }
  return key;
}

function grown<A extends Uint32Array | Uint16Array>(from: A, to: A): A {
  to.set(from);
  return to;
}

/** Numbers packed strings in the order they first come up: open addressing, at most two thirds full. */
class StringIndex {
  size = 0;
  #keys: Float64Array;
  #indices: Uint32Array;
  #mask: number;

  constructor(expected: number) {
    const capacity = 2 ** Math.max(4, Math.ceil(Math.log2(1.5 * expected + 1)));
    this.#keys = new Float64Array(capacity);
    this.#indices = new Uint32Array(capacity);
    this.#mask = capacity - 1;
  }

  indexOf(key: number): number {
    let at = this.#slot(key);
    if (this.#keys[at] === key) return this.#indices[at]!;
    if (3 * this.size > 2 * this.#mask) {
      this.#grow();
      at = this.#slot(key);
    }
    this.#keys[at] = key;
    this.#indices[at] = this.size;
    return this.size++;
  }

  #slot(key: number): number {
    const high = Math.floor(key / 2 ** 26);
    let hash = Math.imul((key | 0) ^ Math.imul(high, 0x9e3779b1), 0x85ebca6b);
    hash ^= hash >>> 15;
    let at = hash & this.#mask;
    // The identity, 0, is never a key: it marks an empty place.
    while (this.#keys[at] !== 0 && this.#keys[at] !== key) at = (at + 1) & this.#mask;
    return at;
  }

  #grow(): void {
    const keys = this.#keys;
    const indices = this.#indices;
    this.#keys = new Float64Array(2 * keys.length);
    this.#indices = new Uint32Array(2 * keys.length);
    this.#mask = 2 * keys.length - 1;
    for (let i = 0; i < keys.length; i++) {
      if (keys[i] === 0) continue;
      const at = this.#slot(keys[i]!);
      this.#keys[at] = keys[i]!;
      this.#indices[at] = indices[i]!;
    }
  }
}
