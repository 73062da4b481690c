import type { CatalogueEntry } from './entry.ts';
import { CLASSIFICATION } from './sources.ts';

export const xxzAxialField: CatalogueEntry = {
  id: 'xxz-axial-field',
  name: 'XXZ chain in an axial field',
  cell: 1,
  formula: 'XX + YY + D ZZ + h Z',
  parameters: { D: '1/2', h: '3/7' },
  status: 'integrable',
  published: [
    {
      statement: 'Integrable: two couplings equal and the field along the third axis.',
      source: CLASSIFICATION,
      basis: 'from memory',
    },
  ],
  computedCounts: [1, 1, 1, 1, 1, 1],
};
