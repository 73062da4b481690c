import type { CatalogueEntry } from './entry.ts';

export const heisenbergLadder: CatalogueEntry = {
  id: 'heisenberg-ladder',
  name: 'Heisenberg ladder',
  cell: 2,
  formula: 'XIX + YIY + ZIZ + IXIX + IYIY + IZIZ + R (XX + YY + ZZ)',
  parameters: { R: '1/2' },
  status: 'open',
  published: [],
  computedCounts: [3, 1, 0],
};
