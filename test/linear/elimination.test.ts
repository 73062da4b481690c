/** Elimination over GF(p), against plain dense elimination on random sparse matrices. */
import { describe, expect, it } from 'vitest';
import { eliminate, reducedBasis } from '../../src/linear/elimination.ts';
import { primeField } from '../../src/linear/field.ts';
import type { SparseVector } from '../../src/linear/sparse.ts';
import { property, type Random } from '../support/random.ts';

const PRIMES = [3, 5, 101, 67108859];

/** Few rows of few entries, some of them combinations of others. */
function randomRows(random: Random, columns: number, p: number): number[][] {
  const rows = Array.from({ length: random.below(9) }, () =>
    Array.from({ length: columns }, () => (random.chance(0.3) ? random.below(p) : 0)),
  );
  for (let i = random.below(4); i > 0 && rows.length > 1; i--) {
    const [a, b] = [random.pick(rows), random.pick(rows)];
    rows.push(a.map((x, c) => (x + 2 * b[c]!) % p));
  }
  return random.shuffle(rows);
}

function sparse(row: readonly number[]): SparseVector {
  const columns = row.flatMap((v, c) => (v === 0 ? [] : [c]));
  return { columns, values: columns.map((c) => row[c]!) };
}

function dense({ columns, values }: SparseVector, length: number): number[] {
  const row = new Array<number>(length).fill(0);
  columns.forEach((c, i) => {
    row[c] = values[i]!;
  });
  return row;
}

/** Reduced echelon form, the textbook way, in big integers. */
function plain(rows: readonly (readonly number[])[], columns: number, p: number): number[][] {
  const P = BigInt(p);
  const left = rows.map((row) => row.map(BigInt));
  const found: bigint[][] = [];
  for (let c = 0; c < columns; c++) {
    const at = left.findIndex((row) => row[c] !== 0n);
    if (at < 0) continue;
    const [row] = left.splice(at, 1);
    let scale = 1n;
    for (let e = P - 2n, base = row![c]!; e > 0n; e >>= 1n, base = (base * base) % P)
      if (e & 1n) scale = (scale * base) % P;
    const pivot = row!.map((v) => (v * scale) % P);
    for (const other of [...left, ...found]) {
      const factor = other[c]!;
      for (let j = 0; j < columns; j++) other[j] = (other[j]! + (P - factor) * pivot[j]!) % P;
    }
    found.push(pivot);
  }
  return found.map((row) => row.map(Number));
}

const product = (a: readonly number[], b: readonly number[], p: number) =>
  Number(a.reduce((sum, x, i) => sum + BigInt(x) * BigInt(b[i]!), 0n) % BigInt(p));

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
