/** The search as users call it: its result hands out its own proof. */
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { type BackgroundOptions, search as searchInBackground } from '../search/background.ts';
import type { SearchResult } from '../search/result.ts';
import { type SearchOptions, searchNow as searchHere } from '../search/search.ts';
import { type CertificateOptions, certificateOf } from './certificate.ts';

export interface CertifiedResult extends SearchResult {
  /** The certificate as canonical JSON; see `certificateOf` for limits and cost. */
  certificate(options?: CertificateOptions): Promise<string>;
}

/**
 * `searchNow` in a worker thread, with a result that can write its certificate.
 *
 * @throws LimitError before it starts when the estimate exceeds `memory`; CancelledError on abort; else as `searchNow`
 */
export async function search(h: Hamiltonian, options: BackgroundOptions): Promise<CertifiedResult> {
  return certified(await searchInBackground(h, options));
}

/**
 * All charges of range ≤ `range` of H: a canonical basis with exact coefficients, complete by proof.
 *
 * Memory: 8 bytes a packed candidate, 4^(n·range), and what is left alive; `growth` needs what is alive only. Synchronous.
 *
 * @throws InputError when the range is no positive integer; LimitError when the candidates do not fit
 */
export function searchNow(h: Hamiltonian, options: SearchOptions): CertifiedResult {
  return certified(searchHere(h, options));
}

/** The method is not enumerable: the result stays plain data for JSON, cloning and comparison. */
function certified(result: SearchResult): CertifiedResult {
  return Object.freeze(
    Object.defineProperties(
      {},
      {
        ...Object.getOwnPropertyDescriptors(result),
        certificate: { value: (options?: CertificateOptions) => certificateOf(result, options) },
      },
    ),
  ) as CertifiedResult;
}
