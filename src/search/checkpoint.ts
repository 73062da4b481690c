/**
 * Finished layers of a search on disk. One file a prime and sector, replaced as a whole: a kill at any moment leaves the old one or the new.
 *
 * Format: one line of JSON (model, range, prime, layer, lengths, checksum), then the numbers as little-endian doubles.
 */
import { createHash } from 'node:crypto';
import {
  closeSync,
  existsSync,
  fsyncSync,
  mkdirSync,
  openSync,
  readFileSync,
  renameSync,
  writeSync,
} from 'node:fs';
import { join } from 'node:path';
import { InputError, show } from '../errors.ts';
import type { Sector } from './sectors.ts';
import type { SnapshotStore } from './sweep.ts';
import type { PlainModel } from './transfer.ts';

interface Header {
  readonly task: string;
  readonly layer: number;
  readonly ranges: readonly { readonly cells: number; readonly length: number }[];
  readonly checksum: string;
}

/**
 * A store in a folder, which is made if need be.
 *
 * @throws InputError on loading when the folder holds a search of another model or range; damaged files count as absent
 */
export function checkpointIn(
  folder: string,
  model: PlainModel,
  range: number,
  { grading, value }: Sector,
): SnapshotStore {
  const part = grading.bits === 0 ? '' : `-${value + 1}of${2 ** grading.bits}`;
  const task = digest(describe(model, range) + part);
  const fileOf = (prime: number) => join(folder, `sweep-${prime}${part}.checkpoint`);
  return {
    load(prime) {
      if (!existsSync(fileOf(prime))) return undefined;
      const bytes = readFileSync(fileOf(prime));
      const end = bytes.indexOf(10);
      const header = end < 0 ? undefined : headerOf(bytes.subarray(0, end).toString());
      if (header === undefined) return undefined;
      if (header.task !== task)
        throw new InputError('checkpoint', 'a folder of this model and range', show(folder));
      const body = bytes.subarray(end + 1);
      if (digest(body) !== header.checksum) return undefined;
      // A copy, because doubles want an aligned buffer.
      const numbers = new Float64Array(body.buffer.slice(body.byteOffset, body.byteOffset + body.length));
      let at = 0;
      const take = (length: number) => {
        at += length;
        return numbers.slice(at - length, at);
      };
      return {
        layer: header.layer,
        ranges: header.ranges.map(({ cells, length }) => ({
          cells,
          strings: take(length),
          roots: take(length),
          weights: take(length),
        })),
      };
    },
    save(prime, { layer, ranges }) {
      try {
        mkdirSync(folder, { recursive: true });
      } catch (error) {
        throw new InputError('checkpoint', 'a folder that can be written', (error as Error).message);
      }
      const parts = ranges.flatMap(({ strings, roots, weights }) => [strings, roots, weights]);
      const body = Buffer.concat(
        parts.map((part) => Buffer.from(part.buffer, part.byteOffset, part.byteLength)),
      );
      const header: Header = {
        task,
        layer,
        ranges: ranges.map(({ cells, strings }) => ({ cells, length: strings.length })),
        checksum: digest(body),
      };
      const temporary = `${fileOf(prime)}.${process.pid}`;
      const file = openSync(temporary, 'w');
      writeSync(file, `${JSON.stringify(header)}\n`);
      for (let at = 0; at < body.length; ) at += writeSync(file, body, at);
      fsyncSync(file);
      closeSync(file);
      renameSync(temporary, fileOf(prime));
    },
  };
}

function headerOf(text: string): Header | undefined {
  try {
    const header = JSON.parse(text) as Partial<Header>;
    return typeof header.task === 'string' && Array.isArray(header.ranges) ? (header as Header) : undefined;
  } catch {
    return undefined;
  }
}

function describe({ cell, density }: PlainModel, range: number): string {
  const terms = [...density.numerators].map(([word, value]) => `${word}:${value}`).sort();
  return [cell, range, density.denominator, ...terms].join(' ');
}

function digest(data: string | Uint8Array): string {
  return createHash('sha256').update(data).digest('hex');
}
