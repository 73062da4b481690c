/** Sets and counts of pairs (first cell, last cell) of strings, both not the identity. */
export class EndPairs {
  private constructor(
    readonly cells: number,
    readonly member: Uint8Array,
  ) {}

  /** @param cells contents a cell may have, identity included */
  static none(cells: number): EndPairs {
    return new EndPairs(cells, new Uint8Array(cells * cells));
  }

  static all(cells: number): EndPairs {
    return EndPairs.where(cells, () => true);
  }

  static where(cells: number, holds: (pair: number) => boolean): EndPairs {
    const member = new Uint8Array(cells * cells);
    for (let first = 1; first < cells; first++)
      for (let last = 1; last < cells; last++)
        if (holds(first * cells + last)) member[first * cells + last] = 1;
    return new EndPairs(cells, member);
  }

  has(first: number, last: number): boolean {
    return this.member[first * this.cells + last] === 1;
  }

  without(other: EndPairs): EndPairs {
    return EndPairs.where(this.cells, (pair) => this.member[pair] === 1 && other.member[pair] === 0);
  }

  isEmpty(): boolean {
    return !this.member.includes(1);
  }
}

export class EndCounts {
  readonly #count: Uint32Array;

  constructor(readonly cells: number) {
    this.#count = new Uint32Array(cells * cells);
  }

  add(first: number, last: number): void {
    this.#count[first * this.cells + last]!++;
  }

  above(threshold: number): EndPairs {
    return EndPairs.where(this.cells, (pair) => this.#count[pair]! > threshold);
  }
}
