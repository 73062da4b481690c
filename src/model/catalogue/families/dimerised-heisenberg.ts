import type { FamilyEntry } from '../entry.ts';

export const dimerisedHeisenbergFamily: FamilyEntry = {
  id: 'dimerised-heisenberg',
  name: 'Dimerised Heisenberg chain',
  cell: 2,
  formula: 'XX + YY + ZZ + d (IXX + IYY + IZZ)',
  exceptionalWhere: ['d*(d - 1)'],
  range: 3,
  assuming: [],
  evidence: 'computed here',
  published: [],
};
