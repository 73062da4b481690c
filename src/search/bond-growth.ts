/**
 * Growth by the bond at the two ends of a density, and what the terms of H inside it leave: docs/theory.md, sections 0 to 3.
 *
 * `O_j` are the densities of range exactly j. All commutators are taken as `i[·,·]/2`, so everything is real and integer.
 */
import type { Operator } from '../algebra/operator.ts';

/** The packed strings of range exactly so many cells, rising. */
export function stringsOfRange(cellBits: number, cells: number): number[] {
  const letters = 2 ** cellBits;
  const found: number[] = [];
  for (let s = cells === 1 ? 1 : letters ** (cells - 1); s < letters ** cells; s++)
    if (s % letters !== 0) found.push(s);
  return found;
}

export class BondGrowth {
  /**
   * @param bond h, on two cells
   * @param field w, on one
   * @param omega of sums Σ ω^j τ_j(q), 1 or −1
   */
  constructor(
    readonly bond: Operator,
    readonly field: Operator,
    readonly cellBits: number,
    readonly omega = 1n,
  ) {}

  #at(q: Operator, cell: number): Operator {
    return q.mapWords((word) => word << BigInt(this.cellBits * cell));
  }

  /** `R q = [q, h]`, h on the last cell and a new one behind it; q on `cells` cells. */
  right(q: Operator, cells: number): Operator {
    return q.bracket(this.#at(this.bond, cells - 1));
  }

  /** `ω A q = ω [h, q]`, h on a new cell in front and the first cell of q. */
  left(q: Operator): Operator {
    const grown = this.bond.bracket(this.#at(q, 1));
    return this.omega === 1n ? grown : grown.times(this.omega);
  }

  /** `(R − ωA) q`. */
  grown(q: Operator, cells: number): Operator {
    return this.right(q, cells).minus(this.left(q));
  }

  /** α(f) and β(f) in O_4, by section 2. */
  inner(f: Operator): { alpha: Operator; beta: Operator } {
    const f3 = this.right(f, 2);
    const m = this.left(f3).bracket(this.#at(this.bond, 1));
    const g = f3.bracket(this.#at(this.field, 1));
    const last = BigInt(2 * this.cellBits);
    const first = (1n << BigInt(this.cellBits)) - 1n;
    const eLeft = f3.bracket(this.bond.plus(this.field)).filter((word) => (word & first) !== 0n);
    const eRight = f3
      .bracket(this.#at(this.bond, 1).plus(this.#at(this.field, 2)))
      .filter((word) => word >> last !== 0n);
    return {
      alpha: this.right(g.plus(eLeft).plus(eRight), 3),
      beta: m.plus(this.right(g, 3)),
    };
  }
}
