import type { CatalogueEntry } from './entry.ts';
import { CONSERVATION_LAWS } from './sources.ts';

export const dimerisedXx: CatalogueEntry = {
  id: 'dimerised-xx',
  name: 'Dimerised XX chain',
  cell: 2,
  formula: 'XX + YY + d (IXX + IYY)',
  parameters: { d: '1/2' },
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
