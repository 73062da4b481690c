/** What a search returns. Plain frozen values; `src/cli` and `src/report` print them. */
import type { Operator } from '../algebra/operator.ts';
import { clipped, printedAs } from '../algebra/printed.ts';
import type { Rational } from '../algebra/rational.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';

/** One member of the canonical basis. */
export interface Charge {
  readonly range: number;
  /** Under `hamiltonian.reflection`; null where the model has no such symmetry. */
  readonly parity: 'even' | 'odd' | null;
  /** Integer coefficients without a common factor, in representatives; the sum over translates commutes with H, exactly. */
  readonly density: Operator;
}

/** How a search found the candidates that may be non-zero; the answer is the same. */
export type Method = 'exhaustive' | 'growth';

/** All charges of range ≤ `range`: a basis, and the numbers that prove it complete. */
export interface SearchResult {
  readonly hamiltonian: Hamiltonian;
  readonly range: number;
  /** Entry j − 1: the dimension of the space of charges of range ≤ j. */
  readonly dimensionByRange: readonly number[];
  /** The canonical basis, sorted by range, parity, leading word. */
  readonly charges: readonly Charge[];
  /** H = Σ expansion[i] · charges[i]; null when H has a longer range than was searched. */
  readonly expansionOfH: readonly Rational[] | null;
  /** The statement holds on the infinite chain and on every ring of at least so many cells. */
  readonly minimumCells: number;
  readonly method: Method;
  /** The first one carries the upper bound; all of them together the coefficients. */
  readonly primes: readonly number[];
  readonly candidates: number;
  readonly milliseconds: number;
}

/** Frozen, with a short form for consoles. */
export function chargeFrom(fields: Charge): Charge {
  return Object.freeze(
    printedAs({ ...fields }, ({ range, parity, density }) => {
      const kind = parity === null ? '' : `, ${parity}`;
      return `Charge(range ${range}${kind}: ${clipped(density.toString(), `${density.size} terms`)})`;
    }),
  );
}

/** Frozen, with a short form for consoles. */
export function resultFrom(fields: SearchResult): SearchResult {
  return Object.freeze(
    printedAs(
      { ...fields, charges: Object.freeze(fields.charges.map(chargeFrom)) },
      ({ charges, range, dimensionByRange }) =>
        `SearchResult(range ≤ ${range}: ${charges.length} charge${charges.length === 1 ? '' : 's'}, complete; dimensions ${dimensionByRange.join(' ')})`,
    ),
  );
}
