/** `holdfast collect`: what a scan has found, as a table and a map. */
import { join } from 'node:path';
import { CancelledError, InputError, show } from '../../errors.ts';
import { scanMap } from '../../report/scan-map.ts';
import {
  answersIn,
  cautionsOf,
  labelTitle,
  type ScanResults,
  scanCsv,
  scanJson,
} from '../../report/scan-table.ts';
import { wrap } from '../../report/text.ts';
import { mergeRecords } from '../../scan/merge.ts';
import { sectorsIn } from '../../scan/points.ts';
import { combineSectors } from '../../scan/sectors.ts';
import { WHOLE_PLAN } from '../../scan/shard.ts';
import { type Command, type CommandInput, Exit } from '../command.ts';
import { wholeOption } from '../number-options.ts';
import { giveWay, writeFileWhole } from '../output-file.ts';
import { shareLine } from '../progress.ts';
import { ResultsFolder } from '../scan/folder.ts';
import type { Job } from '../scan/jobs.ts';
import { runPool } from '../scan/pool.ts';

export const collect: Command = {
  name: 'collect',
  summary: 'the results of a scan as a table and a map; says what is missing, checks certificates',
  help: `holdfast collect DIR

Merges what all processes of a scan have left in DIR, whatever the number and order of the shards: the same results give the same
bytes. Certificates are checked, by the checker that shares no code with the search, and compared with what was recorded.
Writes into DIR:

  table.csv             a line a point, exact values and decimals
  table.json            the plan, what is missing, and every outcome
  map.svg               one or two parameters: the answers as a map

  holdfast collect fields.results

Options:
  --workers N           threads that check certificates (1)
  --unchecked           leave the certificates unread

Exit status: 0 every point is done and every certificate accepted, 1 something is missing, failed or rejected, 2 bad input.`,
  options: { workers: { type: 'string' }, unchecked: { type: 'boolean' } },
  async run(input) {
    const [path, another] = input.positionals;
    if (path === undefined || another !== undefined)
      throw new InputError(
        'command line',
        'the folder of one scan',
        path === undefined ? 'none' : show(another),
      );
    const workers = wholeOption(input, 'workers') ?? 1;
    const folder = await ResultsFolder.existing(path);
    const files = await folder.files(WHOLE_PLAN);
    const own = files.filter(({ file }) => file.plan === folder.hash);
    const parts = mergeRecords(
      folder.points,
      own.flatMap(({ file }) => file.records),
    );
    const collected = await combinedPoints(input, folder, parts);
    const unchecked = input.values['unchecked'] === true;
    const { rejected, accepted } = unchecked
      ? { rejected: new Map<number, string>(), accepted: 0 }
      : await checked(input, folder, collected, workers);
    const results: ScanResults = { plan: folder.read.plan, hash: folder.hash, collected, rejected };
    const map = scanMap(results);
    const write = (name: string, parts: Iterable<string>) =>
      writeFileWhole('collect', join(path, name), parts, input.signal);
    await write('table.csv', scanCsv(results));
    await write('table.json', scanJson(results));
    if (map !== null) await write('map.svg', [map]);
    const faults = faultsOf(results, files);
    input.out(summary(results, { accepted, unchecked, map: map !== null, path }));
    for (const { name, file } of own)
      if (file.torn > 0)
        input.note(`collect: ${name} ends in a line that its process, killed, did not finish: left out\n`);
    for (const fault of faults) input.note(`collect: ${fault}\n`);
    return faults.length === 0 ? Exit.done : Exit.failed;
  },
};

/** Where a plan has its sectors searched apart: the points that they make, with certificates written here. */
async function combinedPoints(
  input: CommandInput,
  folder: ResultsFolder,
  parts: ScanResults['collected'],
): Promise<ScanResults['collected']> {
  const { plan } = folder.read;
  if (sectorsIn(plan) === 1) return parts;
  const line = shareLine(input, 'putting sectors together');
  try {
    const { collected, certificates } = await combineSectors(plan, parts, async (done) => {
      line.show(done);
      await giveWay('collect', input.signal);
    });
    for (const [point, text] of certificates) await folder.writeCertificate(point, text);
    return collected;
  } finally {
    line.clear();
  }
}

type Files = Awaited<ReturnType<ResultsFolder['files']>>;

/** Every certificate that a record names, in threads: its fault, by point. */
async function checked(
  input: CommandInput,
  folder: ResultsFolder,
  { outcomes, points }: ScanResults['collected'],
  workers: number,
): Promise<{ rejected: Map<number, string>; accepted: number }> {
  const jobs: Job[] = [...outcomes]
    .filter(
      ([, outcome]) =>
        outcome.status === 'done' && outcome.certificate !== undefined && 'id' in outcome.certificate,
    )
    .map(([point, outcome]) => ({
      kind: 'check',
      point,
      values: points.at(point),
      outcome,
      certificate: folder.certificatePath(point),
    }));
  const rejected = new Map<number, string>();
  let accepted = 0;
  const line = shareLine(input, `checking ${jobs.length.toLocaleString('en')} certificates`);
  try {
    await runPool(
      folder.read.plan,
      jobs,
      async (reply) => {
        if (reply.kind !== 'check') return;
        if (reply.reason === null) accepted++;
        else rejected.set(reply.point, reply.reason);
        line.show((accepted + rejected.size) / jobs.length);
      },
      {
        workers: Math.min(workers, jobs.length),
        signal: input.signal,
        onDeath: ({ point }, reason) => ({ kind: 'check', point, reason }),
      },
    );
  } catch (error) {
    if (error instanceof CancelledError) throw new CancelledError('collect');
    throw error;
  } finally {
    line.clear();
  }
  return { rejected: new Map([...rejected].sort(([a], [b]) => a - b)), accepted };
}

/** What keeps the collection from being complete. */
function faultsOf({ collected, rejected, hash }: ScanResults, files: Files): string[] {
  const faults: string[] = [];
  const { missing, failed, conflicts, strays, outcomes } = collected;
  const unknown = missing.filter((point) => !conflicts.includes(point));
  const noun = (points: readonly number[]) => `${points.length} point${points.length === 1 ? '' : 's'}`;
  if (unknown.length > 0) faults.push(`${noun(unknown)} missing: ${listed(unknown)}`);
  if (failed.length > 0) {
    const first = outcomes.get(failed[0]!);
    const reason = first !== undefined && first.status !== 'done' ? ` (${first.reason})` : '';
    faults.push(`${noun(failed)} failed: ${listed(failed)}${reason}`);
  }
  if (conflicts.length > 0)
    faults.push(
      `results differ, and none is taken, for ${noun(conflicts)}: ${listed(conflicts)}; one of the files in records/ is wrong: delete it`,
    );
  for (const [point, reason] of rejected)
    faults.push(`the certificate of point ${point + 1} is not accepted: ${reason}`);
  if (strays > 0) faults.push(`${strays} record${strays === 1 ? '' : 's'} of no point of this plan`);
  for (const { name, file } of files) {
    if (file.plan !== null && file.plan !== hash)
      faults.push(`${name} belongs to another plan, ${file.plan}: left out`);
    for (const line of file.damaged) faults.push(`${name}, line ${line}, is damaged: left out`);
  }
  if (missing.length + failed.length + rejected.size > 0)
    faults.push(
      'start the scan again: it does what is missing and failed. Delete a certificate that is not accepted first',
    );
  return faults;
}

/** Numbers from 1, runs as `3–7`, the first few. */
function listed(points: readonly number[]): string {
  const runs: string[] = [];
  for (let i = 0; i < points.length; ) {
    let end = i;
    while (points[end + 1] === points[end]! + 1) end++;
    runs.push(end === i ? `${points[i]! + 1}` : `${points[i]! + 1}–${points[end]! + 1}`);
    i = end + 1;
  }
  return runs.length <= 20 ? runs.join(', ') : `${runs.slice(0, 20).join(', ')}, …`;
}

/** Points that are done and have no certificate, with the first reason. */
function without(outcomes: ScanResults['collected']['outcomes']): string {
  const reasons = [...outcomes.values()].flatMap((outcome) =>
    outcome.status === 'done' && outcome.certificate !== undefined && 'none' in outcome.certificate
      ? [outcome.certificate.none]
      : [],
  );
  return reasons.length === 0
    ? ''
    : ` ${reasons.length} point${reasons.length === 1 ? ' has' : 's have'} none: ${reasons[0]}`;
}

function summary(
  results: ScanResults,
  shown: {
    readonly accepted: number;
    readonly unchecked: boolean;
    readonly map: boolean;
    readonly path: string;
  },
): string {
  const { plan, hash, collected } = results;
  const { points, outcomes } = collected;
  const certified = 'certificates' in plan.task && plan.task.certificates;
  const known = [...outcomes.values()].filter((outcome) => outcome.status !== 'failed').length;
  const answers = answersIn(results);
  const width = Math.max(...answers.map(({ count }) => String(count).length));
  const lines = [
    `${known} of ${points.count} points done.`,
    '',
    `${labelTitle(plan.task)}:`,
    ...answers.slice(0, 20).map(({ label, count }) => `  ${String(count).padStart(width)} ×  ${label}`),
    ...(answers.length > 20 ? [`  … and ${answers.length - 20} other answers`] : []),
    '',
    ...(certified
      ? [
          shown.unchecked
            ? 'Certificates left unread.'
            : `${shown.accepted} certificates accepted.${without(outcomes)}`,
        ]
      : []),
    `Plan ${hash}`,
    `Written to ${shown.path}: table.csv, table.json${shown.map ? ', map.svg' : ''}`,
    '',
    ...cautionsOf(plan.task).flatMap((caution) => wrap(caution, 100)),
  ];
  return `${lines.join('\n')}\n`;
}
