/**
 * Numbers of charges of range exactly 1, 2, … that are published, or follow from a published theorem; each with its source.
 * The identity is not counted, H is.
 */
import { describe, expect, it } from 'vitest';
import { parseModel } from '../../src/model/formula.ts';
import { searchNow } from '../../src/search/search.ts';

interface Known {
  readonly title: string;
  readonly formula: string;
  readonly cell?: number;
  readonly counts: readonly number[];
  readonly source: string;
}

// Titles as read; where there is only a number, the title was not at hand.
const CLASSIFICATION =
  'Complete classification of integrability and non-integrability for spin-1/2 chain with symmetric nearest-neighbor interaction, arXiv:2411.02162 (2024)';
/** The charges are published; that there are no others was computed beforehand by two independent programs. */
const STRUCTURE =
  'Structure of the conservation laws in integrable spin chains, hep-th/9411045, Ann. Phys. 243, 299 (1995)';
const XYZ_FIELD =
  'Proof of the absence of local conserved quantities in the XYZ chain with a magnetic field, arXiv:1803.02637, EPL 128, 17002 (2019)';
const MIXED_ISING =
  'Proof of absence of local conserved quantities in the mixed-field Ising chain, arXiv:2307.16703 (2023)';
const NEXT_NEAREST =
  'Absence of local conserved quantity in the Heisenberg chain with next-nearest-neighbor interaction, arXiv:2403.04522 (2024)';
const ZIGZAG = 'arXiv:2501.15506, J. Stat. Phys. 192, 170 (2025)';
const HUBBARD = 'arXiv:2301.03621 and arXiv:2309.09354 (2023)';

const KNOWN: readonly Known[] = [
  { title: 'XX chain', formula: 'XX + YY', counts: [1, 2, 2, 2, 2, 2, 2], source: STRUCTURE },
  {
    title: 'XX chain, axial field',
    formula: 'XX + YY + 5/3 Z',
    counts: [1, 2, 2, 2, 2, 2],
    source: STRUCTURE,
  },
  {
    title: 'XX chain, field in the plane',
    formula: 'XX + YY + 2/7 X',
    counts: [0, 1, 0, 0, 0, 0, 0],
    source: CLASSIFICATION,
  },
  {
    title: 'XX chain, field in the plane, both axes',
    formula: 'XX + YY + 2 X - 3 Y',
    counts: [0, 1, 0, 0, 0, 0],
    source: CLASSIFICATION,
  },
  {
    title: 'XX chain, tilted field',
    formula: 'XX + YY + X + Z',
    counts: [0, 1, 0, 0, 0, 0],
    source: CLASSIFICATION,
  },
  {
    title: 'XY chain, axial field',
    formula: '2 XX + 3 YY + 5 Z',
    counts: [0, 2, 2, 2, 2, 2],
    source: STRUCTURE,
  },
  { title: 'XXX chain', formula: 'XX + YY + ZZ', counts: [3, 1, 1, 1, 1, 1], source: STRUCTURE },
  {
    title: 'XXX chain, field',
    formula: 'XX + YY + ZZ + 2 Z',
    counts: [1, 1, 1, 1, 1],
    source: CLASSIFICATION,
  },
  { title: 'XXZ chain', formula: 'XX + YY + 1/3 ZZ', counts: [1, 1, 1, 1, 1, 1], source: STRUCTURE },
  {
    title: 'XXZ chain, axial field',
    formula: 'XX + YY - 2.5 ZZ + 0.7 Z',
    counts: [1, 1, 1, 1, 1, 1],
    source: CLASSIFICATION,
  },
  {
    title: 'XXZ chain, field across the axis',
    formula: 'XX + YY + 1/2 ZZ + X',
    counts: [0, 1, 0, 0, 0],
    source: CLASSIFICATION,
  },
  { title: 'XYZ chain', formula: '2 XX + 3 YY + 5 ZZ', counts: [0, 1, 1, 1, 1, 1, 1], source: STRUCTURE },
  {
    title: 'XYZ chain, field on one axis',
    formula: '2 XX + 3 YY + 5 ZZ + 7 Z',
    counts: [0, 1, 0, 0, 0, 0, 0],
    source: XYZ_FIELD,
  },
  {
    title: 'XYZ chain, field in all directions',
    formula: '2 XX + 3 YY + 5 ZZ + 7 X + 11 Y + 13 Z',
    counts: [0, 1, 0, 0, 0, 0, 0],
    source: CLASSIFICATION,
  },
  {
    title: 'transverse-field Ising chain',
    formula: 'ZZ + 3/2 X',
    counts: [0, 2, 2, 2, 2, 2, 2],
    source: STRUCTURE,
  },
  {
    title: 'mixed-field Ising chain',
    formula: 'ZZ + 3/2 X + 1/5 Z',
    counts: [0, 1, 0, 0, 0, 0, 0],
    source: MIXED_ISING,
  },
  {
    title: 'Heisenberg chain, next-nearest neighbours',
    formula: 'XX + YY + ZZ + 1/2 (XIX + YIY + ZIZ)',
    counts: [3, 0, 1, 0, 0, 0],
    source: NEXT_NEAREST,
  },
  {
    title: 'integrable next-nearest-neighbour chain',
    formula: 'XZ + ZX + 2 ZIZ + 3 Y',
    counts: [0, 0, 1, 1, 1, 1],
    source: ZIGZAG,
  },
  {
    title: 'Hubbard chain as a ladder',
    formula: 'XIX + YIY + IXIX + IYIY + 3 ZZ',
    cell: 2,
    counts: [2, 1, 1, 1],
    source: HUBBARD,
  },
];

function count({ formula, cell = 1, counts }: Known): number[] {
  const { dimensionByRange } = searchNow(parseModel(formula, { cell }), { range: counts.length });
  return dimensionByRange.map((dimension, j) => dimension - (dimensionByRange[j - 1] ?? 0));
}

describe('published counts, at other couplings than the catalogue has', () => {
  it.each(KNOWN)('$title: $formula ($source)', (known) => {
    expect(count(known)).toEqual(known.counts);
  });
});
