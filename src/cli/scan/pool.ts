/** A pool of worker threads: hands out jobs one at a time, outlives a thread that dies, stops at once. */
import { Worker } from 'node:worker_threads';
import { CancelledError } from '../../errors.ts';
import type { PointsPlan } from '../../scan/plan.ts';
import { threadSource } from '../../search/thread.ts';
import type { Job, Reply, WorkerInput } from './jobs.ts';

export interface PoolOptions {
  readonly workers: number;
  readonly signal: AbortSignal;
  /** A thread died over a job, out of memory for one: its reply instead. */
  readonly onDeath: (job: Job, reason: string) => Reply;
}

/**
 * Replies as they come, in no order. The consumer's work between two of them holds up nothing.
 *
 * @throws CancelledError when `signal` fires; threads are stopped in the middle of their work then
 */
export async function runPool(
  plan: PointsPlan,
  jobs: Iterable<Job>,
  take: (reply: Reply) => Promise<void>,
  { workers, signal, onDeath }: PoolOptions,
): Promise<void> {
  const queue = jobs[Symbol.iterator]();
  const running = new Set<Worker>();
  const stopped = new Promise<never>((_, reject) => {
    const stop = () => reject(new CancelledError('scan'));
    if (signal.aborted) stop();
    else signal.addEventListener('abort', stop, { once: true });
  });
  stopped.catch(() => {});
  const thread = async (): Promise<void> => {
    let worker: Worker | undefined;
    for (let next = queue.next(); !next.done; next = queue.next()) {
      worker ??= start(plan, running);
      const reply = await Promise.race([replyOf(worker, next.value), stopped]);
      if (typeof reply === 'string') {
        running.delete(worker);
        worker = undefined;
      }
      await take(typeof reply === 'string' ? onDeath(next.value, reply) : reply);
    }
  };
  try {
    await Promise.race([stopped, Promise.all(Array.from({ length: workers }, thread))]);
  } finally {
    await Promise.all([...running].map((worker) => worker.terminate()));
  }
}

function start(plan: PointsPlan, running: Set<Worker>): Worker {
  const input: WorkerInput = { plan };
  const worker = new Worker(...threadSource(new URL('./worker.js', import.meta.url), import.meta.url, input));
  running.add(worker);
  return worker;
}

/** The reply, or why the thread died. */
function replyOf(worker: Worker, job: Job): Promise<Reply | string> {
  return new Promise((resolve) => {
    const settle = (value: Reply | string) => {
      worker.off('message', settle).off('error', failed).off('exit', ended);
      resolve(value);
    };
    const failed = (error: Error) => settle(`the thread died: ${error.message}`);
    const ended = (status: number) => settle(`the thread ended with status ${status}`);
    worker.on('message', settle).on('error', failed).on('exit', ended);
    worker.postMessage(job);
  });
}
