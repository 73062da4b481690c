/**
 * Equations whose unknowns come from the two ends of the output alone.
 *
 * An output of 2r cells or more is a first window, a middle and a last window. A string that grew at one end, or only changed
 * its end cell, is the output with one window replaced; so for a pair of windows the unknowns are known beforehand, and for all
 * middles at once: each is an offset plus the middle times a unit. The loops run over tiles of middles, rows and the middles of
 * a tile, touch typed arrays only, and go through memory nearly in rising order. Each of the three kinds of rows has them written out:
 * with the outer two shared, by a call a row, searches of range 12 took up to 6 % longer.
 */
import type { WeightedForest } from '../linear/forest.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import type { Addresses } from './addresses.ts';
import type { EndPairs } from './end-pairs.ts';
import type { HitSet } from './hit-set.ts';
import { membersByClass } from './sectors.ts';
import { ShortRow } from './short-row.ts';
import { type End, type EndParent, endParents, type WindowTable } from './windows.ts';

/** The unknowns that count in a layer. */
export interface EndLayer {
  /** Range of the outputs, at least 2r. */
  readonly range: number;
  /** Outputs to leave out: they have other unknowns that may be non-zero. */
  readonly hits: HitSet | undefined;
  /** Outputs with these end cells are visited. */
  readonly ready: EndPairs;
  /** Strings of the output's own range count when they have these end cells. */
  readonly crowded: EndPairs;
}

/** Spins of a tile of middles: 4⁴ of them and their unknowns stay in the fastest memory. */
const TILE_SPINS = 4;

export class EndRows {
  readonly #ends: { first: End[]; last: End[] };
  readonly #row: ShortRow;
  /** Middles come in tiles, contents of their first cells, of which a row needs those of one class. */
  readonly #tile: { readonly size: number; readonly members: readonly Uint32Array[] };

  /** @param longest range of the longest candidate: what grew to an output beyond it has lost as many cells more */
  constructor(
    h: Hamiltonian,
    readonly table: WindowTable,
    readonly longest: number,
    readonly coefficients: Float64Array,
    readonly addresses: Addresses,
    readonly forest: WeightedForest,
    readonly onProgress: () => void,
  ) {
    this.#ends = endParents(h, table);
    this.#row = new ShortRow(forest);
    const cells = Math.max(1, Math.floor((2 * TILE_SPINS) / table.cellBits));
    this.#tile = {
      size: 2 ** (cells * table.cellBits),
      members: membersByClass(addresses.sector.grading, cells),
    };
  }

  /** All rows of a layer: those of one unknown first, they kill most strings, then those of several. */
  sweep(layer: EndLayer): void {
    for (const last of this.#ends.last) this.#kill(this.#rows(layer, last, 1, 1));
    for (const last of this.#ends.last) {
      this.#tie(this.#rows(layer, last, 2, 2));
      this.#reduce(this.#rows(layer, last, 3, Infinity));
    }
  }

  /** The rows with this last window and from `fewest` to `most` unknowns. */
  #rows({ range, hits, ready, crowded }: EndLayer, last: End, fewest: number, most: number): Rows {
    const { cellBits, bits } = this.table;
    const { addresses } = this;
    const { grading, value } = addresses.sector;
    const rightUnit = 2 ** (cellBits * range - bits);
    const windowSize = 2 ** bits;
    const top = last.window * rightUnit;
    const fewestLost = Math.max(1, range - this.longest);
    const wanted = value ^ grading.shift ^ addresses.classOf(last.window);
    const outputs: number[] = [];
    const classes: number[] = [];
    const start: number[] = [];
    const parents: number[] = [];
    const units: number[] = [];
    const factors: number[] = [];
    const add = (parent: number, unit: number, q: EndParent): void => {
      parents.push(parent);
      units.push(unit);
      factors.push(this.coefficients[q.value]!);
    };
    for (const first of this.#ends.first) {
      if (!ready.has(first.cell, last.cell)) continue;
      const rights = last.parents.filter(
        (q) => q.lost >= fewestLost || (q.lost === 0 && crowded.has(first.cell, q.cell)),
      );
      const lefts = first.parents.filter(
        (q) => q.lost >= fewestLost || (q.lost === 0 && crowded.has(q.cell, last.cell)),
      );
      const unknowns = rights.length + lefts.length;
      if (unknowns < fewest || unknowns > most) continue;
      outputs.push(first.window + top);
      classes.push(wanted ^ addresses.classOf(first.window));
      start.push(parents.length);
      for (const q of rights) add(q.image * rightUnit + first.window, windowSize, q);
      for (const q of lefts) {
        const lost = 2 ** (cellBits * q.lost);
        add((q.image + top) / lost, windowSize / lost, q);
      }
    }
    start.push(parents.length);
    return {
      middles: outputs.length === 0 ? 0 : 2 ** (cellBits * range - 2 * bits),
      hits,
      outputs: Float64Array.from(outputs),
      classes: Uint8Array.from(classes),
      start: Uint32Array.from(start),
      parents: Int32Array.from(parents),
      units: Int32Array.from(units),
      factors: Float64Array.from(factors),
    };
  }

  #kill({ middles, hits, outputs, classes, parents, units }: Rows): void {
    const { addresses, forest, onProgress } = this;
    const { link, zero } = forest;
    const windowSize = 2 ** this.table.bits;
    const size = Math.min(this.#tile.size, middles);
    for (let from = 0; from < middles; from += size) {
      if ((from & 0xffff) === 0) onProgress();
      const tileClass = addresses.classOf(from);
      for (let row = 0; row < outputs.length; row++) {
        const members = this.#tile.members[classes[row]! ^ tileClass]!;
        const unit = units[row]!;
        const base = parents[row]! + Math.imul(from, unit);
        const output = outputs[row]! + from * windowSize;
        for (let i = 0; i < members.length; i++) {
          const middle = members[i]!;
          if (middle >= size) break;
          const parent = addresses.of(base + Math.imul(middle, unit));
          if (link[parent] === zero || hits?.has(output + middle * windowSize)) continue;
          forest.setZero(parent);
        }
      }
    }
  }

  #tie({ middles, hits, outputs, classes, parents, units, factors }: Rows): void {
    const { addresses, forest, onProgress } = this;
    const { link, zero } = forest;
    const windowSize = 2 ** this.table.bits;
    const size = Math.min(this.#tile.size, middles);
    for (let from = 0; from < middles; from += size) {
      if ((from & 0xffff) === 0) onProgress();
      const tileClass = addresses.classOf(from);
      for (let row = 0; row < outputs.length; row++) {
        const members = this.#tile.members[classes[row]! ^ tileClass]!;
        const unitA = units[2 * row]!;
        const unitB = units[2 * row + 1]!;
        const baseA = parents[2 * row]! + Math.imul(from, unitA);
        const baseB = parents[2 * row + 1]! + Math.imul(from, unitB);
        const output = outputs[row]! + from * windowSize;
        for (let i = 0; i < members.length; i++) {
          const middle = members[i]!;
          if (middle >= size) break;
          const a = addresses.of(baseA + Math.imul(middle, unitA));
          const b = addresses.of(baseB + Math.imul(middle, unitB));
          const zeroA = link[a] === zero;
          const zeroB = link[b] === zero;
          if ((zeroA && zeroB) || hits?.has(output + middle * windowSize)) continue;
          if (zeroA) forest.setZero(b);
          else if (zeroB) forest.setZero(a);
          else forest.tie(a, factors[2 * row]!, b, factors[2 * row + 1]!);
        }
      }
    }
  }

  #reduce({ middles, hits, outputs, classes, start, parents, units, factors }: Rows): void {
    const equation = this.#row;
    const { addresses, onProgress } = this;
    const windowSize = 2 ** this.table.bits;
    const size = Math.min(this.#tile.size, middles);
    for (let from = 0; from < middles; from += size) {
      if ((from & 0xffff) === 0) onProgress();
      const tileClass = addresses.classOf(from);
      for (let row = 0; row < outputs.length; row++) {
        const members = this.#tile.members[classes[row]! ^ tileClass]!;
        for (let i = 0; i < members.length && members[i]! < size; i++) {
          const middle = from + members[i]!;
          if (hits?.has(outputs[row]! + middle * windowSize)) continue;
          equation.clear();
          let short = true;
          for (let j = start[row]!; short && j < start[row + 1]!; j++)
            short = equation.add(addresses.of(parents[j]! + Math.imul(middle, units[j]!)), factors[j]!);
          if (short) equation.use();
        }
      }
    }
  }
}

/** Rows with a common last window; unknown j of row i is entry start[i] + j of the last three arrays. */
interface Rows {
  readonly middles: number;
  readonly hits: HitSet | undefined;
  /** Outputs at middle 0; they may pass 32 bits. */
  readonly outputs: Float64Array;
  /** The class that the middle must have. */
  readonly classes: Uint8Array;
  readonly start: Uint32Array;
  /** Unknowns at middle 0 and what they gain a middle, modulo 2³². */
  readonly parents: Int32Array;
  readonly units: Int32Array;
  readonly factors: Float64Array;
}
