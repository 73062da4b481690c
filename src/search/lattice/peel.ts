/**
 * Which candidates are zero because an equation says so by itself, in bounded memory: no equation is stored.
 *
 * Every output falls into a bucket by a hash of its key. A bucket holds how many entries of the system fell into it and the XOR
 * of their columns; where the count is 1, some equation has this one entry, whose coefficient ±J ω^e is not zero, so its column
 * is. Taking a column out lowers the counts of its buckets and may settle others. Two outputs in one bucket only hide equations;
 * a further round with another hash, on what is left, finds most of them. What is peeled is zero over any field where no J vanishes,
 * so the outcome depends on no prime.
 *
 * Method: peeling of a random hypergraph by counts and XORs, as invertible sketches do; common practice, no source.
 * Cost: two visits a candidate and round. Memory: 5 bytes a bucket, one byte and 4 a candidate, beside the keys.
 */
import type { StringSpace } from './space.ts';
import { hashOf } from './space.ts';

/** Most buckets at a time: 5 bytes each. */
const MAX_BUCKETS = 2 ** 27;

/** Buckets a candidate. Fewer than its outputs: 8, 32 and 64 took 5.5, 6.0 and 7.2 s on the 3 × 3 square. */
const BUCKETS_PER_CANDIDATE = 8;

const MAX_ROUNDS = 6;

/** Counts stay here once they get there: such a bucket never settles a column. */
const FULL = 255;

export function bucketCount(candidates: number): number {
  return Math.min(MAX_BUCKETS, 2 ** Math.max(10, Math.ceil(Math.log2(BUCKETS_PER_CANDIDATE * candidates))));
}

/** The indices of the candidates that are left, rising. */
export function peel(
  space: StringSpace,
  keys: Uint32Array,
  onProgress: (done: number) => void = () => {},
): Uint32Array {
  const { limbs } = space;
  const candidates = keys.length / limbs;
  const dead = new Uint8Array(candidates);
  let alive = candidates;
  for (let round = 0; round < MAX_ROUNDS && alive > 0; round++) {
    const mask = bucketCount(alive) - 1;
    const count = new Uint8Array(mask + 1);
    const columns = new Uint32Array(mask + 1);
    for (let c = 0; c < candidates; c++) {
      if ((c & 0xfff) === 0) onProgress(c / candidates / 2);
      if (dead[c] === 1) continue;
      space.visit(keys, c);
      for (let i = 0; i < space.count; i++) {
        const bucket = hashOf(space.images, i, limbs, round) & mask;
        if (count[bucket]! < FULL) count[bucket]!++;
        columns[bucket]! ^= c;
      }
    }
    const stack: number[] = [];
    let before = alive;
    for (let b = 0; b <= mask; b++) {
      if ((b & 0xffff) === 0) onProgress(0.5 + b / mask / 2);
      if (count[b] !== 1) continue;
      stack.push(b);
      while (stack.length > 0) {
        const bucket = stack.pop()!;
        if (count[bucket] !== 1) continue;
        const column = columns[bucket]!;
        dead[column] = 1;
        alive--;
        space.visit(keys, column);
        for (let i = 0; i < space.count; i++) {
          const other = hashOf(space.images, i, limbs, round) & mask;
          columns[other]! ^= column;
          if (count[other]! < FULL && --count[other]! === 1) stack.push(other);
        }
      }
    }
    before -= alive;
    // Another round pays only while it still finds columns.
    if (before < alive / 100) break;
  }
  const left = new Uint32Array(alive);
  for (let c = 0, at = 0; c < candidates; c++) if (dead[c] === 0) left[at++] = c;
  return left;
}
