import type { CatalogueEntry } from './entry.ts';
import { CLASSIFICATION } from './sources.ts';

export const staggeredXxBond: CatalogueEntry = {
  id: 'staggered-xx-bond',
  name: 'XZ chain that conserves a staggered bond',
  cell: 1,
  formula: 'XZ + ZX + h X',
  parameters: { h: '1' },
  status: 'non-integrable',
  published: [
    {
      statement:
        'Rank-2 interaction with a field in its plane, after a rotation: H is the only translation-invariant local charge.',
      source: CLASSIFICATION,
      basis: 'from memory',
    },
  ],
  computedCounts: [0, 1, 0, 0, 0, 0],
  caution:
    'Σ (−1)^j X_j X_{j+1} is conserved (computed here) and rightly absent: it changes sign from cell to cell.',
};
