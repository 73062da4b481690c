import type { CatalogueEntry } from './entry.ts';
import { CLASSIFICATION } from './sources.ts';

export const xxPlanarField: CatalogueEntry = {
  id: 'xx-planar-field',
  name: 'XX chain with a field in the plane of its couplings',
  cell: 1,
  formula: 'XX + YY + h X',
  parameters: { h: '1' },
  status: 'non-integrable',
  published: [
    {
      statement:
        'Rank-2 interaction: integrable only when the field has no component in the plane; otherwise H is the only local charge.',
      source: CLASSIFICATION,
      basis: 'from memory',
    },
  ],
  computedCounts: [0, 1, 0, 0, 0, 0, 0, 0],
};
