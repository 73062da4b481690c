/** Every charge that is found commutes with H as an explicit matrix on rings for which the statement is made. */
import { describe, expect, it } from 'vitest';
import type { Operator } from '../../src/algebra/operator.ts';
import { textFromWord } from '../../src/algebra/word.ts';
import { parseModel } from '../../src/model/formula.ts';
import { searchNow } from '../../src/search/search.ts';
import { commutatorEntries, type PlainDensity } from '../support/vectors.ts';

/** A multiple with integer coefficients: commuting does not depend on the factor. */
function plain(density: Operator): PlainDensity {
  return [...density.numerators].map(([word, value]) => [textFromWord(word), value] as const);
}

describe('charges as matrices on a ring', () => {
  it.each([
    { formula: 'XX + YY', cell: 1, range: 3 },
    { formula: '2 XX + 3 YY + 5 Z', cell: 1, range: 3 },
    { formula: 'XX + YY + ZZ', cell: 1, range: 4 },
    { formula: '2 XX + 3 YY - 1/2 ZZ', cell: 1, range: 4 },
    { formula: 'XX + YY + 0.7 ZZ + 1/3 (XY - YX)', cell: 1, range: 3 },
    { formula: 'ZZ + 3/2 X', cell: 1, range: 4 },
    { formula: 'XZ + ZX + 2 ZIZ + 3 Y', cell: 1, range: 4 },
    { formula: 'ZZX', cell: 1, range: 4 },
    { formula: 'XX + YY + 1/2 (IXX + IYY)', cell: 2, range: 2 },
    { formula: 'XIX + YIY + IXIX + IYIY + 3 ZZ', cell: 2, range: 2 },
  ])('$formula, $cell spins a cell, range $range', ({ formula, cell, range }) => {
    const h = parseModel(formula, { cell });
    const { charges, minimumCells } = searchNow(h, { range });
    expect(charges.length).toBeGreaterThan(0);
    for (const { density } of charges)
      expect(commutatorEntries(plain(h.density), plain(density), { cell, cells: minimumCells })).toBe(0);
  });

  it('sees a density that is not conserved', () => {
    const ring = { cell: 1, cells: 7 };
    expect(
      commutatorEntries(
        [
          ['XX', 1n],
          ['YY', 1n],
        ],
        [['Z', 1n]],
        ring,
      ),
    ).toBe(0);
    expect(
      commutatorEntries(
        [
          ['XX', 1n],
          ['YY', 2n],
        ],
        [['Z', 1n]],
        ring,
      ),
    ).toBeGreaterThan(0);
    // One coefficient of a charge of the XYZ chain, off by one.
    const charge: PlainDensity = [
      ['XYZ', 10n],
      ['ZYX', -10n],
      ['YZX', 6n],
      ['XZY', -6n],
      ['ZXY', 15n],
      ['YXZ', -15n],
    ];
    const xyz: PlainDensity = [
      ['XX', 2n],
      ['YY', 3n],
      ['ZZ', 5n],
    ];
    expect(commutatorEntries(xyz, charge, ring)).toBe(0);
    expect(commutatorEntries(xyz, [['XYZ', 11n], ...charge.slice(1)], ring)).toBeGreaterThan(0);
  });
});
