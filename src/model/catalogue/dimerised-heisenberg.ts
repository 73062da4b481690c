import type { CatalogueEntry } from './entry.ts';

export const dimerisedHeisenberg: CatalogueEntry = {
  id: 'dimerised-heisenberg',
  name: 'Dimerised Heisenberg chain',
  cell: 2,
  formula: 'XX + YY + ZZ + d (IXX + IYY + IZZ)',
  parameters: { d: '1/2' },
  status: 'open',
  published: [],
  computedCounts: [3, 1, 0, 0],
};
