/** What a search will need, before it starts. */
import { LimitError } from '../errors.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { planOf } from './plan.ts';

export interface Estimate {
  /** Columns of the system: representatives of range 1 … k, 4^{nk} − 4^{n(k−1)}. */
  readonly candidates: number;
  /** Bytes at the peak: two 32-bit words a packed string, one bit an output, and the runtime. */
  readonly bytes: number;
  /** Seconds to expect on one core of 2020s hardware; the model at hand may take a few times longer or less. */
  readonly seconds: number;
}

/** Number of representatives of range 1 … `range`: 4^{nk} − 4^{n(k−1)}. */
export function candidateCount(cell: number, range: number): number {
  return 4 ** (cell * range) - 4 ** (cell * (range - 1));
}

/**
 * Refuses a run that would not fit.
 *
 * @param what the run, as the subject of a sentence
 * @param memory bytes that may be used
 * @throws LimitError with the numbers and the way out
 */
export function requireMemory(
  what: string,
  need: { readonly candidates: number; readonly bytes: number },
  memory: number,
): void {
  if (need.bytes <= memory) return;
  const gigabytes = (bytes: number) => `${(bytes / 1e9).toPrecision(2)} GB`;
  throw new LimitError(
    `search: ${what} has ${need.candidates.toLocaleString('en')} candidates and needs about ${gigabytes(need.bytes)}; ` +
      `${gigabytes(memory)} may be used. Give a larger memory limit to try all the same`,
  );
}

/** Measured, docs/performance.md: runtime and code, and nanoseconds a candidate and term. */
const BASE_BYTES = 90e6;
const NANOSECONDS = 8;

/**
 * Candidates, memory and time of an exhaustive search.
 *
 * @param sectors those that are in memory at the same time, of how many
 * @throws InputError when the range is no positive integer; LimitError when candidates do not fit the packed form
 */
export function estimate(
  h: Hamiltonian,
  range: number,
  sectors: { readonly together: number; readonly all: number } = { together: 1, all: 1 },
): Estimate {
  planOf(h, { range, method: 'exhaustive', sectors: sectors.all });
  const n = h.chain.cell;
  const size = 4 ** (n * range);
  const hitBits = n * (range + h.range - 2) <= 16 ? 4 ** (n * (range + Math.max(0, h.range - 2))) : 0;
  return {
    candidates: candidateCount(n, range),
    bytes: Math.round(sectors.together * (BASE_BYTES + (8 * size) / sectors.all + hitBits / 8)),
    seconds: (size * NANOSECONDS * (h.density.size + 2)) / 1e9,
  };
}
