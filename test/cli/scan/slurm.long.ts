/**
 * A scan on a real Slurm: 200 Hamiltonians in 20 tasks of a job array, one of which is killed in the middle and requeued; what the dependent
 * job collects is what one process finds, byte by byte.
 */
import { spawnSync } from 'node:child_process';
import { existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type Slurm, slurmObstacle, startSlurm } from '../../support/slurm.ts';

const ROOT = resolve(import.meta.dirname, '../../..');
const obstacle = slurmObstacle();
if (obstacle !== null) console.warn(`left out: a scan on a real Slurm ${obstacle}`);

const VICTIM = 8;
const PLAN = {
  plan: 'points',
  name: 'Random chains, invented',
  model: { formula: 'a XX + b YY + c ZZ + d (XY + YX) + e XZ + f X + g Y + h Z' },
  parameters: [
    ...['a', 'b', 'c'].map((name) => ({ name, from: -2, to: 2, steps: 8 })),
    { name: 'd', values: [0, '1/3'] },
    { name: 'e', values: [0, '-0.7'] },
    { name: 'f', values: [0, 1] },
    { name: 'g', values: [0, 1] },
    { name: 'h', values: [0, 1, 2] },
  ],
  points: { sample: 200, seed: 11 },
  task: { kind: 'search', range: 7, certificates: true },
};

/** The process of an array task, among those whose command line names the folder. */
function processOf(folder: string, task: number): number | undefined {
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name))
    .map(Number)
    .find((pid) => {
      try {
        return (
          readFileSync(`/proc/${pid}/cmdline`, 'utf8').includes(`${folder}\0--shard`) &&
          readFileSync(`/proc/${pid}/environ`, 'utf8').split('\0').includes(`SLURM_ARRAY_TASK_ID=${task}`)
        );
      } catch {
        return false;
      }
    });
}

async function until(what: string, seconds: number, ready: () => boolean): Promise<void> {
  const end = performance.now() + 1_000 * seconds;
  while (!ready()) {
    if (performance.now() > end) throw new Error(`not within ${seconds} s: ${what}`);
    await new Promise((wait) => setTimeout(wait, 50));
  }
}

describe.skipIf(obstacle !== null)('a scan on Slurm', () => {
  let scratch: string;
  let plan: string;
  let alone: string;
  let array: string;
  let slurm: Slurm;

  const holdfast = (...args: string[]) =>
    spawnSync(process.execPath, ['--import', 'tsx', 'src/cli/main.ts', ...args], {
      cwd: ROOT,
      encoding: 'utf8',
      env: slurm.environment,
    });
  const linesOf = (name: string) => readFileSync(join(array, 'records', name), 'utf8').split('\n').length - 2;

  beforeAll(async () => {
    scratch = mkdtempSync(join(tmpdir(), 'scan-slurm-'));
    [plan, alone, array] = ['ensemble.json', 'alone', 'array'].map((name) => join(scratch, name)) as [
      string,
      string,
      string,
    ];
    writeFileSync(plan, JSON.stringify(PLAN));
    slurm = await startSlurm(2, 4_000);
  });
  afterAll(async () => {
    await slurm?.stop();
    rmSync(scratch, { recursive: true, force: true });
  });

  it('finds what one process finds, with a task killed and requeued', async () => {
    expect(holdfast('scan', plan, '--results', alone).status).toBe(0);
    expect(holdfast('collect', alone).status).toBe(0);

    const submitted = holdfast('scan', plan, '--results', array, '--slurm', '--tasks', '20');
    expect(submitted.stderr).toBe('');
    const job = /array job (\d+), 20 tasks; collect job \d+/.exec(submitted.stdout)?.[1];
    expect(job).toBeDefined();

    // Killed outright as soon as it has a few points on the disk, and some left.
    const first = `${VICTIM}-of-20.1.jsonl`;
    await until('the task that is to be killed', 120, () => {
      if (!existsSync(join(array, 'records', first)) || linesOf(first) < 3) return false;
      const pid = processOf(array, VICTIM);
      if (pid === undefined) return false;
      process.kill(pid, 'SIGKILL');
      return true;
    });
    const before = readFileSync(join(array, 'records', first), 'utf8');
    expect(linesOf(first)).toBeLessThan(10);
    const state = () => slurm.command('scontrol', '-o', 'show', 'job', `${job}_${VICTIM}`);
    await until('the end of the killed task', 60, () => /JobState=FAILED/.test(state()));
    slurm.command('scontrol', 'requeue', `${job}_${VICTIM}`);
    // Slurm lets a requeued job wait for two minutes.
    slurm.command('scontrol', 'update', `JobId=${job}_${VICTIM}`, 'StartTime=now');
    expect(state()).toMatch(/Restarts=1/);

    await until('the empty queue', 300, () => slurm.command('squeue', '-h') === '');
    expect(readFileSync(join(array, 'records', first), 'utf8')).toBe(before);
    // The second try did the rest and nothing twice.
    expect(linesOf(first) + linesOf(`${VICTIM}-of-20.2.jsonl`)).toBe(10);

    const logs = readdirSync(join(array, 'slurm', 'log'));
    expect(logs).toHaveLength(21);
    const log = readFileSync(join(array, 'slurm', 'log', logs.find((n) => n.startsWith('collect'))!), 'utf8');
    expect(log).toContain('200 of 200 points done.');
    expect(log).toContain('200 certificates accepted.');
    for (const name of ['table.csv', 'table.json'])
      expect(readFileSync(join(array, name), 'utf8'), name).toBe(readFileSync(join(alone, name), 'utf8'));
    const certificates = readdirSync(join(alone, 'certificates'));
    expect(certificates).toHaveLength(200);
    expect(readdirSync(join(array, 'certificates'))).toEqual(certificates);
    for (const name of certificates)
      expect(readFileSync(join(array, 'certificates', name), 'utf8')).toBe(
        readFileSync(join(alone, 'certificates', name), 'utf8'),
      );
  });
});
