import type { CatalogueEntry } from './entry.ts';
import { CLASSIFICATION } from './sources.ts';

export const xyzGeneralField: CatalogueEntry = {
  id: 'xyz-general-field',
  name: 'XYZ chain in a general field',
  cell: 1,
  formula: 'Jx XX + Jy YY + Jz ZZ + hx X + hy Y + hz Z',
  parameters: { Jx: '2', Jy: '3', Jz: '5', hx: '7', hy: '11', hz: '13' },
  status: 'non-integrable',
  published: [
    {
      statement:
        'Three different couplings: integrable only without a field; otherwise H is the only local charge.',
      source: CLASSIFICATION,
      basis: 'from memory',
    },
  ],
  computedCounts: [0, 1, 0, 0, 0, 0, 0],
};
