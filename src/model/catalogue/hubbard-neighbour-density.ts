import type { CatalogueEntry } from './entry.ts';

export const hubbardNeighbourDensity: CatalogueEntry = {
  id: 'hubbard-neighbour-density',
  name: 'Hubbard chain with a neighbour density interaction',
  cell: 2,
  formula: 'XIX + YIY + IXIX + IYIY + U ZZ + V (Z_{j,a} + Z_{j,b})(Z_{j+1,a} + Z_{j+1,b})',
  parameters: { U: '1', V: '1/2' },
  status: 'open',
  published: [],
  computedCounts: [2, 1, 0, 0],
};
