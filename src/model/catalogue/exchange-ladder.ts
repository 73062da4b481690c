import type { CatalogueEntry } from './entry.ts';
import { SINGLE_LAW } from './sources.ts';

export const exchangeLadder: CatalogueEntry = {
  id: 'exchange-ladder',
  name: 'SU(4) ladder',
  cell: 2,
  formula:
    'XIX + YIY + ZIZ + IXIX + IYIY + IZIZ + (X_{j,a} X_{j+1,a} + Y_{j,a} Y_{j+1,a} + Z_{j,a} Z_{j+1,a})(X_{j,b} X_{j+1,b} + Y_{j,b} Y_{j+1,b} + Z_{j,b} Z_{j+1,b})',
  parameters: {},
  status: 'integrable',
  published: [
    {
      statement:
        'The permutation of neighbouring four-level cells satisfies the condition of the boost ladder (the model from memory, the condition computed here).',
      source: SINGLE_LAW,
      basis: 'seen',
    },
  ],
  computedCounts: [15, 1, 1],
};
