import type { FamilyEntry } from '../entry.ts';
import { ZIGZAG } from '../sources.ts';

export const nextNearestIsingFamily: FamilyEntry = {
  id: 'next-nearest-ising',
  name: 'Ising chain with next-nearest neighbours in a transverse field',
  cell: 1,
  formula: 'ZZ + k ZIZ + g X',
  exceptionalWhere: ['k*g'],
  range: 4,
  assuming: [],
  evidence: 'published',
  published: [
    {
      statement: 'Both couplings non-zero: in neither of the two integrable families.',
      source: ZIGZAG,
      basis: 'seen',
    },
  ],
};
