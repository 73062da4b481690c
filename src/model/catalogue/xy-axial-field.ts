import type { CatalogueEntry } from './entry.ts';
import { CONSERVATION_LAWS } from './sources.ts';

export const xyAxialField: CatalogueEntry = {
  id: 'xy-axial-field',
  name: 'XY chain in an axial field',
  cell: 1,
  formula: 'a XX + b YY + h Z',
  parameters: { a: '2', b: '1/3', h: '3/7' },
  status: 'integrable',
  published: [
    {
      statement: 'Free fermions: two charges a range in closed form.',
      source: CONSERVATION_LAWS,
      basis: 'from memory',
    },
  ],
  computedCounts: [0, 2, 2, 2, 2, 2],
};
