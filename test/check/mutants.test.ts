/**
 * Mutants of valid certificates: whatever is changed, the checker accepts nothing untrue. A mutant that is accepted has its claim
 * decided again by a search and an exact bracket of the library, which the checker knows nothing of.
 */
import { afterAll, describe, expect, test } from 'vitest';
import { Operator } from '../../src/algebra/operator.ts';
import { rationalFromText } from '../../src/algebra/rational.ts';
import { wordFromText } from '../../src/algebra/word.ts';
import { certificateNow } from '../../src/certificate/certificate.ts';
import { checkNow } from '../../src/check/check.ts';
import { statement } from '../../src/check/exhaustive.ts';
import { Chain } from '../../src/lattice/chain.ts';
import { parseModel } from '../../src/model/formula.ts';
import { hamiltonianOf } from '../../src/model/hamiltonian.ts';
import { searchNow } from '../../src/search/search.ts';
import { type Document, mutantOf, type Term } from '../support/mutants.ts';
import { property } from '../support/random.ts';

const MODELS = [
  ['mixed-field Ising', 'ZZ + 2 X + 3 Z', 1, 4],
  ['transverse Ising', 'ZZ + 1/2 X', 1, 4],
  ['XX', 'XX + YY', 1, 3],
  ['XXX', 'XX + YY + ZZ', 1, 4],
  ['XYZ', 'XX + 2 YY - 3/5 ZZ', 1, 4],
  ['XYZ in a field', '2 XX + 3 YY + 5 ZZ + 7 X + 11 Y + 13 Z', 1, 4],
  ['antisymmetric exchange', 'XX + 2 YY + 4 ZZ + 3 XY - 3 YX', 1, 3],
  ['next-nearest neighbours', 'XX + YY + ZZ + 1/2 (XIX + YIY + ZIZ)', 1, 4],
  ['three spins', 'ZZX', 1, 4],
  ['Hubbard ladder', 'XIXI + YIYI + IXIX + IYIY + 3 ZZ', 2, 2],
] as const;

/** Is what an accepted document claims true? By the search and the exact bracket of the library. */
function isTrue(d: Document): boolean {
  const chain = new Chain(d.model.cell);
  const operator = (terms: Term[]) =>
    Operator.fromTerms(terms.map(([word, c]) => [wordFromText(word), rationalFromText(c)] as const));
  const h = hamiltonianOf(chain, operator(d.model.terms));
  const result = searchNow(h, { range: d.claim.range });
  return (
    JSON.stringify(d.claim.dimensions) === JSON.stringify(result.dimensionByRange) &&
    d.claim.rings === result.minimumCells &&
    d.claim.statement === statement({ cell: d.model.cell, ...d.claim }) &&
    d.charges.length === result.charges.length &&
    d.charges.every(
      (q) =>
        chain.bracket(h.density, operator(q.terms)).isZero() && chain.rangeOf(operator(q.terms)) === q.range,
    )
  );
}

const counts = { mutants: 0, rejected: 0, malformed: 0, accepted: 0 };

describe.each(MODELS)('%s', (name, formula, cell, range) => {
  const original = certificateNow(searchNow(parseModel(formula, { cell }), { range }));

  test('the original is accepted', () => {
    expect(checkNow(original).status).toBe('accepted');
  });

  property(`no mutant is accepted and untrue (${name})`, 230, (random) => {
    const mutant = mutantOf(original, random);
    counts.mutants++;
    const verdict = checkNow(mutant);
    counts[verdict.status]++;
    if (verdict.status === 'accepted') {
      const document = JSON.parse(mutant) as Document;
      expect(isTrue(document), mutant).toBe(true);
      expect(verdict.statement).toBe(document.claim.statement);
    } else expect(verdict.reason).not.toBe('');
  });
});

afterAll(() => {
  if (process.env['HOLDFAST_SEED'] !== undefined) return;
  expect(counts.mutants).toBeGreaterThanOrEqual(2_000);
  // Both ways of refusing are exercised; few mutants are true, such as a charge times a number.
  expect(counts.rejected).toBeGreaterThan(800);
  expect(counts.malformed).toBeGreaterThan(400);
  expect(counts.accepted).toBeLessThan(counts.mutants / 5);
});
