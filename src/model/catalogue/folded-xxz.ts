import type { CatalogueEntry } from './entry.ts';

export const foldedXxz: CatalogueEntry = {
  id: 'folded-xxz',
  name: 'Folded XXZ chain',
  cell: 1,
  formula: 'XX + YY + ZXXZ + ZYYZ',
  parameters: {},
  status: 'open',
  published: [],
  computedCounts: [1, 1, 1, 1, 1, 1, 1, 1],
};
