import type { CatalogueEntry } from './entry.ts';

export const blockade: CatalogueEntry = {
  id: 'blockade',
  name: 'Spin flips between two neighbours that are up',
  cell: 1,
  formula: '(1 + Z_0) X_1 (1 + Z_2)',
  parameters: {},
  status: 'special',
  published: [],
  computedCounts: [0, 1, 2, 1, 4, 16, 38],
  caution: 'Written in the full space: charges that act only outside the constrained sector are counted.',
};
