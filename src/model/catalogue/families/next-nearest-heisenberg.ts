import type { FamilyEntry } from '../entry.ts';
import { NEXT_NEAREST } from '../sources.ts';

export const nextNearestHeisenbergFamily: FamilyEntry = {
  id: 'next-nearest-heisenberg',
  name: 'Heisenberg chain with next-nearest neighbours',
  cell: 1,
  formula: 'J1 (XX + YY + ZZ) + J2 (XIX + YIY + ZIZ)',
  exceptionalWhere: ['J1*J2'],
  range: 5,
  assuming: ['J1^2 + J2^2'],
  evidence: 'published',
  published: [
    {
      statement: 'Both couplings non-zero: no local charges besides the symmetries and H.',
      source: NEXT_NEAREST,
      basis: 'seen',
    },
  ],
};
