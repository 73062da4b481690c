/** What a catalogue entry says: a model with exact couplings, what is published about it, and what was computed with this library. */

/** A published source. The title is absent where only the number is at hand. */
export interface Source {
  readonly title?: string;
  /** arXiv number or journal reference. */
  readonly reference: string;
  readonly year: number;
}

/** What a source states about a model, in this library's words. */
export interface PublishedStatement {
  readonly statement: string;
  readonly source: Source;
  /** Was the statement read in the source (its abstract or introduction), or is its wording or a condition quoted from memory? */
  readonly basis: 'seen' | 'from memory';
}

/**
 * - `integrable`: charges of unbounded range are published for it, or follow from a published construction;
 * - `non-integrable`: their absence is published, in the sense of the statement that is quoted;
 * - `special`: decoupled, classical or constrained; counts of charges do not mean here what they mean elsewhere;
 * - `open`: no published statement is quoted, the counts are all there is.
 */
export type PublishedStatus = 'integrable' | 'non-integrable' | 'special' | 'open';

export interface CatalogueEntry {
  /** Short and unique, as the file's name. */
  readonly id: string;
  readonly name: string;
  /** Spins a cell. */
  readonly cell: number;
  readonly formula: string;
  /** The couplings to which the counts belong, exact. */
  readonly parameters: Readonly<Record<string, string>>;
  readonly status: PublishedStatus;
  readonly published: readonly PublishedStatement[];
  /**
   * Computed here, not published: entry j − 1 is the number of independent translation-invariant charges of range exactly j
   * (dimension at range ≤ j minus dimension at range ≤ j − 1), H counted, the identity not.
   */
  readonly computedCounts: readonly number[];
  /** What a reader of the counts has to know. */
  readonly caution?: string;
}

/** A family of models and the couplings at which more charges appear. */
export interface FamilyEntry {
  readonly id: string;
  readonly name: string;
  readonly cell: number;
  /** All its parameters are free. */
  readonly formula: string;
  /** Polynomials in the parameters that all vanish exactly where a charge beyond those of the generic member appears. */
  readonly exceptionalWhere: readonly string[];
  /** The range of that charge. */
  readonly range: number;
  /** Assumed of the parameters: polynomials that do not vanish. */
  readonly assuming: readonly string[];
  /** How the locus is known: a source, or a computation on a list of couplings. */
  readonly evidence: 'published' | 'computed here';
  readonly published: readonly PublishedStatement[];
}
