import { describe, expect, it } from 'vitest';
import type { Job, Reply } from '../../../src/cli/scan/jobs.ts';
import { runPool } from '../../../src/cli/scan/pool.ts';
import { CancelledError } from '../../../src/errors.ts';
import { readPlan } from '../../../src/scan/plan.ts';
import { pointsIn } from '../../../src/scan/points.ts';

const { plan } = readPlan({
  plan: 'points',
  model: { formula: 'XX + g Z + X' },
  parameters: [{ name: 'g', from: 0, to: 1, steps: 9 }],
  points: 'grid',
  task: { kind: 'search', range: 3 },
});
const points = pointsIn(plan);
const jobs = (): Job[] =>
  Array.from({ length: 10 }, (_, point) => ({
    kind: 'run',
    checkpoint: '',
    point,
    values: points.at(point),
  }));
const dead = ({ point }: Job, reason: string): Reply => ({ kind: 'check', point, reason });

describe('a pool of threads', () => {
  it('answers every job once, and outlives a thread that dies over one', async () => {
    const work = jobs();
    // Values that no plan can have: the thread ends with an error that nobody catches there.
    work[4] = { kind: 'run', checkpoint: '', point: 4, values: null as never };
    const replies: Reply[] = [];
    await runPool(plan, work, async (reply) => void replies.push(reply), {
      workers: 2,
      signal: new AbortController().signal,
      onDeath: dead,
    });
    expect(replies.map((r) => r.point).sort((a, b) => a - b)).toEqual([0, 1, 2, 3, 4, 5, 6, 7, 8, 9]);
    expect(replies.filter((r) => r.kind === 'check')).toEqual([
      { kind: 'check', point: 4, reason: expect.stringMatching(/^the thread (died|ended)/) },
    ]);
  });

  it('stops in the middle of its work', async () => {
    const abort = new AbortController();
    let replies = 0;
    const run = runPool(
      plan,
      jobs(),
      async () => {
        if (++replies === 3) abort.abort();
      },
      { workers: 1, signal: abort.signal, onDeath: dead },
    );
    await expect(run).rejects.toThrow(CancelledError);
    expect(replies).toBe(3);
  });

  it('ends with the error of a consumer, a full disk for one', async () => {
    const full = new Error('disk full');
    const run = runPool(plan, jobs(), () => Promise.reject(full), {
      workers: 2,
      signal: new AbortController().signal,
      onDeath: dead,
    });
    await expect(run).rejects.toBe(full);
  });
});
