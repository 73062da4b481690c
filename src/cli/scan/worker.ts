/** The thread of a scan: takes points one after the other, answers each. */
import { readFile } from 'node:fs/promises';
import { parentPort, workerData } from 'node:worker_threads';
import { runPoint } from '../../scan/run.ts';
import { checkpointIn } from '../../search/checkpoint.ts';
import { plainModel } from '../../search/transfer.ts';
import { faultOfCertificate } from './certificate-of-point.ts';
import type { Job, JobProgress, Reply, WorkerInput } from './jobs.ts';

/** Below so many spins a search is over before its layers are on the disk. */
const SPINS_FOR_CHECKPOINTS = 13;

/** Milliseconds between two messages about one point. */
const INTERVAL = 200;

const { plan } = workerData as WorkerInput;

parentPort?.on('message', async (job: Job) => {
  parentPort?.postMessage(await replyTo(job));
});

async function replyTo(job: Job): Promise<Reply> {
  const { point, values } = job;
  if (job.kind === 'run') {
    const started = performance.now();
    let told = started;
    const result = await runPoint(
      plan,
      values,
      (done) => {
        const now = performance.now();
        if (now - told < INTERVAL) return;
        told = now;
        parentPort?.postMessage({ kind: 'progress', done } satisfies JobProgress);
      },
      plan.task.range === null || plan.model.cell * plan.task.range < SPINS_FOR_CHECKPOINTS
        ? undefined
        : (h, range) => (sector) => checkpointIn(job.checkpoint, plainModel(h), range, sector),
    );
    return { kind: 'run', point, result, milliseconds: performance.now() - started };
  }
  let text: string;
  try {
    text = await readFile(job.certificate, 'utf8');
  } catch (error) {
    return { kind: 'check', point, reason: `cannot be read: ${(error as Error).message}` };
  }
  return { kind: 'check', point, reason: faultOfCertificate(plan, values, job.outcome, text) };
}
