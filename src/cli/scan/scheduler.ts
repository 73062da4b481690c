/** Batch schedulers: which task of a job array this process is, and what is handed to Slurm. */
import { InputError, show } from '../../errors.ts';
import { type Shard, shardFromText, shardOf } from '../../scan/shard.ts';

type Environment = Readonly<Record<string, string | undefined>>;

/** By which names schedulers tell a task of an array its number, the lowest and highest number, and their distance. */
const ARRAYS = [
  {
    id: 'SLURM_ARRAY_TASK_ID',
    first: 'SLURM_ARRAY_TASK_MIN',
    last: 'SLURM_ARRAY_TASK_MAX',
    step: 'SLURM_ARRAY_TASK_STEP',
  },
  { id: 'PBS_ARRAY_INDEX' },
  { id: 'PBS_ARRAYID' },
  { id: 'SGE_TASK_ID', first: 'SGE_TASK_FIRST', last: 'SGE_TASK_LAST', step: 'SGE_TASK_STEPSIZE' },
  { id: 'LSB_JOBINDEX', last: 'LSB_JOBINDEX_END', step: 'LSB_JOBINDEX_STEP' },
] as const;

/**
 * The shard of `--shard`: `3/20`, `environment/20` (tasks are numbered from 1 to 20), or `environment` (number and count from the scheduler).
 * With the count given, a single task that is submitted again is the same shard as before.
 *
 * @throws InputError for anything else, an index out of range, or when no scheduler has set a number
 */
export function shardFromOption(text: string, environment: Environment): Shard {
  const match = /^environment(?:\/(\d{1,9}))?$/.exec(text);
  if (match === null) return shardFromText(text);
  // A scheduler sets the word "undefined" outside an array.
  const found = ARRAYS.find(({ id }) => /^\d{1,9}$/.test(environment[id] ?? ''));
  if (found === undefined)
    throw new InputError(
      '--shard environment',
      `the number of an array task in one of ${ARRAYS.map(({ id }) => id).join(', ')}`,
      'none',
    );
  const number = (name: string | undefined, usual: number): number => {
    const value = name === undefined ? undefined : environment[name];
    return value !== undefined && /^\d{1,9}$/.test(value) ? Number(value) : usual;
  };
  const id = number(found.id, 0);
  if (match[1] !== undefined) return shardOf(id - 1, Number(match[1]));
  if (!('last' in found) || environment[found.last] === undefined)
    throw new InputError(
      '--shard environment',
      'the number of tasks behind it, environment/N',
      `${found.id} alone`,
    );
  const first = number('first' in found ? found.first : undefined, 1);
  const step = Math.max(1, number(found.step, 1));
  return shardOf((id - first) / step, Math.floor((number(found.last, first) - first) / step) + 1);
}

export interface SlurmJob {
  /** Of the plan; names the job. */
  readonly hash: string;
  readonly results: string;
  /** Absolute: where the job starts, since paths may be relative to it. */
  readonly directory: string;
  /** The command by which this program was started: words, not yet quoted. */
  readonly program: readonly string[];
  readonly tasks: number;
  readonly workers: number;
  readonly megabytes: number;
  readonly minutes: number;
  /** Options of sbatch that the user adds, `--partition=long`. */
  readonly extra: readonly string[];
}

/** Three scripts: the array of tasks, the collection of what they leave, and the submission of both. */
export function slurmScripts(job: SlurmJob): {
  readonly scan: string;
  readonly collect: string;
  readonly submit: string;
} {
  const { hash, results, directory, tasks, workers, megabytes, minutes } = job;
  const name = `scan-${hash.replace('sha256:', '').slice(0, 8)}`;
  const head = (options: readonly string[]) =>
    ['#!/bin/bash', ...[...options, ...job.extra].map((option) => `#SBATCH ${onLine(option)}`), ''].join(
      '\n',
    );
  const go = [`cd ${quoted(directory)} || exit 1`, ''].join('\n');
  const program = job.program.map(quoted).join(' ');
  const common = [`--chdir=${directory}`, '--ntasks=1'];
  return {
    // The process takes the shell's place, so signals reach it; it is warned a minute before its time is over.
    scan: `${head([
      `--job-name=${name}`,
      `--array=1-${tasks}`,
      ...common,
      `--cpus-per-task=${workers}`,
      `--mem=${megabytes}M`,
      `--time=${minutes}`,
      `--output=${results}/slurm/log/%A_%a.txt`,
      '--open-mode=append',
      '--requeue',
      '--signal=B:TERM@60',
    ])}
# A task that is started again does only what is not done yet.
${go}exec ${program} scan ${quoted(`${results}/plan.json`)} --results ${quoted(results)} --shard environment/${tasks} --workers ${workers}
`,
    collect: `${head([
      `--job-name=${name}-collect`,
      ...common,
      `--cpus-per-task=${workers}`,
      `--mem=${megabytes}M`,
      `--time=${minutes}`,
      `--output=${results}/slurm/log/collect_%j.txt`,
      '--open-mode=append',
    ])}
${go}exec ${program} collect ${quoted(results)} --workers ${workers}
`,
    submit: `#!/bin/bash
# Submits the array, and the collection for when all of its tasks have ended, well or not.
set -euo pipefail
array=$(sbatch --parsable ${quoted(`${results}/slurm/scan.sh`)})
array=\${array%%;*}
collect=$(sbatch --parsable --dependency=afterany:"$array" ${quoted(`${results}/slurm/collect.sh`)})
echo "array job $array, ${tasks} task${tasks === 1 ? '' : 's'}; collect job \${collect%%;*}"
`,
  };
}

/** An option that sbatch may get: `--name` or `--name=value` on one line. */
export function assertSbatchOption(text: string): void {
  if (!/^--[a-z][a-z-]*(?:=[^\p{Cc}]+)?$/u.test(text))
    throw new InputError('--sbatch', 'an option of sbatch, as in --partition=long', show(text));
}

/** An option on a line of a script: sbatch takes quotation marks away. */
function onLine(option: string): string {
  return /\s/.test(option) ? option.replace('=', '="').concat('"') : option;
}

/** One word for the shell. */
function quoted(word: string): string {
  return /^[\w./=:@%+-]+$/.test(word) ? word : `'${word.replaceAll("'", `'\\''`)}'`;
}
