/** The search in a thread of its own: the event loop of the host stays free, and an `AbortSignal` stops it at once. */
import { availableParallelism } from 'node:os';
import { Worker } from 'node:worker_threads';
import { CancelledError, InputError, LimitError, show, VerificationError } from '../errors.ts';
import { Box } from '../lattice/lattice.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import type { LatticeModel } from '../model/lattice-model.ts';
import { candidateCount, estimate, requireMemory } from './estimate.ts';
import { type AllWaves, assertChain, type WavesProgress } from './lattice/all-waves.ts';
import type { LatticeResult } from './lattice/result.ts';
import { estimateLattice, type LatticeOptions, type LatticeProgress } from './lattice/search.ts';
import { planOf } from './plan.ts';
import type { SearchResult } from './result.ts';
import { combined, latecomers, type SearchOptions, type SectorCharges } from './search.ts';
import type { Progress } from './sweep.ts';
import { freeMemory, threadSource } from './thread.ts';
import { type PlainPart, partOf, plainModel } from './transfer.ts';
import type { Answer, LatticeTask, Task, WavesTask } from './worker.ts';

export interface BackgroundOptions extends Omit<SearchOptions, 'store'> {
  readonly signal?: AbortSignal;
  /** Bytes the search may use; the default is what the machine has free. A larger value overrides the refusal. */
  readonly memory?: number;
  /**
   * A folder that keeps finished layers: the same search in the same number of sectors, started again after a kill, goes on from
   * the last one.
   */
  readonly checkpoint?: string;
  /**
   * Sectors that are searched at the same time; `sectors` is as many by default. Default: the processors of the machine for 13
   * spins and more, else 1. The answer does not depend on it.
   */
  readonly threads?: number;
}

export interface WavesOptions extends Pick<BackgroundOptions, 'signal' | 'memory'> {
  readonly onProgress?: (stage: WavesProgress) => void;
}

/** Below so many spins, starting a second thread costs more than it saves. */
const SPINS_FOR_THREADS = 13;

/**
 * `searchNow` in worker threads, one a conserved sector.
 *
 * @throws LimitError before it starts when the estimate exceeds `memory`; CancelledError on abort; else as `searchNow`
 */
export async function search(h: Hamiltonian, options: BackgroundOptions): Promise<SearchResult> {
  const { range, signal, onProgress, memory = freeMemory(), primesBelow, checkpoint } = options;
  const { threads = h.chain.cell * range < SPINS_FOR_THREADS ? 1 : availableParallelism() } = options;
  if (!(Number.isInteger(threads) && threads >= 1))
    throw new InputError('search', 'one thread or more, a whole number', show(threads));
  const started = performance.now();
  const { method, sectors } = planOf(h, { ...options, sectors: options.sectors ?? threads });
  const together = Math.min(threads, sectors.length);
  // What growth needs follows the answer, which nobody knows beforehand; the exhaustive search says it to the byte.
  if (method !== 'growth')
    requireMemory(`range ${range}`, estimate(h, range, { together, all: sectors.length }), memory);
  if (signal?.aborted) throw new CancelledError('search');
  const model = plainModel(h);
  const done = sectors.map(() => 0);
  const candidates = candidateCount(h.chain.cell, range);
  const run = async (i: number, below: number | undefined): Promise<SectorCharges> => {
    const task: Task = {
      model,
      sector: sectors[i]!,
      range,
      method,
      ...(below === undefined ? {} : { primesBelow: below }),
      ...(checkpoint === undefined ? {} : { checkpoint }),
    };
    const tell = (progress: Progress) => {
      done[i] = progress.done;
      onProgress?.({ ...progress, done: done.reduce((a, b) => a + b) / done.length, candidates });
    };
    const part = partOf(await inThread<Progress, PlainPart>(task, tell, stop.signal));
    done[i] = 1;
    return part;
  };
  // One failure, or the caller's signal, ends all threads.
  const stop = new AbortController();
  signal?.addEventListener('abort', () => stop.abort(), { once: true });
  const queue = [...sectors.keys()];
  const parts = new Array<SectorCharges>(sectors.length);
  const lane = async (): Promise<void> => {
    for (let i = queue.shift(); i !== undefined; i = queue.shift()) parts[i] = await run(i, primesBelow);
  };
  try {
    await Promise.all(Array.from({ length: together }, lane));
  } catch (error) {
    stop.abort();
    throw error;
  }
  for (let late = latecomers(parts); late !== undefined; late = latecomers(parts))
    for (const i of late.parts) parts[i] = await run(i, late.primesBelow);
  return combined(h, range, parts, method, performance.now() - started);
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
  const task: LatticeTask = { lattice: plainLattice(model), options: plain };
  const result = await inThread<LatticeProgress, LatticeResult>(task, onProgress, signal);
  const { box } = result;
  return Object.freeze({ ...result, model, box: new Box(box.cell, box.low, box.size) });
}

/**
 * `allWaves` in a worker thread.
 *
 * @throws as `search`
 */
export async function searchAllWaves(
  model: LatticeModel,
  range: number,
  options: WavesOptions = {},
): Promise<AllWaves> {
  const { signal, memory = freeMemory(), onProgress } = options;
  assertChain(model);
  requireMemory('the window', estimateLattice(model, { window: [range] }), memory);
  if (signal?.aborted) throw new CancelledError('search');
  const task: WavesTask = { lattice: plainLattice(model), wavesOfRange: range };
  return inThread<WavesProgress, AllWaves>(task, onProgress, signal);
}

/** A model without its class, to cross the thread's boundary. */
function plainLattice(model: LatticeModel): LatticeTask['lattice'] {
  const { cell, extents } = model.lattice;
  return { ...model, lattice: { cell, extents } };
}

/** Runs a task in a worker: its result as a plain value. */
async function inThread<P, R>(
  task: Task | LatticeTask | WavesTask,
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
