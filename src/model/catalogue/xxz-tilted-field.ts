import type { CatalogueEntry } from './entry.ts';
import { CLASSIFICATION } from './sources.ts';

export const xxzTiltedField: CatalogueEntry = {
  id: 'xxz-tilted-field',
  name: 'XXZ chain in a tilted field',
  cell: 1,
  formula: 'XX + YY + D ZZ + hx X + hz Z',
  parameters: { D: '1/2', hx: '1', hz: '3/7' },
  status: 'non-integrable',
  published: [
    {
      statement: 'Two equal couplings: integrable only with the field along the third axis.',
      source: CLASSIFICATION,
      basis: 'from memory',
    },
  ],
  computedCounts: [0, 1, 0, 0, 0, 0],
};
