/** Textbook elimination over GF(p) in big integers, and random matrices for it: the plain twin of the fast ones. */
import type { SparseVector } from '../../src/linear/sparse.ts';
import type { Random } from './random.ts';

export const PRIMES = [3, 5, 101, 67108859];

/** Few rows of few entries, some of them combinations of others. */
export function randomRows(random: Random, columns: number, p: number): number[][] {
  const rows = Array.from({ length: random.below(9) }, () =>
    Array.from({ length: columns }, () => (random.chance(0.3) ? random.below(p) : 0)),
  );
  for (let i = random.below(4); i > 0 && rows.length > 1; i--) {
    const [a, b] = [random.pick(rows), random.pick(rows)];
    rows.push(a.map((x, c) => (x + 2 * b[c]!) % p));
  }
  return random.shuffle(rows);
}

export function sparse(row: readonly number[]): SparseVector {
  const columns = row.flatMap((v, c) => (v === 0 ? [] : [c]));
  return { columns, values: columns.map((c) => row[c]!) };
}

export function dense({ columns, values }: SparseVector, length: number): number[] {
  const row = new Array<number>(length).fill(0);
  columns.forEach((c, i) => {
    row[c] = values[i]!;
  });
  return row;
}

/** Reduced echelon form, the textbook way, in big integers. */
export function plain(rows: readonly (readonly number[])[], columns: number, p: number): number[][] {
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

export const product = (a: readonly number[], b: readonly number[], p: number) =>
  Number(a.reduce((sum, x, i) => sum + BigInt(x) * BigInt(b[i]!), 0n) % BigInt(p));
