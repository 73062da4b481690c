import type { CatalogueEntry } from './entry.ts';
import { CONSERVATION_LAWS } from './sources.ts';

export const staggeredFieldXx: CatalogueEntry = {
  id: 'staggered-field-xx',
  name: 'XX chain in a staggered field',
  cell: 2,
  formula: 'XX + YY + IXX + IYY + h (Z - IZ)',
  parameters: { h: '3/7' },
  status: 'integrable',
  published: [
    {
      statement:
        'Free fermions, by the same transformation as the uniform chain (two-spin cells: computed here).',
      source: CONSERVATION_LAWS,
      basis: 'from memory',
    },
  ],
  computedCounts: [1, 7, 8, 8],
};
