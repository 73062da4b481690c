import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { ResultsFolder } from '../../../src/cli/scan/folder.ts';
import { InputError } from '../../../src/errors.ts';
import { readPlan } from '../../../src/scan/plan.ts';
import { type PointRecord, readRecords } from '../../../src/scan/record.ts';
import { runPoint } from '../../../src/scan/run.ts';
import { pointsOfShard, type Shard, shardOf, WHOLE_PLAN } from '../../../src/scan/shard.ts';

const scratch = mkdtempSync(join(tmpdir(), 'folder-'));
afterAll(() => rmSync(scratch, { recursive: true, force: true }));
let folders = 0;
const fresh = () => join(scratch, `results-${++folders}`);

const plan = (range = 3) =>
  readPlan({
    plan: 'points',
    model: { formula: 'XX + YY + g Z + h X' },
    parameters: [
      { name: 'g', from: 0, to: 1, steps: 3 },
      { name: 'h', from: 0, to: 1, steps: 2 },
    ],
    points: 'grid',
    task: { kind: 'search', range, certificates: true },
  });

/** A point computed and written, as a shard does. */
async function record(folder: ResultsFolder, point: number): Promise<PointRecord> {
  const { outcome, certificate } = await runPoint(folder.read.plan, folder.points.at(point));
  if (certificate !== null) await folder.writeCertificate(point, certificate);
  return { point, at: [...folder.points.at(point)], outcome, milliseconds: 1 };
}

async function runAll(folder: ResultsFolder, shard: Shard, most = Number.POSITIVE_INFINITY): Promise<void> {
  const done = await folder.finished(shard);
  const writer = folder.writer(shard);
  const todo = [...pointsOfShard(shard, folder.points.count)].filter((p) => !done.has(p)).slice(0, most);
  await Promise.all(todo.map(async (point) => writer.append(await record(folder, point))));
  await writer.close();
}

describe('a folder of results', () => {
  it('goes on from what any earlier division has finished', async () => {
    const path = fresh();
    const folder = await ResultsFolder.forPlan(path, plan());
    await runAll(folder, shardOf(1, 3));
    await runAll(folder, shardOf(0, 2), 2);
    const expected = new Set([1, 4, 7, 10, 0, 2]);
    expect(await (await ResultsFolder.forPlan(path, plan())).finished(WHOLE_PLAN)).toEqual(expected);
    expect(await folder.finished(shardOf(1, 2))).toEqual(new Set([1, 7]));
    await runAll(folder, shardOf(1, 2));
    await runAll(folder, shardOf(0, 2));
    expect(await folder.finished(WHOLE_PLAN)).toEqual(new Set(Array.from({ length: 12 }, (_, p) => p)));
    const records = (await folder.files(WHOLE_PLAN)).flatMap(({ file }) => file.records);
    expect(records).toHaveLength(12);
  });

  it('loses one line, and only a point, to a kill in the middle of it', async () => {
    const path = fresh();
    const folder = await ResultsFolder.forPlan(path, plan());
    await runAll(folder, WHOLE_PLAN, 5);
    const file = join(path, 'records', '1-of-1.1.jsonl');
    const whole = readFileSync(file, 'utf8');
    writeFileSync(file, whole.slice(0, -40));
    const kept = new Set([0, 1, 2, 3, 4]);
    kept.delete(readRecords(whole).records.at(-1)!.point);
    expect(await folder.finished(WHOLE_PLAN)).toEqual(kept);
    await runAll(folder, WHOLE_PLAN);
    // The torn file is as the killed process left it.
    expect(readFileSync(file, 'utf8')).toBe(whole.slice(0, -40));
    expect((await folder.finished(WHOLE_PLAN)).size).toBe(12);
  });

  it('takes two copies of the same shard at once', async () => {
    const path = fresh();
    const [one, two] = await Promise.all([1, 2].map(() => ResultsFolder.forPlan(path, plan())));
    await Promise.all([runAll(one!, shardOf(0, 2)), runAll(two!, shardOf(0, 2))]);
    expect(readdirSync(join(path, 'records')).sort()).toEqual(['1-of-2.1.jsonl', '1-of-2.2.jsonl']);
    for (const { file } of await one!.files(WHOLE_PLAN)) {
      expect(file).toMatchObject({ torn: 0, damaged: [] });
      expect(file.records).toHaveLength(6);
    }
    expect(await one!.finished(shardOf(0, 2))).toEqual(new Set([0, 2, 4, 6, 8, 10]));
    expect(readdirSync(join(path, 'certificates'))).toHaveLength(6);
  });

  it('does a point again whose certificate is gone', async () => {
    const folder = await ResultsFolder.forPlan(fresh(), plan());
    await runAll(folder, WHOLE_PLAN, 3);
    rmSync(folder.certificatePath(1));
    expect(await folder.finished(WHOLE_PLAN)).toEqual(new Set([0, 2]));
  });

  it('tries failures again and leaves points without a Hamiltonian alone', async () => {
    const folder = await ResultsFolder.forPlan(fresh(), plan());
    const writer = folder.writer(WHOLE_PLAN);
    const at = (point: number) => ({ point, at: [...folder.points.at(point)], milliseconds: 1 });
    await writer.append({ ...at(0), outcome: { status: 'failed', reason: 'out of memory' } });
    await writer.append({ ...at(1), outcome: { status: 'refused', reason: 'zero' } });
    await writer.close();
    expect(await folder.finished(WHOLE_PLAN)).toEqual(new Set([1]));
  });

  it('puts lines that come together on the disk in the order in which they came', async () => {
    const folder = await ResultsFolder.forPlan(fresh(), plan());
    const writer = folder.writer(WHOLE_PLAN);
    const line = (milliseconds: number): PointRecord => ({
      point: 0,
      at: [...folder.points.at(0)],
      outcome: { status: 'refused', reason: 'zero' },
      milliseconds,
    });
    await Promise.all(Array.from({ length: 500 }, (_, i) => writer.append(line(i))));
    const text = readFileSync(join(folder.path, 'records', '1-of-1.1.jsonl'), 'utf8');
    expect(readRecords(text).records.map((r) => r.milliseconds)).toEqual(
      Array.from({ length: 500 }, (_, i) => i),
    );
    await writer.close();
  });
});

it('a disk that refuses is an error, and no record counts as written', async () => {
  const folder = await ResultsFolder.forPlan(fresh(), plan());
  rmSync(join(folder.path, 'records'), { recursive: true });
  const writer = folder.writer(WHOLE_PLAN);
  await expect(writer.append(await record(folder, 0))).rejects.toThrow(/scan: cannot write to .*records/);
  await writer.close();
  expect(await folder.finished(WHOLE_PLAN)).toEqual(new Set());
});

describe('a folder is refused, and left as it is', () => {
  const contents = (path: string) => readdirSync(path, { recursive: true }).sort();

  it('with results of another plan', async () => {
    const path = fresh();
    const folder = await ResultsFolder.forPlan(path, plan());
    await runAll(folder, WHOLE_PLAN, 1);
    const before = contents(path);
    const error = await ResultsFolder.forPlan(path, plan(4)).catch((e: unknown) => e);
    expect(error).toBeInstanceOf(InputError);
    expect((error as Error).message).toMatch(
      /--results: expected a folder of this plan, sha256:[0-9a-f]{64}, got .*another plan, sha256:/,
    );
    expect((error as Error).message).toContain(folder.hash);
    expect(contents(path)).toEqual(before);
  });

  it('with other things in it', async () => {
    const path = fresh();
    mkdirSync(path);
    writeFileSync(join(path, 'thesis.tex'), 'years of work');
    await expect(ResultsFolder.forPlan(path, plan())).rejects.toThrow(/a new or empty folder.*thesis\.tex/);
    expect(contents(path)).toEqual(['thesis.tex']);
  });

  it('that is a file, or cannot be made', async () => {
    const path = fresh();
    writeFileSync(path, '');
    await expect(ResultsFolder.forPlan(path, plan())).rejects.toThrow(/results: expected/);
    await expect(ResultsFolder.forPlan(join(path, 'below'), plan())).rejects.toThrow(
      /results: expected|cannot write/,
    );
  });

  it('by a collection, without a plan or with one that was changed', async () => {
    await expect(ResultsFolder.existing(fresh())).rejects.toThrow(/without plan\.json/);
    const path = fresh();
    await ResultsFolder.forPlan(path, plan());
    const file = join(path, 'plan.json');
    writeFileSync(file, readFileSync(file, 'utf8').replace('"range":3', '"range": 3'));
    await expect(ResultsFolder.existing(path)).rejects.toThrow(/a text that was changed/);
  });

  it('in a race of two plans for one folder, whoever is late', async () => {
    const path = fresh();
    const both = await Promise.allSettled([3, 4].map((range) => ResultsFolder.forPlan(path, plan(range))));
    expect(both.map((r) => r.status).sort()).toEqual(['fulfilled', 'rejected']);
  });
});
