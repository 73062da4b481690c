/** Null spaces over the rationals: planted ones are recovered, in the one form that does not depend on primes. */
import { describe, expect, it } from 'vitest';
import { LimitError } from '../../src/errors.ts';
import { exactNullSpace, MatrixBuilder } from '../../src/search/null-space.ts';
import { plain } from '../support/echelon.ts';
import { property } from '../support/random.ts';

describe('exact null spaces', () => {
  property(
    'vectors are annihilated exactly, primitive, reduced, and as many as the rank leaves',
    80,
    (random) => {
      const columns = random.integer(1, 8);
      const size = random.pick([2, 9, 10_000_019]);
      const rows = Array.from({ length: random.below(7) }, () =>
        Array.from({ length: columns }, () => (random.chance(0.5) ? random.integer(-size, size) : 0)),
      );
      if (rows.length > 1) rows.push(rows[0]!.map((v, c) => v - 2 * rows[1]![c]!));
      const builder = new MatrixBuilder();
      for (const [i, row] of rows.entries()) for (const [c, v] of row.entries()) builder.add(i, c, BigInt(v));
      const found = exactNullSpace(builder.finish(columns));
      const p = 67108859;
      const residues = rows.map((row) => row.map((v) => ((v % p) + p) % p));
      expect(found.length).toBe(columns - plain(residues, columns, p).length);
      const leading = found.map((v) => v.columns[0]!);
      for (const [k, { columns: cs, values }] of found.entries()) {
        for (const row of rows)
          expect(cs.reduce((sum, c, i) => sum + BigInt(row[c]!) * values[i]!, 0n)).toBe(0n);
        expect(values[0]! > 0n).toBe(true);
        let common = 0n;
        for (const v of values)
          for (let [a, b] = [common, v < 0n ? -v : v]; ; [a, b] = [b, a % b])
            if (b === 0n) {
              common = a;
              break;
            }
        expect(common).toBe(1n);
        expect(leading.filter((c, j) => j !== k && cs.includes(c))).toEqual([]);
      }
    },
  );

  it('adds entries in the same place, leaves zeros out, and says when there are too many different ones', () => {
    const builder = new MatrixBuilder<string>();
    builder.add('a', 0, 1n);
    builder.add('a', 0, 1n);
    builder.add('a', 1, -2n);
    builder.add('b', 1, 0n);
    const matrix = builder.finish(2);
    expect(matrix.rows).toBe(1);
    expect(exactNullSpace(matrix)).toMatchObject([{ columns: [0, 1], values: [1n, 1n] }]);
    expect(exactNullSpace(new MatrixBuilder().finish(0))).toEqual([]);
    const many = new MatrixBuilder();
    expect(() => {
      for (let v = 1n; v <= 70_000n; v++) many.add(0, 0, v);
    }).toThrow(LimitError);
  });
});
