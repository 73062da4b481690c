/** One shard of a plan in a pool of threads: what is done already is left alone, what is finished is on the disk at once. */
import type { Shard } from '../../scan/shard.ts';
import { pointsOfShard } from '../../scan/shard.ts';
import type { ResultsFolder } from './folder.ts';
import type { Job } from './jobs.ts';
import { runPool } from './pool.ts';

export interface ShardReport {
  /** Points of the shard, and of them those that were done before. */
  readonly total: number;
  readonly before: number;
  /** Finished by this run, and of them those that failed or have no Hamiltonian. */
  done: number;
  failed: number;
  refused: number;
}

/**
 * @param report filled while it runs, so that it holds what was reached when the run is cancelled
 * @throws CancelledError when `signal` fires; HoldfastError when the disk refuses
 */
export async function runShard(
  folder: ResultsFolder,
  shard: Shard,
  finished: ReadonlySet<number>,
  report: ShardReport,
  options: {
    readonly workers: number;
    readonly signal: AbortSignal;
    readonly onProgress: (running: number) => void;
  },
): Promise<void> {
  const { points, read } = folder;
  const writer = folder.writer(shard);
  function* jobs(): Generator<Job> {
    for (const point of pointsOfShard(shard, points.count))
      if (!finished.has(point))
        yield {
          kind: 'run',
          point,
          values: points.at(point),
          checkpoint: folder.checkpointPath(point),
        };
  }
  try {
    await runPool(
      read.plan,
      jobs(),
      async (reply) => {
        if (reply.kind !== 'run') return;
        const { point, milliseconds } = reply;
        const { outcome, certificate } = reply.result;
        // The certificate first: a record says that it is there.
        if (certificate !== null) await folder.writeCertificate(point, certificate);
        await writer.append({ point, at: [...points.at(point)], outcome, milliseconds });
        if (outcome.status !== 'failed') await folder.dropCheckpoint(point);
        report.done++;
        if (outcome.status !== 'done') report[outcome.status]++;
      },
      {
        workers: options.workers,
        signal: options.signal,
        onProgress: options.onProgress,
        onDeath: ({ point }, reason) => ({
          kind: 'run',
          point,
          result: { outcome: { status: 'failed', reason }, certificate: null },
          milliseconds: 0,
        }),
      },
    );
  } finally {
    await writer.close();
  }
}
