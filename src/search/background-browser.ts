/**
 * Stands in for `background.ts` where a bundler builds for browsers (field `browser` of package.json): the search without a thread of its
 * own, since a library cannot know where a page keeps its files. A page that must stay alive calls it in a worker; the source of the workbench
 * shows how, and ends the worker to cancel.
 */
import { CancelledError, InputError } from '../errors.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import type { LatticeModel } from '../model/lattice-model.ts';
import type { BackgroundOptions, WavesOptions } from './background.ts';
import { estimate, requireMemory } from './estimate.ts';
import { type AllWaves, allWaves, assertChain } from './lattice/all-waves.ts';
import type { LatticeResult } from './lattice/result.ts';
import { estimateLattice, type LatticeOptions, searchLatticeNow } from './lattice/search.ts';
import { methodFor } from './plan.ts';
import type { SearchResult } from './result.ts';
import { searchNow } from './search.ts';

/** What a page may use unless told otherwise: browsers do not say what is free. */
const MEMORY = 2e9;

/**
 * As `search` in Node; gives way once before it starts. `signal` is seen then, and where `onProgress` fires it.
 *
 * @throws LimitError, CancelledError, InputError as `search` in Node; InputError for a checkpoint, since a page has no folders
 */
export async function search(h: Hamiltonian, options: BackgroundOptions): Promise<SearchResult> {
  const { signal, memory = MEMORY, checkpoint, threads: _, onProgress, ...rest } = options;
  if (checkpoint !== undefined) throw new InputError('search', 'no checkpoint in a browser', checkpoint);
  if (methodFor(h, options.range, options.method) !== 'growth')
    requireMemory(`range ${options.range}`, estimate(h, options.range), memory);
  await turn(signal);
  return searchNow(h, { ...rest, onProgress: stoppable(onProgress, signal) });
}

/**
 * `searchLatticeNow`, as `search`.
 *
 * @throws as `search`
 */
export async function searchLattice(
  model: LatticeModel,
  options: LatticeOptions & Pick<BackgroundOptions, 'signal' | 'memory'>,
): Promise<LatticeResult> {
  const { signal, memory = MEMORY, onProgress, ...rest } = options;
  requireMemory('the window', estimateLattice(model, rest), memory);
  await turn(signal);
  return searchLatticeNow(model, { ...rest, onProgress: stoppable(onProgress, signal) });
}

/**
 * `allWaves`, as `search`.
 *
 * @throws as `search`
 */
export async function searchAllWaves(
  model: LatticeModel,
  range: number,
  options: WavesOptions = {},
): Promise<AllWaves> {
  const { signal, memory = MEMORY, onProgress } = options;
  assertChain(model);
  requireMemory('the window', estimateLattice(model, { window: [range] }), memory);
  await turn(signal);
  return allWaves(model, range, stoppable(onProgress, signal));
}

async function turn(signal: AbortSignal | undefined): Promise<void> {
  await new Promise((resolve) => setTimeout(resolve, 0));
  if (signal?.aborted) throw new CancelledError('search');
}

function stoppable<P>(onProgress: ((progress: P) => void) | undefined, signal: AbortSignal | undefined) {
  return (progress: P): void => {
    onProgress?.(progress);
    if (signal?.aborted) throw new CancelledError('search');
  };
}
