/**
 * Pauli strings on a chain of cells, and what the terms of a Hamiltonian make of them. docs/certificate.md, "Strings" and "Equations".
 *
 * Two bits a spin, spin 0 lowest: I = 0, X = 1, Z = 2, Y = 3, so the product of two strings is the XOR up to a phase. A string
 * stands for all its translates and is written from its first non-identity cell on. 32-bit integers, never negative.
 */
import { coefficient, type Fraction, list, Malformed, Rejected, string, type Value } from './document.ts';

const LETTERS = 'IXZY';

/** Widest Hamiltonian term and longest packed string that this checker takes, in spins. */
const MAX_WINDOW = 10;
const MAX_PACKED = 16;

export interface Term {
  readonly word: number;
  /** Cells. */
  readonly range: number;
  readonly coefficient: Fraction;
}

/** Terms `["XIY","3/4"]`: whole cells, the first and last not the identity, strictly rising in ASCII order. */
export function readTerms(value: Value, cell: number, longest: number, what: string): Term[] {
  const terms: Term[] = [];
  let last = '';
  for (const entry of list(value, what, 2 ** 22)) {
    const pair = list(entry, `a term of ${what}`, 2);
    if (pair.length !== 2) throw new Malformed(`a term of ${what} is not a pair`);
    const text = string(pair[0]!, `the string of a term of ${what}`);
    const word = readWord(text, cell, longest, what);
    if (terms.length > 0 && text <= last)
      throw new Malformed(`${what}: terms not in rising order at ${text}`);
    terms.push({
      word,
      range: text.length / cell,
      coefficient: coefficient(pair[1]!, `the coefficient of ${text} in ${what}`),
    });
    last = text;
  }
  return terms;
}

export function readWord(text: string, cell: number, longest: number, what: string): number {
  const identity = 'I'.repeat(cell);
  if (
    text.length === 0 ||
    text.length > cell * longest ||
    text.length % cell !== 0 ||
    /[^IXYZ]/.test(text) ||
    text.startsWith(identity) ||
    text.endsWith(identity)
  )
    throw new Malformed(
      `${what}: a string that is not 1 to ${longest} cells of ${cell} letters I, X, Y, Z, the first and last cell not the identity`,
    );
  let word = 0;
  for (let spin = text.length - 1; spin >= 0; spin--) word = word * 4 + LETTERS.indexOf(text[spin]!);
  return word;
}

/** i^e of the product of two strings. A string with y letters Y is i^y X^x Z^z; moving Z past X costs a sign a spin. */
export function phase(a: number, b: number): number {
  const ys = (word: number) => ones(word & (word >>> 1) & 0x55555555);
  return (ys(a) + ys(b) - ys(a ^ b) + 2 * ones((a >>> 1) & b & 0x55555555)) & 3;
}

function ones(bits: number): number {
  let count = 0;
  for (let rest = bits; rest !== 0; rest &= rest - 1) count++;
  return count;
}

/** The terms of H, by what they do to each content of a window of r cells. */
export class Hamiltonian {
  readonly cellBits: number;
  /** ±J_T, integers: H times the common denominator of its coefficients. */
  readonly values: readonly bigint[];
  /** Terms that do not commute with the window w: `start[w]` … `start[w + 1]` of the two arrays. */
  readonly #start: Uint32Array;
  readonly #term: Uint32Array;
  readonly #value: Uint32Array;
  readonly #mask: number;
  readonly #cellMask: number;

  /** Neighbours of the string visited last, and the places of their coefficients in `values`. */
  readonly neighbours: Uint32Array;
  readonly coefficients: Uint32Array;

  /** @param longest cells of the longest candidate. @throws Rejected beyond the limits of this checker */
  constructor(
    readonly cell: number,
    readonly range: number,
    terms: readonly Term[],
    longest: number,
  ) {
    if (cell * range > MAX_WINDOW || cell * (longest + 2 * range - 2) > MAX_PACKED)
      throw new Rejected('cell and ranges exceed the limits of this checker');
    const size = 4 ** (cell * range);
    if (terms.length * size > 2 ** 28)
      throw new Rejected('the Hamiltonian has more terms than this checker takes');
    this.cellBits = 2 * cell;
    this.#cellMask = 4 ** cell - 1;
    this.#mask = size - 1;
    const denominator = terms.reduce((d, { coefficient: c }) => lcm(d, c.denominator), 1n);
    this.values = terms.flatMap(({ coefficient: c }) => {
      const integer = (c.numerator * denominator) / c.denominator;
      return [integer, -integer];
    });
    const start = new Uint32Array(size + 1);
    let most = 0;
    for (let w = 0; w < size; w++) {
      let count = 0;
      for (const t of terms) count += phase(t.word, w) & 1;
      start[w + 1] = start[w]! + count;
      most = Math.max(most, count);
    }
    this.#start = start;
    this.#term = new Uint32Array(start[size]!);
    this.#value = new Uint32Array(start[size]!);
    for (let w = 0, at = 0; w < size; w++)
      terms.forEach((t, index) => {
        const e = phase(t.word, w);
        if (e % 2 === 0) return;
        this.#term[at] = t.word;
        this.#value[at++] = 2 * index + (e === 1 ? 0 : 1);
      });
    this.neighbours = new Uint32Array(most * (longest + 2 * range));
    this.coefficients = new Uint32Array(this.neighbours.length);
  }

  /**
   * For every translate of every term T that does not commute with the string O: the string T·O, and +J_T where T·O = i·(T·O as a
   * string), −J_T where it is −i times it. By E1 these are the entries of the row of O, read against the columns.
   *
   * @param word a string of `cells` cells
   * @param longest only neighbours of up to so many cells are wanted; others may be left out
   * @returns how many there are
   */
  visit(word: number, cells: number, longest: number): number {
    const { range, cellBits, neighbours, coefficients } = this;
    const start = this.#start;
    const term = this.#term;
    const value = this.#value;
    let count = 0;
    for (let at = 1 - range; at < cells; at++) {
      // A placement that leaves both end cells alone gives a string as long as O.
      if (at === 1 && cells > longest) at = Math.max(1, cells - range);
      const shifted = at < 0 ? (word << (-at * cellBits)) >>> 0 : word;
      const shift = at < 0 ? 0 : at * cellBits;
      const window = (shifted >>> shift) & this.#mask;
      for (let i = start[window]!; i < start[window + 1]!; i++) {
        let product = (shifted ^ (term[i]! << shift)) >>> 0;
        while ((product & this.#cellMask) === 0) product >>>= cellBits;
        neighbours[count] = product;
        coefficients[count++] = value[i]!;
      }
    }
    return count;
  }
}

export function lcm(a: bigint, b: bigint): bigint {
  let [x, y] = [a, b];
  while (y !== 0n) [x, y] = [y, x % y];
  return (a / x) * b;
}
