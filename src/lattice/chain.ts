/**
 * The infinite chain of cells: translation by one cell, ranges, representatives, and the bracket of translation-invariant sums.
 *
 * A density `q` stands for `Q = Σ_j τ_j(q)`. Strings run along the spins, `cell` spins a cell, and a translation moves by whole
 * cells; the representative of a string is its translate whose first non-identity cell is cell 0.
 */
import { Operator } from '../algebra/operator.ts';
import { INSPECT } from '../algebra/printed.ts';
import { firstSpin, phaseExponent, product, reverse, spanOf, type Word } from '../algebra/word.ts';
import { InputError, show } from '../errors.ts';

/** Widest cell in spins: a string of one cell still fits a machine word. */
export const MAX_CELL = 12;

export class Chain {
  /** @param cell number of spins-1/2 in the repeating unit */
  constructor(readonly cell: number) {
    if (!(Number.isInteger(cell) && cell >= 1 && cell <= MAX_CELL))
      throw new InputError('cell', `a whole number of spins from 1 to ${MAX_CELL}`, show(cell));
  }

  [INSPECT](): string {
    return `Chain(${this.cell} spin${this.cell === 1 ? '' : 's'} a cell)`;
  }

  /** Number of cells from the first to the last on which the string acts; 0 for the identity. */
  range(word: Word): number {
    if (word === 0n) return 0;
    return Math.ceil(spanOf(word) / this.cell) - Math.floor(firstSpin(word) / this.cell);
  }

  /** The translate that starts in cell 0. */
  representative(word: Word): Word {
    if (word === 0n) return 0n;
    return word >> BigInt(2 * this.cell * Math.floor(firstSpin(word) / this.cell));
  }

  /** The string moved right by whole cells. */
  translate(word: Word, cells: number): Word {
    return word << BigInt(2 * this.cell * cells);
  }

  /** The mirror image, as a representative. See `Reflection` for the two kinds. */
  reflect(word: Word, reflection: Reflection): Word {
    const cells = Math.ceil(spanOf(word) / this.cell);
    const mirrored = reverse(word, cells * this.cell);
    if (reflection === 'spins') return this.representative(mirrored);
    // Cells were turned round with the chain; turn each back.
    let image = 0n;
    const mask = (1n << BigInt(2 * this.cell)) - 1n;
    for (let c = cells - 1; c >= 0; c--) {
      const own = (mirrored >> BigInt(2 * this.cell * c)) & mask;
      image = (image << BigInt(2 * this.cell)) | reverse(own, this.cell);
    }
    return this.representative(image);
  }

  /** The range of the longest string of a density. */
  rangeOf(density: Operator): number {
    let range = 0;
    for (const word of density.numerators.keys()) range = Math.max(range, this.range(word));
    return range;
  }

  /** The same sum over translates, written with representatives and without the identity. */
  normalise(density: Operator): Operator {
    return density.mapIntegers((word, value) => [this.representative(word), word === 0n ? 0n : value]);
  }

  /** The reflection under which the sum over translates of a density is unchanged, if there is one. */
  reflectionOf(density: Operator): Reflection | null {
    const normal = this.normalise(density);
    for (const reflection of this.cell === 1 ? (['spins'] as const) : (['cells', 'spins'] as const))
      if (normal.mapWords((word) => this.reflect(word, reflection)).equals(normal)) return reflection;
    return null;
  }

  /**
   * The density of `i[H, Q]/2`, exact, in representatives.
   *
   * Cost: terms of `h` × terms of `q` × (range of both, in cells); a term of up to 15 spins meets only the window under it.
   */
  bracket(h: Operator, q: Operator): Operator {
    const bits = BigInt(2 * this.cell);
    const sum = new Map<Word, bigint>();
    const terms = [...h.numerators].map(([word, value]) => {
      const representative = this.representative(word);
      return { word: representative, value, range: this.range(word), span: spanOf(representative) };
    });
    const reach = Math.max(0, ...terms.map((t) => t.range)) - 1;
    for (const [word, coefficient] of q.numerators) {
      const range = this.range(word);
      // Room on the left for the terms that stick out there.
      const string = this.representative(word) << (bits * BigInt(reach));
      for (const term of terms) {
        if (term.word === 0n) continue;
        const narrow = term.span <= 15;
        const mask = (1n << BigInt(2 * term.span)) - 1n;
        const low = Number(narrow ? term.word : 0n);
        for (let at = reach - term.range + 1; at < reach + range; at++) {
          const offset = bits * BigInt(at);
          const phase = narrow
            ? phaseExponent(low, Number((string >> offset) & mask))
            : product(term.word << offset, string).phase;
          if ((phase & 1) === 0) continue;
          const image = this.representative(string ^ (term.word << offset));
          const value = phase === 1 ? -(term.value * coefficient) : term.value * coefficient;
          sum.set(image, (sum.get(image) ?? 0n) + value);
        }
      }
    }
    return Operator.fromIntegers(sum, h.denominator * q.denominator);
  }
}

/**
 * Mirror images of a chain of cells: `cells` turns the order of the cells and leaves each as it is (the mirror image of a
 * ladder along its legs), `spins` turns the order of all spins (the mirror image of a dimerised chain). Equal for one spin a cell.
 */
export type Reflection = 'cells' | 'spins';
