/** The search in a thread of its own: the event loop of the host stays free, and an `AbortSignal` stops it at once. */
import { Worker } from 'node:worker_threads';
import { CancelledError, InputError, LimitError, VerificationError } from '../errors.ts';
import { Box } from '../lattice/lattice.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import type { LatticeModel } from '../model/lattice-model.ts';
import { estimate, requireMemory } from './estimate.ts';
import type { LatticeResult } from './lattice/result.ts';
import { estimateLattice, type LatticeOptions, type LatticeProgress } from './lattice/search.ts';
import type { SearchResult } from './result.ts';
import { methodFor, type SearchOptions } from './search.ts';
import type { Progress } from './sweep.ts';
import { freeMemory, threadSource } from './thread.ts';
import { type PlainResult, plainModel, resultOf } from './transfer.ts';
import type { Answer, LatticeTask, Task } from './worker.ts';

export interface BackgroundOptions extends Omit<SearchOptions, 'store'> {
  readonly signal?: AbortSignal;
  /** Bytes the search may use; the default is what the machine has free. A larger value overrides the refusal. */
  readonly memory?: number;
  /** A folder that keeps finished layers: the same search, started again after a kill, goes on from the last one. */
  readonly checkpoint?: string;
}

/**
 * `searchNow` in a worker thread.
 *
 * @throws LimitError before it starts when the estimate exceeds `memory`; CancelledError on abort; else as `searchNow`
 */
export async function search(h: Hamiltonian, options: BackgroundOptions): Promise<SearchResult> {
  const { range, signal, onProgress, memory = freeMemory(), primesBelow, checkpoint } = options;
  const method = methodFor(h, range, options.method);
  // What growth needs follows the answer, which nobody knows beforehand; the exhaustive search says it to the byte.
  if (method !== 'growth') requireMemory(`range ${range}`, estimate(h, range), memory);
  if (signal?.aborted) throw new CancelledError('search');
  const task: Task = {
    model: plainModel(h),
    range,
    method,
    ...(primesBelow === undefined ? {} : { primesBelow }),
    ...(checkpoint === undefined ? {} : { checkpoint }),
  };
  return inThread<Progress, PlainResult>(task, onProgress, signal).then((result) => resultOf(h, result));
}

/**
 * `searchLatticeNow` in a worker thread.
 *
 * @throws as `search`
 */
export async function searchLattice(
  model: LatticeModel,
  options: LatticeOptions & Pick<BackgroundOptions, 'signal' | 'memory'>,
): Promise<LatticeResult> {
  const { signal, memory = freeMemory(), onProgress, ...plain } = options;
  requireMemory('the window', estimateLattice(model, plain), memory);
  if (signal?.aborted) throw new CancelledError('search');
  const { cell, extents } = model.lattice;
  const task: LatticeTask = { lattice: { ...model, lattice: { cell, extents } }, options: plain };
  const result = await inThread<LatticeProgress, LatticeResult>(task, onProgress, signal);
  const { box } = result;
  return Object.freeze({ ...result, model, box: new Box(box.cell, box.low, box.size) });
}

/** Runs a task in a worker: its result as a plain value. */
async function inThread<P, R>(
  task: Task | LatticeTask,
  onProgress: ((progress: P) => void) | undefined,
  signal: AbortSignal | undefined,
): Promise<R> {
  const worker = new Worker(...threadSource(new URL('./worker.js', import.meta.url), import.meta.url, task));
  try {
    return await new Promise<R>((resolve, reject) => {
      signal?.addEventListener('abort', () => reject(new CancelledError('search')), { once: true });
      worker.on('message', (answer: Answer<P, R>) => {
        if (answer.kind === 'progress') {
          try {
            onProgress?.(answer.progress);
          } catch (error) {
            reject(error);
          }
        } else if (answer.kind === 'result') resolve(answer.result);
        else reject(errorOf(answer));
      });
      worker.on('error', reject);
      worker.on('exit', (code) =>
        reject(new VerificationError(`search: the worker ended with status ${code}`)),
      );
    });
  } finally {
    await worker.terminate();
  }
}

/** An allocation that the machine refuses arrives as a RangeError. */
function errorOf({ name, message, input }: Extract<Answer<unknown, unknown>, { kind: 'error' }>): Error {
  if (input !== undefined) return new InputError(input.who, input.expected, input.got);
  if (name === 'LimitError' || name === 'RangeError') return new LimitError(message);
  return new VerificationError(message);
}
