/**
 * A Hamiltonian as bonds and fields: `H = Σ_j (h_{j,j+1} + w_j)`, h traceless on either cell, w on one cell.
 *
 * An interaction of range r > 2 needs r − 1 cells grouped into one; no more are grouped, since a nearest-neighbour chain loses
 * its injectivity in larger groups.
 */
import { Operator } from '../algebra/operator.ts';
import { Chain } from '../lattice/chain.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';

export interface BondsAndFields {
  /** Spins in the cell of this decomposition. */
  readonly spins: number;
  /** Cells of the model in one of these. */
  readonly group: number;
  /** h, on two cells, integer coefficients. H is scaled by a common denominator, which no statement about charges notices. */
  readonly bond: Operator;
  /** w, on one cell, same scale. */
  readonly field: Operator;
}

/** Widest cell after grouping: strings on five of them, as the proofs need, still fit an integer of 30 bits. */
export const MAX_GROUPED_SPINS = 3;

/** Undefined when the grouped cell would be wider than `MAX_GROUPED_SPINS`. */
export function decompose({ chain, density, range }: Hamiltonian): BondsAndFields | undefined {
  const group = Math.max(1, range - 1);
  const spins = chain.cell * group;
  if (spins > MAX_GROUPED_SPINS) return undefined;
  const grouped = new Chain(spins);
  const terms = [...density.numerators].flatMap(([word, value]) =>
    Array.from(
      { length: group },
      (_, j) => [grouped.representative(chain.translate(word, j)), value] as const,
    ),
  );
  const whole = Operator.fromIntegers(terms);
  return {
    spins,
    group,
    bond: whole.filter((word) => grouped.range(word) === 2),
    field: whole.filter((word) => grouped.range(word) === 1),
  };
}
