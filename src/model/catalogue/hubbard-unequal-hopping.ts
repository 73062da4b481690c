import type { CatalogueEntry } from './entry.ts';

export const hubbardUnequalHopping: CatalogueEntry = {
  id: 'hubbard-unequal-hopping',
  name: 'Hubbard chain with unequal hopping',
  cell: 2,
  formula: 'XIX + YIY + t (IXIX + IYIY) + U ZZ',
  parameters: { t: '1/2', U: '1' },
  status: 'open',
  published: [],
  computedCounts: [2, 1, 0, 0],
};
