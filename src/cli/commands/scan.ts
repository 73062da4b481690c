/** `holdfast scan`: one task at many Hamiltonians, on one machine or on a cluster. */
import { spawnSync } from 'node:child_process';
import { availableParallelism } from 'node:os';
import { basename, dirname, join, resolve } from 'node:path';
import { CancelledError, HoldfastError, InputError, LimitError, show } from '../../errors.ts';
import { type ReadPlan, readPlan } from '../../scan/plan.ts';
import { partsIn, pointsIn, sectorsIn } from '../../scan/points.ts';
import { estimatePlan, type PlanEstimate } from '../../scan/run.ts';
import { pointsOfShard, type Shard, textFromShard, WHOLE_PLAN } from '../../scan/shard.ts';
import { freeMemory } from '../../search/thread.ts';
import { type Command, type CommandInput, Exit } from '../command.ts';
import { readText } from '../model-options.ts';
import { gigabytesOption, wholeOption } from '../number-options.ts';
import { writeFileWhole } from '../output-file.ts';
import { shareLine } from '../progress.ts';
import { makeFolder, ResultsFolder } from '../scan/folder.ts';
import { runShard, type ShardReport } from '../scan/run-shard.ts';
import { assertSbatchOption, shardFromOption, slurmScripts } from '../scan/scheduler.ts';

export const scan: Command = {
  name: 'scan',
  summary: 'one task at many Hamiltonians: a grid, list or sample of couplings, here or on a cluster',
  help: `holdfast scan PLAN.json

Searches, decides or tests a candidate at every point of a plan: one model with named parameters, and a grid, a list or a
seeded sample of exact values for them. Every finished point is on the disk at once; a scan that was stopped or killed, started
again with the same command, goes on where it was. "holdfast collect DIR" then makes a table and a map.

  holdfast scan fields.json                            here, in a thread a core
  holdfast scan fields.json --shard 3/20               the third of twenty shares, wherever it runs
  holdfast scan fields.json --slurm --tasks 20         twenty tasks of a job array, and the collection after them
  holdfast scan fields.json --slurm --sbatch=--partition=long

The plan, described in docs/scans.md:

  { "plan": "points",
    "model": { "formula": "2 XX + 3 YY + 5 ZZ + g X + h Z" },
    "parameters": [ { "name": "g", "from": "0", "to": "1", "steps": 8 }, { "name": "h", "values": ["0", "1/3", "0.5"] } ],
    "points": "grid",
    "task": { "kind": "search", "range": 5, "certificates": true } }

Scan:
  --results DIR         the folder of results (PLAN.results beside the plan); only ever of one plan
  --shard I/N           the I-th of N shares; environment/N, or environment: I from the scheduler's job array
  --workers N           threads (a core each, as far as memory goes)
  --memory GB           what all threads together may use (default: what is free)

Cluster:
  --slurm               writes the scripts of a job array and of the collection after it, and submits them where sbatch is
  --tasks N             tasks of the array (about half an hour each, by the estimate)
  --minutes N           time limit of a task (four times the estimate, and a quarter of an hour)
  --sbatch OPTION       an option for sbatch, as in --sbatch=--account=physics; may be repeated

Exit status: 0 every point of the share is done, 1 some failed, or stopped, 2 bad input.`,
  options: {
    results: { type: 'string' },
    shard: { type: 'string' },
    workers: { type: 'string' },
    memory: { type: 'string' },
    slurm: { type: 'boolean' },
    tasks: { type: 'string' },
    minutes: { type: 'string' },
    sbatch: { type: 'string', multiple: true },
  },
  async run(input) {
    const slurm = input.values['slurm'] === true;
    for (const name of ['tasks', 'minutes', 'sbatch'])
      if (!slurm && input.values[name] !== undefined)
        throw new InputError(`--${name}`, '--slurm beside it', 'none');
    if (slurm && input.values['shard'] !== undefined)
      throw new InputError('--shard', 'none beside --slurm, whose tasks have their own', 'one');
    const text = input.values['shard'];
    const shard = typeof text === 'string' ? shardFromOption(text, process.env) : WHOLE_PLAN;
    const workers = wholeOption(input, 'workers');
    const memory = gigabytesOption(input);
    const { read, path } = await planFromOptions(input);
    const need = estimatePlan(read.plan, pointsIn(read.plan));
    if (slurm) return submit(input, read, path, need);
    const threads = threadsFor(need, workers, memory ?? freeMemory());
    const folder = await ResultsFolder.forPlan(path, read);
    return runHere(input, folder, shard, threads);
  },
};

async function runHere(
  input: CommandInput,
  folder: ResultsFolder,
  shard: Shard,
  workers: number,
): Promise<number> {
  const mine = [...pointsOfShard(shard, folder.points.count)];
  const finished = await folder.finished(shard);
  const report: ShardReport = { total: mine.length, before: finished.size, done: 0, failed: 0, refused: 0 };
  const line = shareLine(input, `scanning ${(report.total - report.before).toLocaleString('en')} points`);
  // A scheduler that wants its machine back sends a TERM; it ends a scan as an interrupt does.
  const stop = new AbortController();
  const end = () => stop.abort();
  input.signal.addEventListener('abort', end, { once: true });
  process.once('SIGTERM', end);
  if (input.signal.aborted) end();
  let stopped = false;
  try {
    line.show(0);
    await runShard(folder, shard, finished, report, {
      workers: Math.max(1, Math.min(workers, report.total - report.before)),
      signal: stop.signal,
      onProgress: (running) => line.show((report.done + running) / (report.total - report.before)),
    });
  } catch (error) {
    if (!(error instanceof CancelledError)) throw error;
    stopped = true;
  } finally {
    line.clear();
    process.removeListener('SIGTERM', end);
  }
  input.out(summary(report, folder, shard));
  if (!stopped) return report.failed === 0 ? Exit.done : Exit.failed;
  input.note('scan: stopped; the same command goes on from here\n');
  return Exit.failed;
}

function summary(report: ShardReport, folder: ResultsFolder, shard: Shard): string {
  const { total, before, done, failed, refused } = report;
  const parts = [
    `${before + done - failed} of ${total} ${sectorsIn(folder.read.plan) > 1 ? 'parts' : 'points'} done${before > 0 ? `, ${before} of them before` : ''}`,
    ...(refused > 0 ? [`${refused} without a Hamiltonian`] : []),
    ...(failed > 0 ? [`${failed} failed and are tried again next time`] : []),
  ];
  const share = shard.count === 1 ? '' : `Shard ${textFromShard(shard)}: `;
  return `${share}${parts.join('; ')}.\nPlan ${folder.hash}\nResults in ${folder.path}\n`;
}

/** Threads: as many as asked for, or one a core, as far as memory goes. @throws LimitError when not even one fits */
function threadsFor(need: PlanEstimate, workers: number | undefined, memory: number): number {
  if ((workers ?? 1) * need.bytes <= memory)
    return (
      workers ??
      Math.max(1, Math.min(coresOf(process.env), Math.floor(memory / (SAFETY.memory * need.bytes))))
    );
  const gigabytes = (bytes: number) => `${(bytes / 1e9).toPrecision(2)} GB`;
  throw new LimitError(
    `scan: a point needs about ${gigabytes(need.bytes)}, ${workers ?? 1} at a time; ${gigabytes(memory)} may be used. Give fewer --workers, or a larger --memory to try all the same`,
  );
}

/** A scheduler's grant, where there is one, is smaller than the machine. */
function coresOf(environment: Readonly<Record<string, string | undefined>>): number {
  const granted = environment['SLURM_CPUS_PER_TASK'];
  return granted !== undefined && /^[1-9]\d{0,4}$/.test(granted) ? Number(granted) : availableParallelism();
}

async function planFromOptions(input: CommandInput): Promise<{ read: ReadPlan; path: string }> {
  const [file, another] = input.positionals;
  if (file === undefined || another !== undefined)
    throw new InputError('command line', 'the file of one plan', file === undefined ? 'none' : show(another));
  const given = input.values['results'] as string | undefined;
  if (file === '-' && given === undefined)
    throw new InputError('--results', 'a folder, since the plan has no file', 'none');
  const read = readPlan(await readText(file, 'plan'));
  const path = given ?? join(dirname(file), `${basename(file).replace(/\.json$/, '')}.results`);
  if (path === '') throw new InputError('--results', 'a folder', show(path));
  return { read, path };
}

/** Longest estimate of one task where their number is left open, in seconds; most tasks that Slurm takes as it is set up. */
const TASK_SECONDS = 1_800;
const MAX_TASKS = 1_000;
/** The estimate is rough: models differ a few times in time, and in memory. */
const SAFETY = { time: 4, memory: 2.5 };

async function submit(
  input: CommandInput,
  read: ReadPlan,
  path: string,
  need: PlanEstimate,
): Promise<number> {
  const points = partsIn(read.plan);
  const workers = wholeOption(input, 'workers') ?? 1;
  const guess = Math.ceil((points.count * need.seconds) / workers / TASK_SECONDS);
  const tasks = wholeOption(input, 'tasks') ?? Math.max(1, Math.min(MAX_TASKS, points.count, guess));
  if (tasks > points.count)
    throw new InputError('--tasks', `at most one a point, ${points.count}`, String(tasks));
  const perTask = (Math.ceil(points.count / tasks) * need.seconds * SAFETY.time) / workers;
  const minutes = wholeOption(input, 'minutes') ?? 15 * Math.ceil(perTask / 60 / 15 + 1);
  const memory = gigabytesOption(input) ?? 0.3 + (workers * need.bytes * SAFETY.memory) / 1e9;
  const extra = (input.values['sbatch'] ?? []) as readonly string[];
  extra.forEach(assertSbatchOption);
  const results = resolve(path);
  // Slurm reads a percent sign in the name of a log file, and a line for each option.
  if (/[%"\p{Cc}]/u.test(results + process.cwd()))
    throw new InputError(
      '--results',
      'a path without %, quotation marks and control characters',
      show(results),
    );
  const folder = await ResultsFolder.forPlan(results, read);
  const scripts = slurmScripts({
    hash: folder.hash,
    results,
    directory: process.cwd(),
    program: [process.execPath, ...process.execArgv, process.argv[1]!],
    tasks,
    workers,
    megabytes: Math.ceil(memory * 1_000),
    minutes,
    extra,
  });
  for (const name of ['slurm', join('slurm', 'log')])
    await makeFolder(join(results, name)).catch((error: Error) => {
      throw new HoldfastError(`scan: cannot write to ${show(results)}: ${error.message}`);
    });
  for (const [name, text] of Object.entries(scripts))
    await writeFileWhole('--slurm', join(results, 'slurm', `${name}.sh`), [text], input.signal);
  input.out(
    `${points.count} points in ${tasks} tasks of ${workers} thread${workers === 1 ? '' : 's'}: ${Math.ceil(memory * 1_000)} MB and ${minutes} minutes each, by a rough estimate.\nPlan ${folder.hash}\nResults in ${results}\n`,
  );
  const script = join(results, 'slurm', 'submit.sh');
  if (spawnSync('sbatch', ['--version']).error !== undefined) {
    input.out(`No sbatch here. Where there is one: bash ${script}\n`);
    return Exit.done;
  }
  const { status, stdout, stderr } = spawnSync('bash', [script], { encoding: 'utf8' });
  if (status !== 0) throw new HoldfastError(`scan: sbatch refused: ${stderr.trim() || `status ${status}`}`);
  input.out(`Submitted: ${stdout}`);
  return Exit.done;
}
