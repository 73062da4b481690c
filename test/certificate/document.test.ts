import { expect, test } from 'vitest';
import { statementOf } from '../../src/certificate/document.ts';
import { statement } from '../../src/check/exhaustive.ts';
import { searchNow } from '../../src/search/search.ts';
import { property } from '../support/random.ts';

property('the writer and the checker word a claim alike', 20, (random) => {
  const cell = random.integer(1, 2);
  const result = searchNow(random.hamiltonian({ cell, range: 2 }), { range: random.integer(1, 2) });
  expect(statementOf(result)).toBe(
    statement({
      cell,
      range: result.range,
      dimensions: result.dimensionByRange,
      rings: result.minimumCells,
    }),
  );
});

test('one of each', () => {
  expect(statement({ cell: 1, range: 1, dimensions: [3], rings: 3 })).toContain('of 1 spin 1/2, ');
  expect(statement({ cell: 1, range: 1, dimensions: [3], rings: 3 })).toContain('at most 1 cell form');
});
