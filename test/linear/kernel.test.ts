/** Null spaces by forest and elimination, against textbook elimination. */
import { describe, expect, it } from 'vitest';
import { primeField } from '../../src/linear/field.ts';
import { kernel } from '../../src/linear/kernel.ts';
import { MatrixBuilder } from '../../src/search/null-space.ts';
import { dense, PRIMES, plain, product, randomRows } from '../support/echelon.ts';
import { property } from '../support/random.ts';

function matrixOf(rows: readonly (readonly number[])[], columns: number) {
  const builder = new MatrixBuilder();
  for (const [i, row] of rows.entries()) for (const [c, v] of row.entries()) builder.add(i, c, BigInt(v));
  return builder.finish(columns);
}

describe('null spaces over GF(p)', () => {
  property('annihilated, independent, complete; and found again from the steps', 200, (random) => {
    const p = random.pick(PRIMES);
    const columns = random.integer(1, 12);
    const rows = [...randomRows(random, columns, 3), ...randomRows(random, columns, 3)];
    const rank = plain(rows, columns, p).length;
    const matrix = matrixOf(rows, columns);
    const first = kernel(matrix, primeField(p));
    for (const { vectors } of [first, kernel(matrix, primeField(p), first.steps)]) {
      const found = vectors.map((v) => dense(v, columns));
      expect(found.length).toBe(columns - rank);
      expect(plain(found, columns, p).length).toBe(found.length);
      for (const v of found) for (const row of rows) expect(product(row, v, p)).toBe(0);
    }
  });

  it('takes empty shapes', () => {
    expect(kernel(matrixOf([], 0), primeField(5)).vectors).toEqual([]);
    expect(kernel(matrixOf([], 3), primeField(5)).vectors.length).toBe(3);
  });
});
