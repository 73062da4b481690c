import type { FamilyEntry } from '../entry.ts';
import { CLASSIFICATION } from '../sources.ts';

export const xyzInAFieldFamily: FamilyEntry = {
  id: 'xyz-in-a-field',
  name: 'XYZ chain in a field, three non-zero couplings',
  cell: 1,
  formula: 'Jx XX + Jy YY + Jz ZZ + hx X + hy Y + hz Z',
  exceptionalWhere: ['hx*(Jy - Jz)', 'hy*(Jz - Jx)', 'hz*(Jx - Jy)'],
  range: 3,
  assuming: ['Jx', 'Jy', 'Jz'],
  evidence: 'published',
  published: [
    {
      statement:
        'Three non-zero couplings: integrable without a field, or with two couplings equal and the field along the third axis, or with all couplings equal.',
      source: CLASSIFICATION,
      basis: 'from memory',
    },
  ],
};
