import type { CatalogueEntry } from './entry.ts';
import { CONSERVATION_LAWS } from './sources.ts';

export const xxAxialField: CatalogueEntry = {
  id: 'xx-axial-field',
  name: 'XX chain in an axial field',
  cell: 1,
  formula: 'XX + YY + h Z',
  parameters: { h: '3/7' },
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
