import type { FamilyEntry } from '../entry.ts';

export const antisymmetricExchangeFamily: FamilyEntry = {
  id: 'antisymmetric-exchange',
  name: 'XYZ chain with antisymmetric exchange',
  cell: 1,
  formula: 'Jx XX + Jy YY + Jz ZZ + D (XY - YX)',
  exceptionalWhere: ['D*(Jx - Jy)*Jz'],
  range: 3,
  assuming: ['Jx', 'Jy'],
  evidence: 'computed here',
  published: [],
};
