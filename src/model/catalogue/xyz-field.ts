import type { CatalogueEntry } from './entry.ts';
import { XYZ_FIELD } from './sources.ts';

export const xyzField: CatalogueEntry = {
  id: 'xyz-field',
  name: 'XYZ chain in a field along one axis',
  cell: 1,
  formula: 'Jx XX + Jy YY + Jz ZZ + h Z',
  parameters: { Jx: '2', Jy: '3', Jz: '5', h: '7' },
  status: 'non-integrable',
  published: [
    {
      statement: 'No local charge of range 3 up to half the ring, for non-zero couplings, Jx ≠ Jy and h ≠ 0.',
      source: XYZ_FIELD,
      basis: 'from memory',
    },
  ],
  computedCounts: [0, 1, 0, 0, 0, 0, 0],
};
