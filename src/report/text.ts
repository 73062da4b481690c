/** Results as text for a terminal. */
import { textFromRational } from '../algebra/rational.ts';
import type { Charge, SearchResult } from '../search/result.ts';

export interface TextOptions {
  readonly colour?: boolean;
  /** Charges with more terms are folded to so many, with the count of the rest. */
  readonly fold?: number;
}

/** What a verdict never says, wherever one is printed. */
export const CAUTIONS = [
  'Covers translation-invariant sums of local terms only: says nothing about quasilocal, non-local or staggered quantities.',
  'Absence of local charges supports thermalisation or chaos; by itself it proves neither.',
];

export function printResult(result: SearchResult, { fold = 24 }: TextOptions = {}): string {
  const { charges, dimensionByRange, range, minimumCells, expansionOfH } = result;
  const lines = [verdict(result), ''];
  charges.forEach((charge, i) => void lines.push(`  Q${i + 1}  ${printCharge(charge, fold)}`));
  if (expansionOfH !== null) {
    const parts = expansionOfH.flatMap((c, i) =>
      c.numerator === 0n ? [] : [`${textFromRational(c)} Q${i + 1}`],
    );
    lines.push('', `H = ${parts.join(' + ').replaceAll('+ -', '- ')}`);
  }
  lines.push(
    `Dimension up to range 1 … ${range}: ${dimensionByRange.join(', ')}`,
    `Holds on the infinite chain and on rings of ${minimumCells} cells or more.`,
    ...CAUTIONS,
  );
  return `${lines.join('\n')}\n`;
}

function verdict({ charges, range }: SearchResult): string {
  return `Exactly ${charges.length} independent charge${charges.length === 1 ? '' : 's'} of range ≤ ${range}; the list is complete.`;
}

function printCharge({ range, parity, density }: Charge, fold: number): string {
  const text = density.size <= fold ? density.toString() : `${density.size} terms`;
  return `range ${range}${parity === null ? '' : `, ${parity}`}: ${text}`;
}
