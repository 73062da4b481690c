import type { CatalogueEntry } from './entry.ts';
import { CONSERVATION_LAWS } from './sources.ts';

export const transverseIsing: CatalogueEntry = {
  id: 'transverse-ising',
  name: 'Ising chain in a transverse field',
  cell: 1,
  formula: 'ZZ + g X',
  parameters: { g: '2/3' },
  status: 'integrable',
  published: [
    {
      statement: 'Free fermions: two charges a range in closed form.',
      source: CONSERVATION_LAWS,
      basis: 'from memory',
    },
  ],
  computedCounts: [0, 2, 2, 2, 2, 2, 2, 2],
};
