/** How a search goes about it: by which method, and in which sectors. */
import { InputError, LimitError, show } from '../errors.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { fits, MAX_SPINS } from './addresses.ts';
import type { Method } from './result.ts';
import { gradingOf, MAX_SECTORS, type Sector, sectorsOf, ungraded } from './sectors.ts';

export interface Plan {
  readonly method: Method;
  /** Those of the exhaustive search; growth has one. */
  readonly sectors: readonly Sector[];
}

/** The method of a search when the caller leaves it open. */
export function methodFor(h: Hamiltonian, range: number, method?: Method): Method {
  return method ?? (h.chain.cell * range > MAX_SPINS ? 'growth' : 'exhaustive');
}

/**
 * @param sectors how many are wanted: the largest power of two below it that the model has, or more when the arrays need it
 * @throws InputError when the range or the number of sectors is none; LimitError when the exhaustive search cannot hold it
 */
export function planOf(
  h: Hamiltonian,
  {
    range,
    method,
    sectors = 1,
  }: { range: number; method?: Method | undefined; sectors?: number | undefined },
): Plan {
  const { cell } = h.chain;
  if (!(Number.isInteger(range) && range >= 1))
    throw new InputError('search', 'a range of one cell or more, a whole number', show(range));
  if (!(Number.isInteger(sectors) && sectors >= 1))
    throw new InputError('search', 'one sector or more, a whole number', show(sectors));
  const spins = cell * range;
  if (methodFor(h, range, method) === 'growth') return { method: 'growth', sectors: [ungraded(h)] };
  for (let bits = Math.floor(Math.log2(Math.min(sectors, MAX_SECTORS))); 2 ** bits <= MAX_SECTORS; bits++) {
    const grading = gradingOf(h, bits);
    if (fits(grading, cell, range)) return { method: 'exhaustive', sectors: sectorsOf(grading) };
  }
  throw new LimitError(
    `search: range ${range} in cells of ${cell} is ${spins} spins, ${(4 ** spins * (1 - 4 ** -cell)).toPrecision(3)} candidates; the exhaustive search takes up to ${MAX_SPINS} spins, one more where the model has four conserved sectors`,
  );
}
