import type { CatalogueEntry } from './entry.ts';

export const classicalIsing: CatalogueEntry = {
  id: 'classical-ising',
  name: 'Classical Ising chain in a field',
  cell: 1,
  formula: 'ZZ + g Z',
  parameters: { g: '3/7' },
  status: 'special',
  published: [],
  computedCounts: [1, 1, 4, 10],
  caution:
    'All terms commute; the counts depend on the couplings (g = 1: 1, 1, 4, 14; g = 2: 1, 1, 6, 14; g = 0: 1, 3, 8, 28).',
};
