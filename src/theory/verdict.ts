/** What `decide` returns: one of five kinds of verdict, each with its reasons and with what it does not show. */
import type { Hamiltonian } from '../model/hamiltonian.ts';
import type { SearchResult } from '../search/result.ts';
import type { Citation } from './citations.ts';
import type { Pencil } from './pencil.ts';
import type { WaveNumberVerdict } from './wave-numbers.ts';

/** An upper bound on the number of charges of every range from `from` on, by the program's own lemmas. */
export interface EveryRangeBound {
  readonly method: 'cells' | 'half steps';
  /** Cells of the model in one cell of the proof; ranges below count these when it is above 1. */
  readonly group: number;
  /** Smallest range, in grouped cells, to which the bound applies. */
  readonly from: number;
  /** Charges of range exactly k at most, for every k ≥ `from` without an entry in `exceptional`. */
  readonly generic: number;
  readonly exceptional: readonly { readonly range: number; readonly atMost: number }[];
  /** Dimension of the space of top parts. */
  readonly topParts: number;
  readonly pencil: Pencil;
}

/** Why charges of every range exist. */
export type Existence =
  | { readonly kind: 'ladder'; readonly perRange: 1 }
  | { readonly kind: 'free fermions'; readonly perRange: 2 };

interface Common {
  readonly hamiltonian: Hamiltonian;
  /** The exhaustive search behind the short ranges. */
  readonly search: SearchResult;
  /** The answer assumes so much, and does not show so much. Shown wherever the verdict is. */
  readonly cautions: readonly string[];
  /** Without the assumption of translation invariance, where that was asked for. */
  readonly waveNumbers: WaveNumberVerdict | null;
}

export type EveryRangeVerdict = Common &
  (
    | {
        /** No charge of range ≥ `from` cells at all; those below are in `search`. */
        readonly kind: 'none';
        readonly from: number;
        readonly bound: EveryRangeBound;
      }
    | {
        /** Exactly so many charges of every range ≥ `from`; upper bound and existence meet. */
        readonly kind: 'complete';
        readonly from: number;
        readonly perRange: number;
        readonly bound: EveryRangeBound;
        readonly existence: Existence;
      }
    | {
        /** An upper bound for every range; existence known only as far as the search went. */
        readonly kind: 'bounded';
        readonly bound: EveryRangeBound;
        readonly existence: Existence | null;
      }
    | {
        /** The program's own lemmas do not reach this model; a published theorem does, its hypotheses checked. */
        readonly kind: 'by citation';
        readonly citation: Citation;
        readonly reason: string;
      }
    | {
        readonly kind: 'undecided';
        readonly reason: string;
        readonly existence: Existence | null;
      }
  );

/** What no verdict of this kind shows. */
export const EVERY_RANGE_CAUTIONS = [
  'Holds on the infinite chain, and for charges of range k on rings of at least 2k + 2r − 3 cells, r the range of H.',
  'Covers translation-invariant sums of local terms: says nothing about quasilocal, non-local or staggered quantities.',
  'Absence of local charges supports thermalisation or chaos; by itself it proves neither.',
] as const;

/** In place of the second one, when every wave number is covered. */
export const ALL_WAVE_NUMBERS_CAUTION =
  'Every wave number is covered, so translation invariance is not assumed; says nothing about quasilocal or non-local quantities.';
