import type { CatalogueEntry } from './entry.ts';
import { CLASSIFICATION } from './sources.ts';

export const staggeredZ: CatalogueEntry = {
  id: 'staggered-z',
  name: 'XYZ chain that conserves a staggered magnetisation',
  cell: 1,
  formula: '-XX + YY + 2 ZZ + h Z',
  parameters: { h: '1' },
  status: 'non-integrable',
  published: [
    {
      statement: 'Three different couplings with a field: H is the only translation-invariant local charge.',
      source: CLASSIFICATION,
      basis: 'from memory',
    },
  ],
  computedCounts: [0, 1, 0, 0, 0, 0],
  caution: 'Σ (−1)^j Z_j is conserved (computed here) and rightly absent: it changes sign from cell to cell.',
};
