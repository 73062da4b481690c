/**
 * The bound on the number of charges that a certificate of the kind `growth` rests on. Known before the certificate is written, so
 * that none is written whose bounds do not meet.
 */
import { eliminate } from '../linear/elimination.ts';
import type { Field } from '../linear/field.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import type { Method } from '../search/result.ts';
import { MAX_PENCIL_CELL, rowsOf, stringsOf, TopParts } from '../search/top-parts.ts';

/** Limit of the checker: a string with a cell at either end, in spins. */
const MAX_SPINS = 26;

/** Is a search of this kind certified by growth alone, if the bounds meet? */
export function isByGrowth(
  { chain, range: reach }: Hamiltonian,
  range: number,
  method: Method | undefined,
): boolean {
  return (
    method === 'growth' &&
    reach === 2 &&
    chain.cell <= MAX_PENCIL_CELL &&
    chain.cell * (range + 2) <= MAX_SPINS
  );
}

/** At most so many charges of range ≤ k, where the interaction is injective modulo p. Yields the share of the work done. */
export function* growthBound(h: Hamiltonian, k: number, field: Field): Generator<number, number> {
  // Ranges 1 and 2: all their equations.
  const short = [...stringsOf(h, 1), ...(k > 1 ? stringsOf(h, 2) : [])];
  const images = short.map((q) => h.chain.bracket(h.density, q));
  const solutions = short.length - eliminate(rowsOf(images, field), images.length, field).rank;
  if (k < 3) return solutions;
  const steps = new TopParts(h, field).allowed(k);
  for (;;) {
    const step = steps.next();
    if (step.done) return step.value.reduce((sum, basis) => sum + basis.length, solutions);
    yield 0.5;
  }
}
