import type { CatalogueEntry } from './entry.ts';
import { CONSERVATION_LAWS } from './sources.ts';

export const xx: CatalogueEntry = {
  id: 'xx',
  name: 'XX chain',
  cell: 1,
  formula: 'XX + YY',
  parameters: {},
  status: 'integrable',
  published: [
    {
      statement: 'Free fermions: two charges a range in closed form.',
      source: CONSERVATION_LAWS,
      basis: 'from memory',
    },
  ],
  computedCounts: [1, 2, 2, 2, 2, 2, 2, 2],
};
