/** Elimination over GF(p), against plain dense elimination on random sparse matrices. */
import { describe, expect, it } from 'vitest';
import { eliminate, reducedBasis } from '../../src/linear/elimination.ts';
import { primeField } from '../../src/linear/field.ts';
import { dense, PRIMES, plain, product, randomRows, sparse } from '../support/echelon.ts';
import { property } from '../support/random.ts';

describe('elimination over GF(p)', () => {
  property('rank, pivots and reduced basis are those of the textbook', 150, (random) => {
    const p = random.pick(PRIMES);
    const columns = random.integer(1, 8);
    const rows = randomRows(random, columns, p);
    const expected = plain(rows, columns, p);
    const echelon = eliminate(rows.map(sparse), columns, primeField(p));
    expect(echelon.rank).toBe(expected.length);
    expect([...echelon.pivots.keys()].sort((a, b) => a - b)).toEqual(
      expected.map((row) => row.findIndex((v) => v !== 0)),
    );
    const reduced = reducedBasis(rows.map(sparse), columns, primeField(p));
    expect(reduced.map((row) => dense(row, columns))).toEqual(expected);
  });

  property(
    'the null space is annihilated, independent, and as large as the rank leaves room',
    150,
    (random) => {
      const p = random.pick(PRIMES);
      const columns = random.integer(1, 8);
      const rows = randomRows(random, columns, p);
      const echelon = eliminate(rows.map(sparse), columns, primeField(p));
      const vectors = echelon.nullSpace().map((v) => dense(v, columns));
      expect(vectors.length).toBe(columns - echelon.rank);
      expect(plain(vectors, columns, p).length).toBe(vectors.length);
      for (const v of vectors) for (const row of rows) expect(product(row, v, p)).toBe(0);
    },
  );

  it('takes empty shapes: no rows, no columns, rows of zeros', () => {
    const field = primeField(5);
    expect(eliminate([], 3, field).nullSpace().length).toBe(3);
    expect(eliminate([], 0, field)).toMatchObject({ rank: 0 });
    expect(eliminate([{ columns: [], values: [] }], 2, field).rank).toBe(0);
    expect(reducedBasis([], 2, field)).toEqual([]);
  });
});
