/** What a search on a lattice returns. Plain frozen values. */
import type { Cyclotomic } from '../../algebra/cyclotomic.ts';
import type { Word } from '../../algebra/word.ts';
import type { Box } from '../../lattice/lattice.ts';
import type { LatticeModel } from '../../model/lattice-model.ts';
import type { Translations } from './space.ts';

/** One member of the canonical basis. */
export interface LatticeCharge {
  /** Cells of its leading string in each direction; no string has a larger volume. */
  readonly extent: readonly number[];
  /**
   * Strings on `result.box` with coefficients in Q(ω), algebraic integers without a common rational factor; rational for ω = ±1.
   * The charge is the sum of χ(g) g(density) over all translations g.
   */
  readonly terms: readonly (readonly [Word, Cyclotomic])[];
}

/** All charges whose strings fit the window: a basis, complete by proof. */
export interface LatticeResult {
  readonly model: LatticeModel;
  /** Cells in each direction. */
  readonly window: readonly number[];
  readonly translations: Translations;
  /** The block of cells on which the words of the charges stand. */
  readonly box: Box;
  readonly charges: readonly LatticeCharge[];
  readonly candidates: number;
  /** Candidates left after peeling. */
  readonly left: number;
  /** The first one carries the upper bound; all of them together the coefficients. */
  readonly primes: readonly number[];
  readonly milliseconds: number;
}
