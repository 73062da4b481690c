import type { CatalogueEntry } from './entry.ts';

export const ashkinTeller: CatalogueEntry = {
  id: 'ashkin-teller',
  name: 'Ashkin–Teller ladder off the self-dual line',
  cell: 2,
  formula: 'ZIZ + IZIZ + l ZZZZ + g (X + IX + l XX)',
  parameters: { l: '1/2', g: '2/3' },
  status: 'open',
  published: [],
  computedCounts: [0, 1, 0, 0],
};
