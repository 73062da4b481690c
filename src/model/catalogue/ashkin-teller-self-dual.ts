import type { CatalogueEntry } from './entry.ts';

export const ashkinTellerSelfDual: CatalogueEntry = {
  id: 'ashkin-teller-self-dual',
  name: 'Ashkin–Teller ladder on the self-dual line',
  cell: 2,
  formula: 'ZIZ + IZIZ + l ZZZZ + X + IX + l XX',
  parameters: { l: '1/2' },
  status: 'integrable',
  published: [],
  computedCounts: [0, 2, 2, 2],
  caution:
    'The status is from memory: it is equivalent to an XXZ chain with alternating bonds read in pairs; the counts are computed here.',
};
