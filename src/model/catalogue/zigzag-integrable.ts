import type { CatalogueEntry } from './entry.ts';
import { ZIGZAG } from './sources.ts';

export const zigzagIntegrable: CatalogueEntry = {
  id: 'zigzag-integrable',
  name: 'Integrable next-nearest-neighbour chain',
  cell: 1,
  formula: 'J1 (XZ + ZX) + J2 ZIZ + h Y',
  parameters: { J1: '2', J2: '3', h: '5' },
  status: 'integrable',
  published: [
    {
      statement:
        'One of the two integrable families of inversion-symmetric chains with nearest and next-nearest neighbours.',
      source: ZIGZAG,
      basis: 'seen',
    },
  ],
  computedCounts: [0, 0, 1, 1, 1, 1, 1, 1],
};
