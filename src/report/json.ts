/** Results for machines. */
import { textFromRational } from '../algebra/rational.ts';
import type { SearchResult } from '../search/result.ts';
import { wordText } from './grouping.ts';
import { labelsOf } from './labels.ts';

/** The JSON of a result, in full: coefficients as `p/q`, words from the first spin of the first cell on. */
export function resultToJson(result: SearchResult): object {
  const { hamiltonian, charges, dimensionByRange, range } = result;
  const { chain, density } = hamiltonian;
  const labels = labelsOf(result);
  const terms = (operator: SearchResult['charges'][number]['density']) =>
    [...operator.terms()].map(([word, c]) => ({
      coefficient: textFromRational(c),
      word: wordText(chain, word),
    }));
  return {
    range,
    cell: chain.cell,
    hamiltonian: { range: hamiltonian.range, reflection: hamiltonian.reflection, terms: terms(density) },
    dimension: dimensionByRange[range - 1],
    dimensionByRange,
    charges: charges.map((q, i) => ({
      range: q.range,
      parity: q.parity,
      label: labels[i],
      terms: terms(q.density),
    })),
    expansionOfH: result.expansionOfH?.map(textFromRational) ?? null,
    validRings: { minimumCells: result.minimumCells },
    primes: result.primes,
    candidates: result.candidates,
    milliseconds: Math.round(result.milliseconds),
  };
}
