import type { CatalogueEntry } from './entry.ts';
import { HUBBARD_ALL, HUBBARD_COMPLETE, HUBBARD_FIRST } from './sources.ts';

export const hubbard: CatalogueEntry = {
  id: 'hubbard',
  name: 'Hubbard chain as a ladder of two spins a site',
  cell: 2,
  formula: 'XIX + YIY + IXIX + IYIY + U ZZ',
  parameters: { U: '1' },
  status: 'integrable',
  published: [
    { statement: 'The first charge beyond H, of range 3.', source: HUBBARD_FIRST, basis: 'from memory' },
    { statement: 'One charge a range, given in full.', source: HUBBARD_COMPLETE, basis: 'seen' },
    { statement: 'These are all, up to lower ones.', source: HUBBARD_ALL, basis: 'seen' },
  ],
  computedCounts: [2, 1, 1, 1],
};
