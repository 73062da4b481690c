/** Shares of a plan: point p belongs to shard i of n where p ≡ i modulo n, so that dear regions of a grid are spread over all shards. */
import { gcd } from '../algebra/rational.ts';
import { InputError, show } from '../errors.ts';

export interface Shard {
  /** 0 … count − 1; texts and file names count from 1. */
  readonly index: number;
  readonly count: number;
}

export const WHOLE_PLAN: Shard = Object.freeze({ index: 0, count: 1 });

/** Most shards of one plan. */
export const MAX_SHARDS = 1_000_000;

/** @throws InputError for a count that is no positive integer, or an index that is not 0 … count − 1 */
export function shardOf(index: number, count: number): Shard {
  if (!(Number.isInteger(count) && count >= 1 && count <= MAX_SHARDS))
    throw new InputError('shard', `a number of shards from 1 to ${MAX_SHARDS}`, show(count));
  if (!(Number.isInteger(index) && index >= 0 && index < count))
    throw new InputError('shard', `an index from 1 to ${count}`, show(index + 1));
  return Object.freeze({ index, count });
}

/** Reads `i/n`, i from 1 to n. */
export function shardFromText(text: string): Shard {
  const match = /^(\d{1,9})\/(\d{1,9})$/.exec(text);
  if (match === null) throw new InputError('shard', 'i/n, as in 3/20', show(text));
  return shardOf(Number(match[1]) - 1, Number(match[2]));
}

export function textFromShard({ index, count }: Shard): string {
  return `${index + 1}/${count}`;
}

/** Points of the shard among 0 … total − 1, rising. */
export function* pointsOfShard({ index, count }: Shard, total: number): Generator<number> {
  for (let point = index; point < total; point += count) yield point;
}

export function isIn({ index, count }: Shard, point: number): boolean {
  return point % count === index;
}

/** Can a point belong to both? Exactly when the indices agree modulo the greatest common divisor of the counts. */
export function overlap(a: Shard, b: Shard): boolean {
  return BigInt(a.index - b.index) % gcd(BigInt(a.count), BigInt(b.count)) === 0n;
}
