import type { CatalogueEntry } from './entry.ts';
import { ZIGZAG } from './sources.ts';

export const annni: CatalogueEntry = {
  id: 'annni',
  name: 'Ising chain with next-nearest neighbours in a transverse field',
  cell: 1,
  formula: 'ZZ + k ZIZ + g X',
  parameters: { k: '1/2', g: '2/3' },
  status: 'non-integrable',
  published: [
    {
      statement:
        'Inversion-symmetric chains with next-nearest neighbours: all but two families, which do not contain this one, have no further local charges.',
      source: ZIGZAG,
      basis: 'seen',
    },
  ],
  computedCounts: [0, 0, 1, 0, 0, 0, 0],
};
