import type { FamilyEntry } from '../entry.ts';

export const foldedXxzFamily: FamilyEntry = {
  id: 'folded-xxz',
  name: 'Folded XXZ chain with a free four-spin coupling',
  cell: 1,
  formula: 'XX + YY + c (ZXXZ + ZYYZ)',
  exceptionalWhere: ['c*(c - 1)'],
  range: 5,
  assuming: [],
  evidence: 'computed here',
  published: [],
};
