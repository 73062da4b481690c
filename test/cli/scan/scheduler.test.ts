import { spawnSync } from 'node:child_process';
import { describe, expect, it } from 'vitest';
import { assertSbatchOption, shardFromOption, slurmScripts } from '../../../src/cli/scan/scheduler.ts';
import { shardOf } from '../../../src/scan/shard.ts';

describe('the shard of a task', () => {
  // Names and meanings from the manual pages of the schedulers' submission commands: sbatch(1), qsub(1B), qsub(1), bsub(1).
  it.each([
    ['3/20', {}, shardOf(2, 20)],
    ['environment/20', { SLURM_ARRAY_TASK_ID: '7' }, shardOf(6, 20)],
    // A single task submitted again: the scheduler's count is 1, and the one given stands.
    [
      'environment/20',
      { SLURM_ARRAY_TASK_ID: '7', SLURM_ARRAY_TASK_MIN: '7', SLURM_ARRAY_TASK_MAX: '7' },
      shardOf(6, 20),
    ],
    [
      'environment',
      {
        SLURM_ARRAY_TASK_ID: '14',
        SLURM_ARRAY_TASK_MIN: '10',
        SLURM_ARRAY_TASK_MAX: '30',
        SLURM_ARRAY_TASK_STEP: '4',
      },
      shardOf(1, 6),
    ],
    ['environment/5', { PBS_ARRAY_INDEX: '5' }, shardOf(4, 5)],
    ['environment/5', { PBS_ARRAYID: '1' }, shardOf(0, 5)],
    [
      'environment',
      { SGE_TASK_ID: '3', SGE_TASK_FIRST: '1', SGE_TASK_LAST: '9', SGE_TASK_STEPSIZE: '2' },
      shardOf(1, 5),
    ],
    ['environment', { LSB_JOBINDEX: '2', LSB_JOBINDEX_END: '8' }, shardOf(1, 8)],
  ])('%s in %j', (text, environment, shard) => {
    expect(shardFromOption(text, environment as Record<string, string>)).toEqual(shard);
  });

  it.each([
    ['environment', {}, /the number of an array task/],
    ['environment', { SGE_TASK_ID: 'undefined' }, /the number of an array task/],
    ['environment', { PBS_ARRAY_INDEX: '3' }, /environment\/N/],
    ['environment/5', { SLURM_ARRAY_TASK_ID: '6' }, /shard: expected an index from 1 to 5, got 6/],
    ['environment/5', { SLURM_ARRAY_TASK_ID: '0' }, /an index from 1 to 5, got 0/],
    ['environment/0', { SLURM_ARRAY_TASK_ID: '1' }, /number of shards/],
    ['4/3', {}, /an index from 1 to 3, got 4/],
    ['all', {}, /i\/n/],
  ])('%s in %j is refused', (text, environment, message) => {
    expect(() => shardFromOption(text, environment as Record<string, string>)).toThrow(message);
  });
});

describe('scripts for Slurm', () => {
  const job = {
    hash: `sha256:${'0123456789abcdef'.repeat(4)}`,
    results: "/data/it's here",
    directory: '/home/someone/scans',
    program: ['/usr/bin/node', '--import', 'tsx', '/opt/hold fast/main.js'],
    tasks: 20,
    workers: 2,
    megabytes: 1_500,
    minutes: 45,
    extra: ['--partition=long', '--exclusive'],
  };
  const scripts = slurmScripts(job);

  it('ask for what the job needs', () => {
    const options = [...scripts.scan.matchAll(/^#SBATCH (.*)$/gm)].map((match) => match[1]);
    expect(options).toEqual([
      '--job-name=scan-01234567',
      '--array=1-20',
      '--chdir=/home/someone/scans',
      '--ntasks=1',
      '--cpus-per-task=2',
      '--mem=1500M',
      '--time=45',
      '--output="/data/it\'s here/slurm/log/%A_%a.txt"',
      '--open-mode=append',
      '--requeue',
      '--signal=B:TERM@60',
      '--partition=long',
      '--exclusive',
    ]);
    expect(scripts.submit).toContain('--dependency=afterany:');
  });

  it.each(Object.keys(scripts))('%s.sh is a script for the shell, and keeps words whole', (name) => {
    const script = scripts[name as keyof typeof scripts];
    expect(spawnSync('bash', ['-n'], { input: script, encoding: 'utf8' })).toMatchObject({
      status: 0,
      stderr: '',
    });
    // The program's place is taken by one that prints its words.
    if (name === 'submit') return;
    const printing = script.replace(/^cd .*$/m, '').replace(/^exec \S+ /m, "printf '%s\\n' ");
    const { stdout } = spawnSync('bash', [], { input: printing, encoding: 'utf8' });
    expect(stdout.split('\n').slice(0, 3)).toEqual(['--import', 'tsx', '/opt/hold fast/main.js']);
    expect(stdout.split('\n')).toContain(job.results);
  });

  it('take further options of sbatch, nothing else', () => {
    for (const good of ['--partition=long', '--exclusive', '--mail-user=a@b.c']) assertSbatchOption(good);
    for (const bad of ['-p long', 'rm -rf', '--a=b\n#SBATCH --c', '--A', ''])
      expect(() => assertSbatchOption(bad)).toThrow(/--sbatch/);
  });
});
