/** Certificates of the kind `growth`: they prove what the search finds, and nothing that is not so. */
import { describe, expect, test } from 'vitest';
import { Operator } from '../../src/algebra/operator.ts';
import { rationalFromText } from '../../src/algebra/rational.ts';
import { wordFromText } from '../../src/algebra/word.ts';
import { certificateNow, certificateOf } from '../../src/certificate/certificate.ts';
import { checkNow } from '../../src/check/check.ts';
import { statement } from '../../src/check/exhaustive.ts';
import { LimitError } from '../../src/errors.ts';
import { Chain } from '../../src/lattice/chain.ts';
import { parseModel } from '../../src/model/formula.ts';
import { hamiltonianOf } from '../../src/model/hamiltonian.ts';
import { searchNow } from '../../src/search/search.ts';
import { type Document, mutantOf, type Term } from '../support/mutants.ts';
import { property } from '../support/random.ts';

const MODELS = [
  ['XYZ', 'XX + 2 YY - 3/5 ZZ', 1, 5],
  ['XYZ in a field', '2 XX + 3 YY + 5 ZZ + 7 X + 11 Y + 13 Z', 1, 5],
  ['XX in an axial field', 'XX + YY + Z', 1, 4],
  ['XX', 'XX + YY', 1, 4],
  ['antisymmetric exchange', 'XX + 2 YY + 4 ZZ + 3 XY - 3 YX', 1, 4],
  ['one range', 'XX + YY + ZZ', 1, 1],
] as const;

const HUBBARD = 'XIXI + YIYI + IXIX + IYIY + 3 ZZ';

const proofOf = (formula: string, cell: number, range: number) =>
  certificateNow(searchNow(parseModel(formula, { cell }), { range, method: 'growth' }));

/** Is the claim true, by the exhaustive search and exact brackets of the library? */
function isTrue(d: Document): boolean {
  const chain = new Chain(d.model.cell);
  const operator = (terms: Term[]) =>
    Operator.fromTerms(terms.map(([word, c]) => [wordFromText(word), rationalFromText(c)] as const));
  const h = hamiltonianOf(chain, operator(d.model.terms));
  const result = searchNow(h, { range: d.claim.range, method: 'exhaustive' });
  return (
    JSON.stringify(d.claim.dimensions) === JSON.stringify(result.dimensionByRange) &&
    d.claim.statement === statement({ cell: d.model.cell, ...d.claim }) &&
    d.charges.every((q) => chain.bracket(h.density, operator(q.terms)).isZero())
  );
}

describe.each(MODELS)('%s', (name, formula, cell, range) => {
  const original = proofOf(formula, cell, range);

  test('is accepted, and the evidence is a prime', () => {
    expect(checkNow(original)).toMatchObject({ status: 'accepted', kind: 'growth' });
    expect(Object.keys((JSON.parse(original) as Document).evidence)).toEqual(['prime']);
  });

  property(`no mutant is accepted and untrue (${name})`, 150, (random) => {
    // The changes of sweeps and pivots find lists to work on, and leave none behind.
    const mutant = mutantOf(original.replace('}}\n', ',"sweeps":[],"pivots":[]}}\n'), random).replace(
      ',"sweeps":[],"pivots":[]',
      '',
    );
    const verdict = checkNow(mutant);
    if (verdict.status === 'accepted') expect(isTrue(JSON.parse(mutant) as Document), mutant).toBe(true);
    else expect(verdict.reason).not.toBe('');
  });
});

test('a missing charge, a false one and another model are rejected', () => {
  const original = proofOf('XX + 2 YY + 3 ZZ', 1, 5);
  const change = (edit: (d: Document) => void): string => {
    const d = JSON.parse(original) as Document;
    edit(d);
    d.claim.dimensions = d.claim.dimensions.map((_, j) => d.charges.filter((q) => q.range <= j + 1).length);
    d.claim.statement = statement({ cell: d.model.cell, ...d.claim });
    return `${JSON.stringify(d)}\n`;
  };
  expect(change(() => {})).toBe(original);
  expect(checkNow(change((d) => void d.charges.pop()))).toMatchObject({
    status: 'rejected',
    reason: expect.stringMatching(/do not meet/),
  });
  expect(checkNow(change((d) => void d.charges.push({ range: 5, terms: [['XIIIX', '1']] })))).toMatchObject({
    status: 'rejected',
    reason: expect.stringMatching(/does not commute/),
  });
  expect(checkNow(change((d) => void d.charges.push(d.charges.at(-1)!)))).toMatchObject({
    status: 'rejected',
    reason: expect.stringMatching(/depends/),
  });
  // Not injective, with every charge that there is: the theorem does not apply, whether or not the claim is true.
  const ising = (d: Document) => {
    d.model.terms = [
      ['X', '2'],
      ['Z', '3'],
      ['ZZ', '1'],
    ];
    d.charges = [{ range: 2, terms: d.model.terms }];
  };
  expect(checkNow(change(ising))).toMatchObject({
    status: 'rejected',
    reason: expect.stringMatching(/injective/),
  });
  // Injective over the rationals and not modulo 3: the prime matters.
  const unlucky = proofOf('3 XX + 3 YY + ZZ', 1, 3).replace(/"prime":\d+/, '"prime":3');
  expect(checkNow(unlucky)).toMatchObject({
    status: 'rejected',
    reason: expect.stringMatching(/injective/),
  });
  expect(checkNow(original.replace(/"prime":\d+/, '"prime":561'))).toMatchObject({ status: 'rejected' });
});

test('a ladder beyond what lists of candidates reach', () => {
  const verdict = checkNow(proofOf(HUBBARD, 2, 6));
  expect(verdict).toMatchObject({ status: 'accepted', kind: 'growth' });
  expect(verdict.status === 'accepted' && verdict.statement).toMatch(/at most 6 cells .* exactly 7,/);
});

test('a chain beyond what lists of candidates reach, and what no certificate takes', async () => {
  const h = parseModel('2 XX + 3 YY + 5 ZZ + 7 X + 11 Y + 13 Z');
  const text = await certificateOf(searchNow(h, { range: 14, method: 'growth' }));
  expect(checkNow(text)).toMatchObject({ status: 'accepted', kind: 'growth' });
  expect(text.length).toBeLessThan(2_000);
  // Three spins a cell: the exhaustive kind is written instead.
  const wide = parseModel('XIIXII + YIIYII + IXIIXI + IYIIYI + IIXIIX + IIYIIY + ZZI + IZZ', { cell: 3 });
  expect(JSON.parse(certificateNow(searchNow(wide, { range: 2, method: 'growth' })))).toMatchObject({
    kind: 'exhaustive',
  });
});

describe('random injective chains', () => {
  property('whatever growth finds is certified and accepted', 40, (random) => {
    const letters = ['X', 'Y', 'Z'];
    const terms = letters.flatMap((a) => [
      ...letters.map(
        (b) => [`${a}${b}`, random.chance(a === b ? 0.9 : 0.3) ? random.integer(-3, 3) : 0] as const,
      ),
      [a, random.chance(0.4) ? random.integer(-3, 3) : 0] as const,
    ]);
    const density = Operator.of(Object.fromEntries(terms.filter(([, c]) => c !== 0)));
    if (density.isZero()) return;
    let text: string;
    try {
      text = certificateNow(
        searchNow(hamiltonianOf(new Chain(1), density), { range: random.integer(1, 6), method: 'growth' }),
      );
    } catch (error) {
      expect(error).toBeInstanceOf(LimitError);
      return;
    }
    expect(checkNow(text)).toMatchObject({ status: 'accepted', kind: 'growth' });
  });
});
