/**
 * Results on disk: JSON Lines. A file begins with a line that names the plan and the shard, and goes on with a line for each point that is
 * finished. Files are only ever appended to; what a killed process left unfinished is the last line, and it is not read.
 */
import { z } from 'zod';
import { VERSION } from '../certificate/version.ts';
import { type Shard, shardFromText, textFromShard } from './shard.ts';

const rationalText = z
  .string()
  .max(20_000)
  .regex(/^-?\d+(?:\/\d+)?$/);
const count = z.int().min(0);
const dimensions = z.array(count).min(1);
const sha = z.string().regex(/^sha256:[0-9a-f]{64}$/);
const reason = z.string();

const charges = z.array(
  z.strictObject({
    range: count,
    parity: z.enum(['even', 'odd']).nullable(),
    terms: z.array(z.tuple([z.string().regex(/^[IXYZ]+$/), rationalText])),
  }),
);

const answer = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('search'),
    dimensionByRange: dimensions,
    minimumCells: count,
    charges: charges.optional(),
  }),
  /** One conserved sector of a search. */
  z.strictObject({
    kind: z.literal('sector'),
    primes: z.array(count),
    charges,
  }),
  z.strictObject({
    kind: z.literal('decide'),
    verdict: z.enum(['none', 'complete', 'bounded', 'by citation', 'undecided']),
    /** The first range that the verdict speaks of, where it speaks of every range. */
    from: count.nullable(),
    /** Charges of every range from there on, exactly. */
    perRange: count.nullable(),
    /** The program's own upper bound; ranges count groups of so many cells. */
    bound: z
      .strictObject({
        group: count,
        from: count,
        generic: count,
        exceptional: z.array(z.tuple([count, count])),
      })
      .nullable(),
    theorem: z.string().nullable(),
    reason: reason.nullable(),
    dimensionByRange: dimensions,
    waveNumbers: z.string().nullable(),
  }),
  z.strictObject({
    kind: z.literal('residual'),
    conserved: z.boolean(),
    /** (C|C) a cell of C = i[H, Q], at infinite temperature. */
    squaredNorm: rationalText,
    /** 0 when conserved; null where no correction of the ranges searched will do. Absent when none was looked for. */
    correctionRange: count.nullable().optional(),
    /** Squared distance a cell to the nearest charge of the ranges searched, at infinite temperature; 0 when conserved. */
    squaredDistance: rationalText.optional(),
  }),
]);

const certificate = z.union([z.strictObject({ id: sha }), z.strictObject({ none: reason })]);

const outcome = z.discriminatedUnion('status', [
  z.strictObject({ status: z.literal('done'), answer, certificate: certificate.optional() }),
  z.strictObject({ status: z.literal('refused'), reason }),
  z.strictObject({ status: z.literal('failed'), reason }),
]);

const record = z.strictObject({
  /** From 1. */
  point: z.int().min(1),
  at: z.array(rationalText),
  outcome,
  milliseconds: z.number().min(0),
});

const header = z.strictObject({
  plan: sha,
  shard: z.string().refine(isShard),
  tool: z.string().max(100),
});

export type PointAnswer = z.infer<typeof answer>;
/** The id of a point's certificate, or why there is none. */
export type CertificateNote = z.infer<typeof certificate>;
/** `refused`: the model itself is at fault there, for good. `failed`: this run could not, another one may. */
export type Outcome = z.infer<typeof outcome>;
/** A line of a file; `point` counts from 0 here, and from 1 in files and wherever people see it. */
export type PointRecord = z.infer<typeof record>;

/** The first line of a file. */
export function headerLine(plan: string, shard: Shard): string {
  return `${JSON.stringify({ plan, shard: textFromShard(shard), tool: `holdfast ${VERSION}` })}\n`;
}

export function recordLine({ point, at, outcome: found, milliseconds }: PointRecord): string {
  return `${JSON.stringify({ point: point + 1, at, outcome: found, milliseconds: Math.round(milliseconds) })}\n`;
}

/** What one file holds. */
export interface RecordFile {
  /** Null where not even the first line was finished. */
  readonly plan: string | null;
  readonly shard: Shard | null;
  readonly records: readonly PointRecord[];
  /** Characters behind the last line feed: a line that a killed process did not finish. */
  readonly torn: number;
  /** Lines, from 1, that are finished and are no records: damage. */
  readonly damaged: readonly number[];
}

/** Reads a file of results; never throws for what is in it. */
export function readRecords(text: string): RecordFile {
  const reader = new RecordReader();
  reader.push(text);
  return reader.finish();
}

/** The same in pieces, for files longer than a text can be. */
export class RecordReader {
  #plan: string | null = null;
  #shard: Shard | null = null;
  readonly #records: PointRecord[] = [];
  readonly #damaged: number[] = [];
  #lines = 0;
  #rest: string[] = [];

  /** Takes the next piece of the text, cut anywhere between two characters. */
  push(piece: string): void {
    let start = 0;
    for (let end = piece.indexOf('\n'); end >= 0; end = piece.indexOf('\n', start)) {
      this.#rest.push(piece.slice(start, end));
      this.#line(this.#rest.join(''));
      this.#rest = [];
      start = end + 1;
    }
    if (start < piece.length) this.#rest.push(piece.slice(start));
  }

  #line(line: string): void {
    this.#lines++;
    if (this.#lines === 1) {
      const head = parsed(header, line);
      if (head === undefined) this.#damaged.push(1);
      else [this.#plan, this.#shard] = [head.plan, shardFromText(head.shard)];
      return;
    }
    const found = parsed(record, line);
    if (found === undefined) this.#damaged.push(this.#lines);
    else this.#records.push({ ...found, point: found.point - 1 });
  }

  finish(): RecordFile {
    return {
      plan: this.#plan,
      shard: this.#shard,
      records: this.#records,
      torn: this.#rest.reduce((sum, piece) => sum + piece.length, 0),
      damaged: this.#damaged,
    };
  }
}

function isShard(text: string): boolean {
  try {
    shardFromText(text);
    return true;
  } catch {
    return false;
  }
}

function parsed<T>(schema: z.ZodType<T>, line: string): T | undefined {
  try {
    const result = schema.safeParse(JSON.parse(line));
    return result.success ? result.data : undefined;
  } catch {
    return undefined;
  }
}
