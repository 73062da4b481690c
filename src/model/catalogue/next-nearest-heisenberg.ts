import type { CatalogueEntry } from './entry.ts';
import { NEXT_NEAREST } from './sources.ts';

export const nextNearestHeisenberg: CatalogueEntry = {
  id: 'next-nearest-heisenberg',
  name: 'Heisenberg chain with next-nearest neighbours (J1–J2)',
  cell: 1,
  formula: 'J1 (XX + YY + ZZ) + J2 (XIX + YIY + ZIZ)',
  parameters: { J1: '1', J2: '1/2' },
  status: 'non-integrable',
  published: [
    { statement: 'No local charges besides the symmetries and H.', source: NEXT_NEAREST, basis: 'seen' },
  ],
  computedCounts: [3, 0, 1, 0, 0, 0],
};
