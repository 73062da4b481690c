import type { CatalogueEntry } from './entry.ts';
import { ZIGZAG } from './sources.ts';

export const zigzagClassical: CatalogueEntry = {
  id: 'zigzag-classical',
  name: 'Classical Ising chain with next-nearest neighbours',
  cell: 1,
  formula: 'J1 ZZ + J2 ZIZ + h Z',
  parameters: { J1: '2', J2: '3', h: '5/7' },
  status: 'special',
  published: [
    {
      statement:
        'The classical one of the two integrable families of inversion-symmetric chains with nearest and next-nearest neighbours.',
      source: ZIGZAG,
      basis: 'seen',
    },
  ],
  computedCounts: [1, 1, 2, 4],
  caution: 'All terms commute: every Z string is conserved, and more with special couplings.',
};
