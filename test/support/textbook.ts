/**
 * The search as a textbook would do it: every candidate, every equation, dense elimination over the rationals. It shares nothing
 * with the sweeps, the forests and the primes; only the bracket of densities, which is tested against explicit matrices.
 */
import { Operator } from '../../src/algebra/operator.ts';
import { gcd } from '../../src/algebra/rational.ts';
import type { Word } from '../../src/algebra/word.ts';
import type { Hamiltonian } from '../../src/model/hamiltonian.ts';

/** Dimension of the space of charges of range ≤ j, for j = 1 … range. Candidates enter by rising range, so one pass tells all. */
export function textbookDimensions(h: Hamiltonian, range: number): number[] {
  const spins = h.chain.cell * range;
  const byRange: Word[][] = Array.from({ length: range }, () => []);
  for (let word = 1n; word < 1n << BigInt(2 * spins); word++)
    if (h.chain.representative(word) === word) byRange[h.chain.range(word) - 1]!.push(word);
  const pivots = new Map<Word, Map<Word, bigint>>();
  let candidates = 0;
  return byRange.map((words) => {
    candidates += words.length;
    for (const word of words)
      insert(pivots, h.chain.bracket(h.density, Operator.fromIntegers([[word, 1n]])).numerators);
    return candidates - pivots.size;
  });
}

/** Fraction-free elimination over the rationals: reduces a row by the pivot rows and keeps what is left as a new one. */
function insert(pivots: Map<Word, Map<Word, bigint>>, source: ReadonlyMap<Word, bigint>): void {
  const row = new Map(source);
  for (;;) {
    // Map order is insertion order: a row's own first words come first, later ones from the pivots it met.
    let lead: Word | undefined;
    for (const word of row.keys())
      if (pivots.has(word)) {
        lead = word;
        break;
      }
    if (lead === undefined) break;
    const pivot = pivots.get(lead)!;
    const a = row.get(lead)!;
    const b = pivot.get(lead)!;
    const common = gcd(a, b);
    const [own, other] = [b / common, a / common];
    if (own !== 1n) for (const [word, value] of row) row.set(word, value * own);
    for (const [word, value] of pivot) {
      const sum = (row.get(word) ?? 0n) - value * other;
      if (sum === 0n) row.delete(word);
      else row.set(word, sum);
    }
  }
  let content = 0n;
  for (const value of row.values()) content = gcd(content, value);
  if (content > 1n) for (const [word, value] of row) row.set(word, value / content);
  const first = row.keys().next().value;
  if (first !== undefined) pivots.set(first, row);
}
