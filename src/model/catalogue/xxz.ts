import type { CatalogueEntry } from './entry.ts';
import { CLASSIFICATION, CONSERVATION_LAWS } from './sources.ts';

export const xxz: CatalogueEntry = {
  id: 'xxz',
  name: 'XXZ chain',
  cell: 1,
  formula: 'XX + YY + D ZZ',
  parameters: { D: '1/2' },
  status: 'integrable',
  published: [
    {
      statement: 'One local charge a range from range 2 on; the total Z besides.',
      source: CONSERVATION_LAWS,
      basis: 'from memory',
    },
    { statement: 'Integrable without a field.', source: CLASSIFICATION, basis: 'from memory' },
  ],
  computedCounts: [1, 1, 1, 1, 1, 1],
};
