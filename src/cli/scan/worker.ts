/** The thread of a scan: takes points one after the other, answers each. */
import { readFile } from 'node:fs/promises';
import { parentPort, workerData } from 'node:worker_threads';
import { runPoint } from '../../scan/run.ts';
import { faultOfCertificate } from './certificate-of-point.ts';
import type { Job, Reply, WorkerInput } from './jobs.ts';

const { plan } = workerData as WorkerInput;

parentPort?.on('message', async (job: Job) => {
  parentPort?.postMessage(await replyTo(job));
});

async function replyTo(job: Job): Promise<Reply> {
  const { point, values } = job;
  if (job.kind === 'run') {
    const started = performance.now();
    const result = await runPoint(plan, values);
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
