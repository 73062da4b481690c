import type { CatalogueEntry } from './entry.ts';
import { THREE_SPIN } from './sources.ts';

export const threeSpin: CatalogueEntry = {
  id: 'three-spin',
  name: 'Three-spin chain ZZX',
  cell: 1,
  formula: 'ZZX',
  parameters: {},
  status: 'special',
  published: [
    {
      statement: 'Free fermions behind strictly local symmetries.',
      source: THREE_SPIN,
      basis: 'from memory',
    },
  ],
  computedCounts: [0, 0, 2, 1, 3, 4, 9, 16],
  caution: 'Strictly local symmetries make the counts grow with the range.',
};
