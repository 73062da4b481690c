import type { CatalogueEntry } from './entry.ts';

export const xyzAntisymmetric: CatalogueEntry = {
  id: 'xyz-antisymmetric',
  name: 'XYZ chain with antisymmetric exchange',
  cell: 1,
  formula: 'Jx XX + Jy YY + Jz ZZ + D (XY - YX)',
  parameters: { Jx: '2', Jy: '3', Jz: '5', D: '1' },
  status: 'open',
  published: [],
  computedCounts: [0, 1, 0, 0, 0, 0],
};
