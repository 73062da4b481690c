import { describe, expect, test } from 'vitest';
import { parseModel } from '../../src/model/formula.ts';
import { resultToJson } from '../../src/report/json.ts';
import { labelsOf } from '../../src/report/labels.ts';
import { latexResult } from '../../src/report/latex.ts';
import { reportPage } from '../../src/report/page.ts';
import { printResult } from '../../src/report/text.ts';
import { searchNow } from '../../src/search/search.ts';

describe('what a charge owes to symmetries stands beside it', () => {
  // Heisenberg chain: three components of the spin, H, and the next of the ladder, all under SU(2).
  const heisenberg = searchNow(parseModel('XX + YY + ZZ'), { range: 3 });

  test('in text, JSON, LaTeX and the page', () => {
    expect(printResult(heisenberg)).toMatch(
      /Q1 {2}range 1, even, 1 string\n {6}total spin along X; spin 1 under SU\(2\)\n {6}Σ X\n/,
    );
    const { charges } = resultToJson(heisenberg) as { charges: { label: { kind: string } | null }[] };
    expect(charges.map((q) => q.label?.kind)).toEqual(['spin', 'spin', 'spin', 'hamiltonian', 'new']);
    expect(latexResult(heisenberg)).toContain('The Hamiltonian; spin 0 under SU(2).');
    expect(reportPage(heisenberg)).toContain('<p>Kind: total spin along Z; spin 1 under SU(2).</p>');
  });

  test('a long list is left without, and it is said where to find them', () => {
    const many = searchNow(parseModel('ZZ'), { range: 5 });
    expect(many.charges.length).toBeGreaterThan(40);
    expect(labelsOf(many).every((label) => label === null)).toBe(true);
    expect(printResult(many)).toContain('holdfast algebra');
    expect(printResult(many)).not.toContain('strictly local');
  });
});
