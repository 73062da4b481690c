/**
 * Where the candidates of a sector stand in an array: from 1 on, nearly without gaps, in rising order of the packed strings
 * within a block.
 *
 * A string is cut into its first few cells and the rest. The rest chooses a block, and among the contents of the first cells
 * those of the class that the rest leaves over are numbered from 0. Blocks have the size of the largest class. Without sectors
 * the address of a string is the string.
 */
import { type Grading, membersByClass, type Sector } from './sectors.ts';

/** Spins of the first part: a table of 4⁶ integers stays in the fastest memory. */
const FIRST_SPINS = 6;

/** Spins of a candidate whose packed form indexes an array. */
export const MAX_SPINS = 15;

/** Packed strings and what the sweep computes with them are numbers modulo 2³². */
const MAX_PACKED = 16;

/** Do the candidates of any one sector have room in an array? */
export function fits(grading: Grading, cell: number, range: number): boolean {
  const spins = cell * range;
  return (
    spins <= MAX_SPINS || (spins <= MAX_PACKED && 2 ** (2 * spins - grading.bits) <= 2 ** (2 * MAX_SPINS))
  );
}

export class Addresses {
  /** The largest address. */
  readonly size: number;
  readonly #whole: boolean;
  readonly #firstBits: number;
  readonly #mask: number;
  readonly #block: number;
  /** 1 + number within its class, by content of the first cells. */
  readonly #place: Uint32Array;
  /** Classes of the contents of the first cells, or of as many others. */
  readonly #class: Uint8Array;
  /** Contents of the first cells by class, rising. */
  readonly #members: readonly Uint32Array[];

  /** @param range of the longest candidate, in cells */
  constructor(
    readonly sector: Sector,
    cellBits: number,
    range: number,
  ) {
    const { bits } = sector.grading;
    const cells = Math.max(1, Math.floor((2 * FIRST_SPINS) / cellBits));
    this.#firstBits = cells * cellBits;
    const contents = 2 ** this.#firstBits;
    this.#mask = contents - 1;
    this.#whole = bits === 0;
    this.#class = new Uint8Array(contents);
    this.#place = new Uint32Array(contents);
    this.#members = membersByClass(sector.grading, cells);
    this.#members.forEach((members, c) => {
      members.forEach((content, place) => {
        this.#class[content] = c;
        this.#place[content] = place + 1;
      });
    });
    this.#block = Math.max(...this.#members.map((members) => members.length));
    const strings = 2 ** (cellBits * range);
    this.size = this.#whole ? strings - 1 : Math.ceil(strings / contents) * this.#block;
  }

  /** The address of a string of the sector, given modulo 2³². */
  of(string: number): number {
    return this.#whole
      ? string
      : Math.imul(string >>> this.#firstBits, this.#block) + this.#place[string & this.#mask]!;
  }

  /** The class of any content of up to 32 bits. */
  classOf(string: number): number {
    if (this.#whole) return 0;
    let c = 0;
    for (let rest = string; rest !== 0; rest >>>= this.#firstBits) c ^= this.#class[rest & this.#mask]!;
    return c;
  }

  /** Every string of the sector from `begin` to below `end`, rising, with its address. */
  forEach(begin: number, end: number, visit: (string: number, address: number) => void): void {
    if (this.#whole) {
      for (let string = begin; string < end; string++) visit(string, string);
      return;
    }
    const contents = this.#mask + 1;
    const lastBlock = Math.ceil(end / contents);
    for (let block = Math.floor(begin / contents); block < lastBlock; block++) {
      const members = this.#members[this.classOf(block) ^ this.sector.value]!;
      const from = block * contents;
      const address = block * this.#block + 1;
      for (let i = 0; i < members.length; i++) {
        const string = from + members[i]!;
        if (string >= begin && string < end) visit(string, address + i);
      }
    }
  }
}
