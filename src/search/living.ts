/** The strings that are not known to be zero, by range. The candidates are scanned once a range; after that its list only shrinks. */
import type { WeightedForest } from '../linear/forest.ts';
import type { Addresses } from './addresses.ts';

export class Living {
  readonly #lists: Float64Array[] = [];

  constructor(
    readonly cellBits: number,
    readonly addresses: Addresses,
    readonly forest: WeightedForest,
  ) {}

  /** Packed, in rising order. */
  of(cells: number): Float64Array {
    const { addresses } = this;
    const known = this.#lists[cells];
    const list =
      known === undefined ? this.#scan(cells) : known.filter((string) => this.#isAlive(addresses.of(string)));
    this.#lists[cells] = list;
    return list;
  }

  /** Takes over a list: only these strings of the range are alive, and the forest knows it. */
  restore(cells: number, strings: Float64Array): void {
    this.#lists[cells] = strings;
  }

  #isAlive(element: number): boolean {
    const { link, zero } = this.forest;
    return link[element] === 0 || (link[element] !== zero && this.forest.root(element) !== zero);
  }

  #scan(cells: number): Float64Array {
    const { link, zero } = this.forest;
    const cellMask = 2 ** this.cellBits - 1;
    let list = new Float64Array(1024);
    let length = 0;
    this.addresses.forEach(
      2 ** (this.cellBits * (cells - 1)),
      2 ** (this.cellBits * cells),
      (string, element) => {
        if (link[element] === zero || (string & cellMask) === 0 || !this.#isAlive(element)) return;
        if (length === list.length) {
          const longer = new Float64Array(2 * length);
          longer.set(list);
          list = longer;
        }
        list[length++] = string;
      },
    );
    return list.slice(0, length);
  }
}
