/** `holdfast scan` and `holdfast collect` as users run them: processes, kills, interrupts, files. */
import { spawn } from 'node:child_process';
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { parseArgs } from 'node:util';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { CommandInput } from '../../../src/cli/command.ts';
import { collect } from '../../../src/cli/commands/collect.ts';
import { scan } from '../../../src/cli/commands/scan.ts';
import { HoldfastError, InputError } from '../../../src/errors.ts';

const ROOT = resolve(import.meta.dirname, '../../..');
const scratch = mkdtempSync(join(tmpdir(), 'scan-'));
afterAll(() => rmSync(scratch, { recursive: true, force: true }));
const at = (...names: string[]) => join(scratch, ...names);

const ARGUMENTS = ['--import', 'tsx', 'src/cli/main.ts'];
/** Nothing of a scheduler around the test. */
const environment = Object.fromEntries(
  Object.entries(process.env).filter(([name]) => !/^(SLURM|PBS|SGE|LSB)_/.test(name)),
);

/** The command in this process, its threads with it; errors become exit statuses as `main` has them. */
async function holdfast(name: 'scan' | 'collect', ...args: string[]) {
  const command = { scan, collect }[name];
  const { values, positionals } = parseArgs({ args, options: command.options, allowPositionals: true });
  let [stdout, stderr] = ['', ''];
  try {
    const status = await command.run({
      values: values as CommandInput['values'],
      positionals,
      out: (text) => {
        stdout += text;
      },
      note: (text) => {
        stderr += text;
      },
      interactive: false,
      width: 100,
      colour: false,
      signal: new AbortController().signal,
    });
    return { stdout, stderr, status };
  } catch (error) {
    if (!(error instanceof HoldfastError)) throw error;
    return { stdout, stderr: `${stderr}${error.message}\n`, status: error instanceof InputError ? 2 : 1 };
  }
}

/** Starts a scan, and sends a signal as soon as `ready`. */
async function interrupted(signal: NodeJS.Signals, ready: () => boolean, ...args: string[]) {
  const child = spawn(process.execPath, [...ARGUMENTS, ...args], { cwd: ROOT, env: environment });
  let output = '';
  child.stderr.on('data', (text) => {
    output += text;
  });
  const over = new Promise<{ status: number | null; killed: string | null }>((done) =>
    child.once('exit', (status, killed) => done({ status, killed })),
  );
  const watch = setInterval(() => {
    if (!ready()) return;
    clearInterval(watch);
    child.kill(signal);
  }, 10);
  const end = await over;
  clearInterval(watch);
  return { ...end, output };
}

function plan(name: string, fields: object): string {
  const file = at(`${name}.json`);
  writeFileSync(file, JSON.stringify({ plan: 'points', ...fields }));
  return file;
}

const linesOf = (folder: string) => {
  try {
    return readdirSync(join(folder, 'records')).reduce(
      (sum, name) => sum + readFileSync(join(folder, 'records', name), 'utf8').split('\n').length - 2,
      0,
    );
  } catch {
    return 0;
  }
};

const TABLES = ['table.csv', 'table.json', 'map.svg'];
const tables = (folder: string) => TABLES.map((name) => readFileSync(join(folder, name), 'utf8'));

describe('a scan in two parameters', () => {
  // Two invented fields on an XYZ chain; on the axis g = 0 = h it is the XYZ chain itself.
  const FIELDS = {
    name: 'Fields, invented',
    model: { formula: '2 XX + 3 YY + 5 ZZ + g X + h Z' },
    parameters: [
      { name: 'g', from: 0, to: 1, steps: 3 },
      { name: 'h', values: ['0', '1/3', '0.5'] },
    ],
    points: 'grid',
    task: { kind: 'search', range: 4, certificates: true },
  };
  let file: string;

  beforeAll(async () => {
    file = plan('fields', FIELDS);
    expect(await holdfast('scan', file)).toMatchObject({ status: 0, stderr: '' });
  });

  it('is collected: a table, a map, certificates that are accepted', async () => {
    const { stdout, stderr, status } = await holdfast('collect', at('fields.results'));
    expect([status, stderr]).toEqual([0, '']);
    expect(stdout).toContain('12 of 12 points done.');
    expect(stdout).toContain('11 ×  0 1 0 0');
    expect(stdout).toContain(' 1 ×  0 1 1 1');
    expect(stdout).toContain('12 certificates accepted.');
    expect(stdout.replace(/\s+/g, ' ')).toContain('says nothing about quasilocal, non-local or staggered');
    const [csv, json, svg] = tables(at('fields.results'));
    expect(csv!.split('\n').slice(0, 2).join('\n')).toMatch(
      /^point,g,h,g decimal,h decimal,status,answer,range 1,range 2,range 3,range 4,charges,minimum ring,certificate,reason\n1,0,0,0,0,done,0 1 1 1,0,1,1,1,3,9,sha256:/,
    );
    expect(csv!.trim().split('\n')).toHaveLength(13);
    const read = JSON.parse(json!) as { points: { at: object; status: string }[]; missing: number[] };
    expect([read.points.length, read.missing]).toEqual([12, []]);
    expect(read.points[5]).toMatchObject({ at: { g: '1/3', h: '1/2' }, status: 'done' });
    expect(svg).toMatch(/^<svg /);
    expect(svg!.match(/<title>\d+: g = /g)).toHaveLength(12);
  });

  it('gives the same bytes from three shards, in any order', async () => {
    const folder = at('three');
    for (const shard of ['3/3', '1/3', '2/3'])
      expect(
        (await holdfast('scan', file, '--results', folder, '--shard', shard, '--workers', '1')).status,
      ).toBe(0);
    expect((await holdfast('collect', folder)).status).toBe(0);
    expect(tables(folder)).toEqual(tables(at('fields.results')));
  });

  it('says what is missing and what is not accepted, and mends it', async () => {
    const folder = at('broken');
    expect((await holdfast('scan', file, '--results', folder, '--shard', '1/2')).status).toBe(0);
    const certificate = join(folder, 'certificates', '000003.json');
    writeFileSync(
      certificate,
      readFileSync(certificate, 'utf8').replace('"dimensions":[0,1', '"dimensions":[0,2'),
    );
    const { stderr, status, stdout } = await holdfast('collect', folder);
    expect(status).toBe(1);
    expect(stdout).toContain('6 of 12 points done.');
    expect(stderr).toContain('6 points missing: 2, 4, 6, 8, 10, 12');
    expect(stderr).toContain('the certificate of point 3 is not accepted: not the text that was recorded');
    expect(tables(folder)[0]).toMatch(/^3,.*,rejected,not the text that was recorded$/m);
    rmSync(certificate);
    expect((await holdfast('scan', file, '--results', folder)).status).toBe(0);
    expect((await holdfast('collect', folder)).status).toBe(0);
    expect(tables(folder)).toEqual(tables(at('fields.results')));
  });

  it('goes to a cluster as scripts where there is no sbatch here', async () => {
    const path = process.env['PATH'];
    process.env['PATH'] = '/nonexistent';
    const { stdout, status } = await holdfast(
      'scan',
      file,
      '--results',
      at('cluster'),
      '--slurm',
      '--tasks',
      '4',
    );
    process.env['PATH'] = path;
    expect(status).toBe(0);
    expect(stdout).toContain('12 points in 4 tasks of 1 thread');
    expect(stdout).toContain(
      `No sbatch here. Where there is one: bash ${at('cluster', 'slurm', 'submit.sh')}`,
    );
    expect(readdirSync(at('cluster', 'slurm')).sort()).toEqual(['collect.sh', 'log', 'scan.sh', 'submit.sh']);
  });

  it('refuses what does not fit, and writes nothing', async () => {
    const other = plan('other', { ...FIELDS, task: { kind: 'search', range: 3 } });
    const cases: readonly (readonly [readonly string[], RegExp])[] = [
      [[], /expected the file of one plan/],
      [[at('nowhere.json')], /plan: expected a readable file/],
      [[other, '--results', at('fields.results')], /results of another plan/],
      [[file, '--shard', '4/3'], /an index from 1 to 3/],
      [[file, '--shard', 'environment'], /the number of an array task/],
      [[file, '--workers', '0'], /--workers/],
      [[file, '--tasks', '4'], /--tasks: expected --slurm/],
      [[file, '--slurm', '--tasks', '13'], /at most one a point, 12/],
      [[file, '--slurm', '--shard', '1/2'], /--shard/],
      [[file, '--slurm', '--sbatch', 'rm'], /--sbatch/],
    ];
    const before = readdirSync(scratch, { recursive: true }).sort();
    for (const [args, message] of cases) {
      const { stdout, stderr, status } = await holdfast('scan', ...args);
      expect([stdout, status], args.join(' ')).toEqual(['', 2]);
      expect(stderr).toMatch(message);
    }
    const { stderr, status } = await holdfast('scan', file, '--memory', '0.01', '--results', at('small'));
    expect([status, stderr]).toEqual([
      1,
      expect.stringMatching(/scan: a point needs about .* 0\.010 GB may be used/),
    ]);
    expect(readdirSync(scratch, { recursive: true }).sort()).toEqual(before);
  });
});

describe('a scan that is stopped', () => {
  const POINTS = 40;
  let file: string;
  beforeAll(() => {
    file = plan('long', {
      model: { formula: 'XX + g Z + h X + XZ' },
      parameters: [
        { name: 'g', from: 1, to: 2, steps: 7 },
        { name: 'h', from: 1, to: 2, steps: 4 },
      ],
      points: 'grid',
      task: { kind: 'search', range: 7 },
    });
  });

  it('by a kill, goes on without loss, and ends with the same bytes', async () => {
    const folder = at('killed');
    const args = [file, '--results', folder, '--workers', '1'];
    expect(await interrupted('SIGKILL', () => linesOf(folder) >= 3, 'scan', ...args)).toMatchObject({
      killed: 'SIGKILL',
    });
    const before = linesOf(folder);
    expect(before).toBeGreaterThanOrEqual(3);
    expect(before).toBeLessThan(POINTS);
    const { stdout, status } = await holdfast('scan', ...args);
    expect([status, stdout.split('\n')[0]]).toEqual([0, `40 of 40 points done, ${before} of them before.`]);
    expect(linesOf(folder)).toBe(POINTS);
    expect((await holdfast('collect', folder)).status).toBe(0);
  });

  it.each(['SIGINT', 'SIGTERM'] as const)('by %s, ends by itself and says so', async (signal) => {
    const folder = at(signal);
    const end = await interrupted(signal, () => linesOf(folder) >= 2, 'scan', file, '--results', folder);
    expect(end).toMatchObject({ status: 1, killed: null });
    expect(end.output).toContain('scan: stopped; the same command goes on from here');
    expect(linesOf(folder)).toBeLessThan(POINTS);
    const { stderr, status } = await holdfast('collect', folder);
    expect(status).toBe(1);
    expect(stderr).toMatch(/\d+ points missing: /);
    expect(tables(folder)[0]).toMatch(/,missing,missing,/);
  });
});

it('points without a Hamiltonian are answers; other tasks have their own columns', async () => {
  const parameters = [{ name: 'g', values: [0, 1] }];
  const decide = plan('decide', {
    model: { formula: 'g XX + g YY + 2 g ZZ + g X' },
    parameters,
    points: 'grid',
    task: { kind: 'decide', certificates: true, waveNumbers: true },
  });
  // The range-3 charge of the Heisenberg chain (hep-th/9403149, Mod. Phys. Lett. A 9, 2197 (1994)), and a chain next to it.
  const residual = plan('residual', {
    model: { formula: 'XX + (1 + g) YY + ZZ' },
    parameters,
    points: 'grid',
    task: { kind: 'residual', candidate: 'XYZ - ZYX + YZX - XZY + ZXY - YXZ + g XX', range: 3 },
  });
  const rows = async (file: string) => {
    expect((await holdfast('scan', file)).status).toBe(0);
    const folder = file.replace(/json$/, 'results');
    expect(await holdfast('collect', folder)).toMatchObject({ status: 0, stderr: '' });
    return readFileSync(join(folder, 'table.csv'), 'utf8').trim().split('\n');
  };
  const [head, first, second] = await rows(decide);
  expect(head).toMatch(/^point,g,g decimal,status,answer,verdict,from,per range,at most,/);
  expect(first).toMatch(/^1,0,0,refused,no Hamiltonian,.*zero/);
  expect(second).toMatch(/^2,1,1,done,no charge of range ≥ 3,none,3,0,0,,,/);
  expect(second).toMatch(/sha256:[0-9a-f]{64},$/);
  const [columns, zero, one] = await rows(residual);
  expect(columns).toMatch(/,conserved,squared norm,correction range,squared distance,/);
  expect(zero).toBe('1,0,0,done,conserved,yes,0,0,0,,');
  expect(one).toMatch(/^2,1,1,done,"?not conserved.*,no,[1-9]\d*,none,[^,]+,,$/);
});
