/**
 * The text of a certificate: canonical JSON as docs/certificate.md prescribes. Field order is that of the objects below, there is
 * no white space, numbers are natural, exact coefficients are strings, and one line feed ends the text.
 */
import type { Operator } from '../algebra/operator.ts';
import { textFromRational } from '../algebra/rational.ts';
import { textFromWord } from '../algebra/word.ts';
import type { Chain } from '../lattice/chain.ts';
import type { SearchResult } from '../search/result.ts';
import { VERSION } from './version.ts';

/** What shows that there are no more charges than the listed ones. */
export interface Evidence {
  readonly prime: number;
  /** Range of the outputs of each sweep, and how many equations it used. */
  readonly sweeps: readonly (readonly [output: number, used: number])[];
  /** Outputs whose rows are independent on what the sweeps leave, packed. */
  readonly pivots: readonly number[];
}

/** The limits of what is claimed; docs/certificate.md lists them word for word. */
const ASSUMES = [
  'The Hamiltonian is the sum of all translates, by whole cells, of the listed terms; every cell holds the same number of spins 1/2.',
  'Counted are sums of all translates, by whole cells, of one combination of Pauli strings; the identity is left out.',
  'Nothing is said about quasilocal, non-local or staggered conserved quantities.',
];

/** The claim in one sentence. */
export function statementOf({ hamiltonian, range, charges, minimumCells }: SearchResult): string {
  const { cell } = hamiltonian.chain;
  return (
    `On the infinite chain of cells of ${cell} ${cell === 1 ? 'spin' : 'spins'} 1/2, and on every ring of at least ${minimumCells} cells, ` +
    `the translation-invariant conserved quantities of range at most ${range} ${range === 1 ? 'cell' : 'cells'} ` +
    `form a space of dimension exactly ${charges.length}, and it is spanned by the listed charges.`
  );
}

/** @param evidence of the kind `exhaustive`; of the kind `growth` it is a prime alone */
export function documentText(result: SearchResult, evidence: Evidence | { readonly prime: number }): string {
  const { hamiltonian, range, dimensionByRange, charges, minimumCells } = result;
  const { chain } = hamiltonian;
  return canonicalText({
    certificate: 'conserved quantities of a spin chain',
    version: 1,
    kind: 'sweeps' in evidence ? 'exhaustive' : 'growth',
    tool: `holdfast ${VERSION}`,
    model: { cell: chain.cell, range: hamiltonian.range, terms: terms(chain, hamiltonian.density) },
    claim: {
      range,
      dimensions: dimensionByRange,
      rings: minimumCells,
      statement: statementOf(result),
      assumes: ASSUMES,
    },
    charges: charges.map((q) => ({ range: q.range, terms: terms(chain, q.density) })),
    evidence:
      'sweeps' in evidence
        ? {
            prime: evidence.prime,
            sweeps: evidence.sweeps,
            pivots: evidence.pivots.map((word) => text(chain, BigInt(word))),
          }
        : { prime: evidence.prime },
  });
}

export function text(chain: Chain, word: bigint): string {
  return textFromWord(word, chain.range(word) * chain.cell);
}

/** Strings and exact coefficients, in the order that the format prescribes. */
export function terms(chain: Chain, density: Operator): string[][] {
  return [...density.terms()].map(([word, c]) => [text(chain, word), textFromRational(c)]);
}

export type Value = string | number | readonly Value[] | { readonly [key: string]: Value };

export function canonicalText(value: Value): string {
  return `${JSON.stringify(value)}\n`;
}
