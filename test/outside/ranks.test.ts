/**
 * Ranks of the same equations by general-purpose libraries: PARI/GP and SymPy over the rationals, FLINT modulo a prime that the
 * search does not use. The matrix is built letter by letter, without the library. A library that is not installed is
 * named in the output and left out.
 */
import { describe, expect, it } from 'vitest';
import { findLibraries } from '../../bench/external/libraries.ts';
import { type PlainTerm, plainMatrix } from '../../bench/external/matrix.ts';
import { textFromWord } from '../../src/algebra/word.ts';
import { CATALOGUE, catalogueModel } from '../../src/model/catalogue/index.ts';
import { parseModel } from '../../src/model/formula.ts';
import { searchNow } from '../../src/search/search.ts';

interface System {
  readonly title: string;
  /** Written out twice, so that the parser takes no part in the matrix. */
  readonly terms: readonly PlainTerm[];
  readonly formula: string;
  readonly cell: number;
  readonly range: number;
}

const SYSTEMS: readonly System[] = [
  {
    title: 'XX',
    terms: [
      [1, 'XX'],
      [1, 'YY'],
    ],
    formula: 'XX + YY',
    cell: 1,
    range: 4,
  },
  {
    title: 'XXX',
    terms: [
      [1, 'XX'],
      [1, 'YY'],
      [1, 'ZZ'],
    ],
    formula: 'XX + YY + ZZ',
    cell: 1,
    range: 4,
  },
  {
    title: 'XYZ in a field',
    terms: [
      [2, 'XX'],
      [3, 'YY'],
      [5, 'ZZ'],
      [7, 'X'],
      [11, 'Y'],
      [13, 'Z'],
    ],
    formula: '2 XX + 3 YY + 5 ZZ + 7 X + 11 Y + 13 Z',
    cell: 1,
    range: 4,
  },
  {
    title: 'transverse Ising',
    terms: [
      [2, 'ZZ'],
      [3, 'X'],
    ],
    formula: '2 ZZ + 3 X',
    cell: 1,
    range: 4,
  },
  {
    title: 'classical',
    terms: [
      [1, 'ZZ'],
      [2, 'Z'],
    ],
    formula: 'ZZ + 2 Z',
    cell: 1,
    range: 4,
  },
  {
    title: 'antisymmetric exchange',
    terms: [
      [1, 'XX'],
      [1, 'YY'],
      [4, 'ZZ'],
      [3, 'XY'],
      [-3, 'YX'],
    ],
    formula: 'XX + YY + 4 ZZ + 3 XY - 3 YX',
    cell: 1,
    range: 4,
  },
  {
    title: 'next-nearest neighbours',
    terms: [
      [2, 'XX'],
      [2, 'YY'],
      [2, 'ZZ'],
      [1, 'XIX'],
      [1, 'YIY'],
      [1, 'ZIZ'],
    ],
    formula: 'XX + YY + ZZ + 1/2 (XIX + YIY + ZIZ)',
    cell: 1,
    range: 4,
  },
  { title: 'three spins', terms: [[1, 'ZZX']], formula: 'ZZX', cell: 1, range: 4 },
  {
    title: 'Hubbard ladder',
    terms: [
      [1, 'XIX'],
      [1, 'YIY'],
      [1, 'IXIX'],
      [1, 'IYIY'],
      [3, 'ZZ'],
    ],
    formula: 'XIX + YIY + IXIX + IYIY + 3 ZZ',
    cell: 2,
    range: 2,
  },
  {
    title: 'dimerised',
    terms: [
      [2, 'XX'],
      [2, 'YY'],
      [1, 'IXX'],
      [1, 'IYY'],
    ],
    formula: 'XX + YY + 1/2 (IXX + IYY)',
    cell: 2,
    range: 2,
  },
];

const libraries = await findLibraries(['PARI', 'SymPy', 'FLINT']);
for (const entry of libraries)
  if ('missing' in entry) console.warn(`${entry.name} is left out: ${entry.missing}`);

describe.each(
  libraries.map((entry) => ({ ...entry, label: 'missing' in entry ? entry.name : entry.library.name })),
)('ranks by $label', (entry) => {
  it.skipIf('missing' in entry).each(SYSTEMS)(
    '$title: $formula, range $range',
    async ({ terms, formula, cell, range }) => {
      if ('missing' in entry) return;
      const matrix = plainMatrix(terms, cell, range);
      const result = searchNow(parseModel(formula, { cell }), { range });
      expect(matrix.columns).toBe(result.candidates);
      const answer = await entry.library.rank(matrix, { seconds: 50, gigabytes: 2, prime: 1_000_003 });
      expect(answer).toMatchObject({ rank: result.candidates - result.charges.length });
    },
  );
});

describe('ranks of the catalogue by FLINT', () => {
  const flint = libraries.find((entry) => 'library' in entry && entry.library.name === 'FLINT');
  it.skipIf(flint === undefined).each(CATALOGUE)('$id: $formula', async (entry) => {
    const h = catalogueModel(entry);
    const { cell } = h.chain;
    const range = cell === 1 ? 4 : 2;
    const terms = [...h.density.numerators].map(
      ([word, value]) => [Number(value), textFromWord(word)] as const,
    );
    if (flint === undefined || 'missing' in flint) return;
    const matrix = plainMatrix(terms, cell, range);
    const answer = await flint.library.rank(matrix, { seconds: 50, gigabytes: 2, prime: 1_000_003 });
    expect(answer).toMatchObject({ rank: matrix.columns - searchNow(h, { range }).charges.length });
  });
});
