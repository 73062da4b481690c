import type { CatalogueEntry } from './entry.ts';
import { MIXED_ISING } from './sources.ts';

export const mixedIsing: CatalogueEntry = {
  id: 'mixed-ising',
  name: 'Ising chain in a mixed field',
  cell: 1,
  formula: 'ZZ + g X + h Z',
  parameters: { g: '2/3', h: '3/7' },
  status: 'non-integrable',
  published: [
    {
      statement:
        'All three couplings non-zero: only H and the identity up to half the system, for periodic and for open chains.',
      source: MIXED_ISING,
      basis: 'seen',
    },
  ],
  computedCounts: [0, 1, 0, 0, 0, 0, 0, 0],
  caution:
    'The range-3 condition of injective chains is met and decides nothing here: the interaction is not injective.',
};
