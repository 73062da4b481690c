import type { FamilyEntry } from '../entry.ts';
import { MIXED_ISING } from '../sources.ts';

export const isingInAFieldFamily: FamilyEntry = {
  id: 'ising-in-a-field',
  name: 'Ising chain in a field',
  cell: 1,
  formula: 'ZZ + g X + h Z',
  exceptionalWhere: ['g*h'],
  range: 3,
  assuming: [],
  evidence: 'published',
  published: [
    {
      statement: 'Both fields non-zero: only H. One of them zero: free fermions, or classical.',
      source: MIXED_ISING,
      basis: 'seen',
    },
  ],
};
