/**
 * The folder that holds the results of one plan:
 *
 *     plan.json                     the canonical plan, written first; every other file belongs to it
 *     records/3-of-20.1.jsonl       finished points of shard 3 of 20, one file a process; only ever appended to
 *     certificates/000017.json      the certificate of point 17, if the plan asks for them
 *     checkpoints/17/               finished layers of a long search that is under way
 *
 * Nobody appends to the file of another process, so two copies of a shard cannot mix their lines, and the unfinished last line of one that
 * was killed stays the last. Whoever starts reads which points are done from all files that can hold points of its shard.
 */
import { randomBytes } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { type FileHandle, link, mkdir, open, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { basename, join } from 'node:path';
import { HoldfastError, InputError, show } from '../../errors.ts';
import { isFinal, mergeRecords } from '../../scan/merge.ts';
import { planHash, type ReadPlan, readPlan } from '../../scan/plan.ts';
import { type Points, partsIn } from '../../scan/points.ts';
import {
  headerLine,
  type PointRecord,
  type RecordFile,
  RecordReader,
  recordLine,
} from '../../scan/record.ts';
import { isIn, overlap, type Shard, shardOf } from '../../scan/shard.ts';
import { writeFileWhole } from '../output-file.ts';

const PLAN = 'plan.json';
const RECORDS = 'records';
const CERTIFICATES = 'certificates';
const CHECKPOINTS = 'checkpoints';
const RECORD_FILE = /^([1-9]\d*)-of-([1-9]\d*)\.([1-9]\d*)\.jsonl$/;

export class ResultsFolder {
  /** What is to be done, and recorded one by one: points, or sectors of points. */
  readonly points: Points;

  private constructor(
    readonly path: string,
    readonly read: ReadPlan,
    /** `sha256:` and the digest of the canonical plan. */
    readonly hash: string,
  ) {
    this.points = partsIn(read.plan);
  }

  /**
   * The folder of a plan, made if there is none.
   *
   * @throws InputError for a folder with results of another plan or with other things in it; nothing is written there then
   */
  static async forPlan(path: string, read: ReadPlan): Promise<ResultsFolder> {
    const folder = new ResultsFolder(path, read, await planHash(read));
    if ((await textOf(join(path, PLAN))) === undefined) {
      const others = (await namesIn(path)).filter((name) => !name.startsWith(PLAN));
      // Another process may have written its plan, and more, between the two looks.
      if (others.length > 0 && (await textOf(join(path, PLAN))) === undefined)
        throw new InputError(
          '--results',
          'a new or empty folder, or one with results of this plan',
          `${show(path)}, which holds ${show(others[0])}`,
        );
      await guarded(path, async () => {
        await makeFolder(path);
        await writeOnce(join(path, PLAN), read.text);
      });
    }
    await folder.#assertOwn();
    const { task } = read.plan;
    await guarded(path, async () => {
      await makeFolder(join(path, RECORDS));
      if ('certificates' in task && task.certificates) await makeFolder(join(path, CERTIFICATES));
    });
    return folder;
  }

  /** The folder of results that exist. @throws InputError where there is no plan, or a damaged one */
  static async existing(path: string): Promise<ResultsFolder> {
    const text = await textOf(join(path, PLAN));
    if (text === undefined)
      throw new InputError('collect', 'a folder with results of a scan', `${show(path)}, without ${PLAN}`);
    const read = readPlan(text);
    if (read.text !== text)
      throw new InputError('collect', `${PLAN} as the scan wrote it`, 'a text that was changed');
    return new ResultsFolder(path, read, await planHash(read));
  }

  async #assertOwn(): Promise<void> {
    const held = await textOf(join(this.path, PLAN));
    if (held === this.read.text) return;
    const other = held === undefined ? 'none' : await planHash({ text: held });
    throw new InputError(
      '--results',
      `a folder of this plan, ${this.hash}`,
      `${show(this.path)}, which holds results of another plan, ${other}`,
    );
  }

  certificatePath(point: number): string {
    return join(this.path, CERTIFICATES, `${String(point + 1).padStart(6, '0')}.json`);
  }

  /** Where a long search keeps its finished layers while it runs. */
  checkpointPath(point: number): string {
    return join(this.path, CHECKPOINTS, String(point + 1));
  }

  /** The search is over and recorded. */
  async dropCheckpoint(point: number): Promise<void> {
    await rm(this.checkpointPath(point), { recursive: true, force: true });
  }

  async writeCertificate(point: number, text: string): Promise<void> {
    await writeFileWhole('scan', this.certificatePath(point), [text], new AbortController().signal);
  }

  /** Points of the shard that are done, with their certificates where these are asked for. */
  async finished(shard: Shard): Promise<Set<number>> {
    const held = new Set(await namesIn(join(this.path, CERTIFICATES)));
    const files = await this.files(shard);
    const own = files.filter(({ file }) => file.plan === this.hash);
    const { outcomes } = mergeRecords(
      this.points,
      own.flatMap(({ file }) => file.records),
    );
    const done = new Set<number>();
    for (const [point, outcome] of outcomes) {
      if (!isIn(shard, point) || !isFinal(outcome)) continue;
      const certified =
        outcome.status === 'done' && outcome.certificate !== undefined && 'id' in outcome.certificate;
      if (certified && !held.has(basename(this.certificatePath(point)))) continue;
      done.add(point);
    }
    return done;
  }

  /** The files that can hold points of the shard, in the order of their names. One of another plan has its hash in it. */
  async files(shard: Shard): Promise<{ name: string; file: RecordFile }[]> {
    const found: { name: string; file: RecordFile }[] = [];
    for (const name of (await namesIn(join(this.path, RECORDS))).sort()) {
      const other = shardIn(name);
      if (other === undefined || !overlap(shard, other)) continue;
      found.push({ name, file: await recordsIn(join(this.path, RECORDS, name)) });
    }
    return found;
  }

  /** Where a process puts its finished points. The file is made with the first one. */
  writer(shard: Shard): RecordWriter {
    return new RecordWriter(join(this.path, RECORDS), this.hash, shard);
  }
}

/** Appends lines; each is on the disk when its promise resolves. Lines that arrive while the disk works go together. */
export class RecordWriter {
  #file: FileHandle | undefined;
  #pending: string[] = [];
  #written: Promise<void> = Promise.resolve();

  constructor(
    private readonly folder: string,
    private readonly hash: string,
    private readonly shard: Shard,
  ) {}

  append(record: PointRecord): Promise<void> {
    this.#pending.push(recordLine(record));
    this.#written = this.#written.then(() => this.#flush());
    return this.#written;
  }

  /** Writes all that is pending; what the flush before it has taken needs no other. */
  async #flush(): Promise<void> {
    if (this.#pending.length === 0) return;
    await guarded(this.folder, async () => {
      this.#file ??= await this.#create();
      const lines = this.#pending.splice(0).join('');
      await this.#file.appendFile(lines);
      await this.#file.datasync();
    });
  }

  /** The first free number: another process of the same shard has its own. */
  async #create(): Promise<FileHandle> {
    const { index, count } = this.shard;
    for (let i = 1; ; i++) {
      try {
        const file = await open(join(this.folder, `${index + 1}-of-${count}.${i}.jsonl`), 'ax');
        await file.appendFile(headerLine(this.hash, this.shard));
        return file;
      } catch (error) {
        if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error;
      }
    }
  }

  async close(): Promise<void> {
    await this.#written.catch(() => {});
    await this.#file?.close();
  }
}

function shardIn(name: string): Shard | undefined {
  const [, index, count] = RECORD_FILE.exec(name) ?? [];
  try {
    return index === undefined ? undefined : shardOf(Number(index) - 1, Number(count));
  } catch {
    return undefined;
  }
}

/** Puts a text there whole unless something is there already: a link is made in one step and never replaces. */
async function writeOnce(path: string, text: string): Promise<void> {
  const scratch = `${path}.${randomBytes(4).toString('hex')}.part`;
  await writeFile(scratch, text, { flag: 'wx', flush: true });
  try {
    await link(scratch, path);
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException;
    // File systems without links; two processes that start together then write the same bytes.
    if (code === 'EPERM' || code === 'ENOTSUP' || code === 'ENOSYS' || code === 'EOPNOTSUPP')
      await writeFile(path, text, { flag: 'wx' });
    else if (code !== 'EEXIST') throw error;
  } finally {
    await rm(scratch, { force: true });
  }
}

/** One folder below one that exists: Node's recursive form never returns where the kernel refuses in its own way, as under /proc. */
export async function makeFolder(path: string): Promise<void> {
  await mkdir(path).catch((error: NodeJS.ErrnoException) => {
    if (error.code !== 'EEXIST') throw error;
  });
}

async function guarded<T>(path: string, work: () => Promise<T>): Promise<T> {
  try {
    return await work();
  } catch (error) {
    if (error instanceof HoldfastError) throw error;
    throw new HoldfastError(`scan: cannot write to ${show(path)}: ${(error as Error).message}`);
  }
}

async function recordsIn(path: string): Promise<RecordFile> {
  const reader = new RecordReader();
  try {
    for await (const piece of createReadStream(path, 'utf8')) reader.push(piece as string);
  } catch (error) {
    throw unreadable(path, error);
  }
  return reader.finish();
}

function unreadable(path: string, error: unknown): InputError {
  return new InputError('results', 'files that can be read', `${show(path)}: ${(error as Error).message}`);
}

/** Undefined where there is no such file. */
async function textOf(path: string): Promise<string | undefined> {
  try {
    return await readFile(path, 'utf8');
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return undefined;
    throw unreadable(path, error);
  }
}

/** Nothing where there is no such folder. */
async function namesIn(path: string): Promise<string[]> {
  try {
    return await readdir(path);
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return [];
    throw unreadable(path, error);
  }
}
