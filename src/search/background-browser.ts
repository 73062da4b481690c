/**
 * Stands in for `background.ts` where a bundler builds for browsers (field `browser` of package.json): the search without a thread of its
 * own, since a library cannot know where a page keeps its files. A page that must stay alive calls it in a worker; the source of the workbench
 * shows how, and ends the worker to cancel.
 */
import { CancelledError, LimitError } from '../errors.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import type { BackgroundOptions } from './background.ts';
import { estimate } from './estimate.ts';
import type { SearchResult } from './result.ts';
import { searchNow } from './search.ts';

/** What a page may use unless told otherwise: browsers do not say what is free. */
const MEMORY = 2e9;

/**
 * As `search` in Node; gives way once before it starts. `signal` is seen then, and where `onProgress` fires it.
 *
 * @throws LimitError, CancelledError, InputError as `search` in Node
 */
export async function search(h: Hamiltonian, options: BackgroundOptions): Promise<SearchResult> {
  const { signal, memory = MEMORY, onProgress, ...rest } = options;
  const need = estimate(h, options.range);
  if (need.bytes > memory)
    throw new LimitError(
      `search: range ${options.range} needs about ${(need.bytes / 1e9).toPrecision(2)} GB; ${(memory / 1e9).toPrecision(2)} GB may be used. ` +
        'Give a larger memory limit to try all the same',
    );
  await new Promise((resolve) => setTimeout(resolve, 0));
  const stopIfAborted = () => {
    if (signal?.aborted) throw new CancelledError('search');
  };
  stopIfAborted();
  return searchNow(h, {
    ...rest,
    onProgress(progress) {
      onProgress?.(progress);
      stopIfAborted();
    },
  });
}
