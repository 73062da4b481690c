import type { CatalogueEntry } from './entry.ts';
import { HEISENBERG_CHARGES } from './sources.ts';

export const heisenberg: CatalogueEntry = {
  id: 'heisenberg',
  name: 'Heisenberg chain (XXX)',
  cell: 1,
  formula: 'XX + YY + ZZ',
  parameters: {},
  status: 'integrable',
  published: [
    {
      statement: 'Closed form of the charge of every range, with Catalan-triangle coefficients.',
      source: HEISENBERG_CHARGES,
      basis: 'from memory',
    },
  ],
  computedCounts: [3, 1, 1, 1, 1, 1],
};
