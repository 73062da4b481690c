/** A pool of worker threads: hands out jobs one at a time, outlives a thread that dies, stops at once. */
import { Worker } from 'node:worker_threads';
import { CancelledError } from '../../errors.ts';
import type { PointsPlan } from '../../scan/plan.ts';
import { threadSource } from '../../search/thread.ts';
import type { Job, JobProgress, Reply, WorkerInput } from './jobs.ts';

export interface PoolOptions {
  readonly workers: number;
  readonly signal: AbortSignal;
  /** A thread died over a job, out of memory for one: its reply instead. */
  readonly onDeath: (job: Job, reason: string) => Reply;
  /** The shares done of the jobs that are running, added up; called now and then. */
  readonly onProgress?: (running: number) => void;
}

/**
 * Replies as they come, in no order.
 *
 * @throws CancelledError when `signal` fires; threads are stopped in the middle of their work then
 */
export async function runPool(
  plan: PointsPlan,
  jobs: Iterable<Job>,
  take: (reply: Reply) => Promise<void>,
  { workers, signal, onDeath, onProgress = () => {} }: PoolOptions,
): Promise<void> {
  const queue = jobs[Symbol.iterator]();
  const running = new Set<Worker>();
  // A thread that is stopped ends its job with an exit, which is where its loop looks at the signal.
  const stop = () => {
    for (const worker of running) void worker.terminate();
  };
  signal.addEventListener('abort', stop, { once: true });
  const shares: number[] = [];
  const thread = async (_: unknown, index: number): Promise<void> => {
    const tell = (share: number) => {
      shares[index] = share;
      onProgress(shares.reduce((sum, one) => sum + one, 0));
    };
    let worker: Worker | undefined;
    for (let next = queue.next(); !next.done; next = queue.next()) {
      if (signal.aborted) throw new CancelledError('scan');
      worker ??= start(plan, running);
      const reply = await replyOf(worker, next.value, tell);
      if (signal.aborted) throw new CancelledError('scan');
      if (typeof reply === 'string') {
        running.delete(worker);
        worker = undefined;
      }
      await take(typeof reply === 'string' ? onDeath(next.value, reply) : reply);
      tell(0);
    }
  };
  try {
    await Promise.all(Array.from({ length: workers }, thread));
  } finally {
    signal.removeEventListener('abort', stop);
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
function replyOf(worker: Worker, job: Job, tell: (share: number) => void): Promise<Reply | string> {
  return new Promise((resolve) => {
    const heard = (message: Reply | JobProgress) =>
      message.kind === 'progress' ? tell(message.done) : settle(message);
    const settle = (value: Reply | string) => {
      worker.off('message', heard).off('error', failed).off('exit', ended);
      resolve(value);
    };
    const failed = (error: Error) => settle(`the thread died: ${error.message}`);
    const ended = (status: number) => settle(`the thread ended with status ${status}`);
    worker.on('message', heard).on('error', failed).on('exit', ended);
    worker.postMessage(job);
  });
}
