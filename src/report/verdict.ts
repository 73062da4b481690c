/** What a search has shown, in sentences: the verdict, where it holds, and what it does not say. Every output takes them from here. */
import type { Operator } from '../algebra/operator.ts';
import { textFromRational } from '../algebra/rational.ts';
import type { SearchResult } from '../search/result.ts';

/** What a verdict never says, wherever one is printed. */
export const CAUTIONS = [
  'Covers translation-invariant sums of local terms only: says nothing about quasilocal, non-local or staggered quantities.',
  'Absence of local charges supports thermalisation or chaos; by itself it proves neither.',
];

/** The verdict in one sentence. It says what was found and that nothing is missing; `CAUTIONS` and `validityOf` belong beside it. */
export function verdictOf({ charges, range, expansionOfH }: SearchResult): string {
  if (charges.length === 0) return `No charge of range ≤ ${range} exists.`;
  if (charges.length === 1 && expansionOfH !== null)
    return `H is the only charge of range ≤ ${range}; there is no other.`;
  return `Exactly ${charges.length} independent charge${charges.length === 1 ? '' : 's'} of range ≤ ${range}; the list is complete.`;
}

export function validityOf({ minimumCells }: SearchResult): string {
  return `Holds on the infinite chain and on rings of ${minimumCells} cells or more.`;
}

/** `H = 1/20 Q1 - Q3`, or why there is none. */
export function expansionText({ expansionOfH, hamiltonian, range }: SearchResult): string {
  if (expansionOfH === null)
    return `H itself has range ${hamiltonian.range}, above ${range}, and is not in the list.`;
  let text = 'H =';
  expansionOfH.forEach(({ numerator, denominator }, i) => {
    if (numerator === 0n) return;
    const size = { numerator: numerator < 0n ? -numerator : numerator, denominator };
    const factor = size.numerator === 1n && denominator === 1n ? '' : `${textFromRational(size)} `;
    const sign = numerator < 0n ? (text === 'H =' ? ' -' : ' - ') : text === 'H =' ? ' ' : ' + ';
    text += `${sign}${factor}Q${i + 1}`;
  });
  return text;
}

/** `1 string`, `1,204 strings`. */
export function strings(count: number): string {
  return `${grouped(count)} string${count === 1 ? '' : 's'}`;
}

/** Digits in threes, by commas. Written out, since the runtime's locale must not change a report. */
export function grouped(count: number): string {
  if (count >= 1e15) return `about ${count.toPrecision(3)}`;
  return String(count).replace(/\B(?=(\d{3})+$)/g, ',');
}

/** The basis is reduced range by range; how many charges each range adds. */
export function addedByRange({ dimensionByRange }: SearchResult): number[] {
  return dimensionByRange.map((dimension, j) => dimension - (dimensionByRange[j - 1] ?? 0));
}

/** Number of strings of each range in a density. */
export function stringsByRange(
  { hamiltonian }: Pick<SearchResult, 'hamiltonian'>,
  density: Operator,
): Map<number, number> {
  const counts = new Map<number, number>();
  for (const word of density.numerators.keys()) {
    const range = hamiltonian.chain.range(word);
    counts.set(range, (counts.get(range) ?? 0) + 1);
  }
  return counts;
}

/** A search along growth sees part of the equations and takes the rest from a lemma: it has to say so. */
export function byLemma({ method }: SearchResult): string {
  return method === 'growth' ? ', most of which the lifting lemma rules out unseen (docs/theory.md)' : '';
}
