import type { FamilyEntry } from '../entry.ts';

export const fourSpinLadderFamily: FamilyEntry = {
  id: 'four-spin-ladder',
  name: 'Two Heisenberg legs with a four-spin coupling',
  cell: 2,
  formula:
    'XIX + YIY + ZIZ + IXIX + IYIY + IZIZ + K (X_{j,a} X_{j+1,a} + Y_{j,a} Y_{j+1,a} + Z_{j,a} Z_{j+1,a})(X_{j,b} X_{j+1,b} + Y_{j,b} Y_{j+1,b} + Z_{j,b} Z_{j+1,b})',
  exceptionalWhere: ['K*(K - 1)*(K + 1)'],
  range: 3,
  assuming: [],
  evidence: 'computed here',
  published: [],
};
