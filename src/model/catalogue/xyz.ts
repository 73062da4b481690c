import type { CatalogueEntry } from './entry.ts';
import { CLASSIFICATION, CONSERVATION_LAWS } from './sources.ts';

export const xyz: CatalogueEntry = {
  id: 'xyz',
  name: 'XYZ chain',
  cell: 1,
  formula: 'Jx XX + Jy YY + Jz ZZ',
  parameters: { Jx: '2', Jy: '3', Jz: '5' },
  status: 'integrable',
  published: [
    {
      statement: 'One local charge a range, by the boost ladder; explicit forms are given.',
      source: CONSERVATION_LAWS,
      basis: 'from memory',
    },
    { statement: 'Integrable without a field.', source: CLASSIFICATION, basis: 'from memory' },
  ],
  computedCounts: [0, 1, 1, 1, 1, 1, 1, 1],
};
