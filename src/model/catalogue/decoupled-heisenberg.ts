import type { CatalogueEntry } from './entry.ts';

export const decoupledHeisenberg: CatalogueEntry = {
  id: 'decoupled-heisenberg',
  name: 'Two decoupled Heisenberg chains on even and odd sites',
  cell: 1,
  formula: 'XIX + YIY + ZIZ',
  parameters: {},
  status: 'special',
  published: [],
  computedCounts: [3, 0, 1, 0, 1, 0, 1],
  caution:
    'Two copies of an integrable chain; a translation by one site exchanges them, so only sums over both are counted.',
};
