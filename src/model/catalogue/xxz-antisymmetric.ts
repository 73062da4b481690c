import type { CatalogueEntry } from './entry.ts';
import { CLASSIFICATION } from './sources.ts';

export const xxzAntisymmetric: CatalogueEntry = {
  id: 'xxz-antisymmetric',
  name: 'XXZ chain with antisymmetric exchange along its axis',
  cell: 1,
  formula: 'XX + YY + Jz ZZ + D (XY - YX)',
  parameters: { Jz: '1/2', D: '1' },
  status: 'integrable',
  published: [
    {
      statement:
        'A rotation that grows from site to site removes the antisymmetric part and leaves an XXZ chain (common practice, from memory); the XXZ chain is integrable.',
      source: CLASSIFICATION,
      basis: 'from memory',
    },
  ],
  computedCounts: [1, 1, 1, 1],
};
