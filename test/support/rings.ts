/** Finite periodic rings, written out site by site: what a sum over all translates means. */
import { Operator } from '../../src/algebra/operator.ts';
import { product, type Word } from '../../src/algebra/word.ts';

/** The string moved right by `spins` on a ring of `size` spins. Longer strings are the caller's error. */
export function rotate(word: Word, spins: number, size: number): Word {
  const bits = BigInt(2 * size);
  const moved = word << BigInt(2 * (spins % size));
  return (moved & ((1n << bits) - 1n)) | (moved >> bits);
}

/** Σ_j τ_j(density) on a ring of `cells` cells. */
export function sumOverRing(density: Operator, cell: number, cells: number): Operator {
  const terms: [Word, bigint][] = [];
  for (let j = 0; j < cells; j++)
    for (const [word, value] of density.numerators) terms.push([rotate(word, j * cell, cells * cell), value]);
  return Operator.fromIntegers(terms, density.denominator);
}

/** Do two strings commute, by their product: a second way beside counting sites. */
export function commuteByProduct(a: Word, b: Word): boolean {
  return product(a, b).phase === product(b, a).phase;
}
