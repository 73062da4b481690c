/** Charges that are not translation invariant. The staggered exceptions were computed beforehand by two independent programs. */
import { describe, expect, it } from 'vitest';
import type { Operator } from '../../src/algebra/operator.ts';
import { parseModel } from '../../src/model/formula.ts';
import { searchNow } from '../../src/search/search.ts';
import { decide } from '../../src/theory/decide.ts';
import { decompose } from '../../src/theory/decompose.ts';
import { decideWaveNumbers } from '../../src/theory/wave-numbers.ts';
import { property } from '../support/random.ts';

const at = (formula: string) => decideWaveNumbers(decompose(parseModel(formula))!);

describe('wave numbers', () => {
  it('finds the staggered Z where two couplings are opposite and the field is on the third axis', () => {
    const found = at('-XX + YY + 2 ZZ + 3 Z');
    expect(found).toMatchObject({ kind: 'covered', noneOfRange3: true });
    expect(found.kind === 'covered' && found.at.map((a) => a.short)).toEqual([
      [0, 1],
      [1, 0],
    ]);
    expect(decide(parseModel('-XX + YY + 2 ZZ + 3 Z')).kind).toBe('none');
  });

  it('finds the staggered bond of XZ + ZX + h X', () => {
    const found = at('XZ + ZX + 2 X');
    expect(found.kind === 'covered' && found.at.map((a) => a.short)).toEqual([
      [0, 1],
      [0, 1],
    ]);
  });

  it('drops the caution about staggered quantities only when all are covered', () => {
    const all = decide(parseModel('2 XX + 3 YY + 5 ZZ + Z'), { waveNumbers: true });
    expect(all.cautions.join(' ')).not.toMatch(/staggered/);
    const open = decide(parseModel('ZZ + X + Z'), { waveNumbers: true });
    expect(open).toMatchObject({ waveNumbers: { kind: 'open' } });
    expect(open.cautions.join(' ')).toMatch(/staggered/);
  });

  // With cells of two spins a translation-invariant search sees wave numbers 0 and π of the plain chain together.
  property('wave numbers 0 and π together are what a search with doubled cells finds', 20, (random) => {
    const terms = ['XX', 'YY', 'ZZ', 'XZ', 'ZX', 'X', 'Z']
      .filter(() => random.chance(0.6))
      .map((word) => [word, random.nonZero(2)] as const);
    if (terms.length === 0) return;
    const text = (list: readonly (readonly [string, number])[]) =>
      list
        .map(([w, c]) => `${c} ${w}`)
        .join(' + ')
        .replaceAll('+ -', '- ');
    const found = at(text(terms));
    if (found.kind === 'open') return;
    const doubled = parseModel(text([...terms, ...terms.map(([w, c]) => [`I${w}`, c] as const)]), {
      cell: 2,
    });
    const short = searchNow(doubled, { range: 2 }).charges.map((q) => q.density);
    // Charges of at most two neighbouring spins, among the span: those with no string longer than two spins.
    const spins = (q: Operator) => Math.max(...[...q.terms()].map(([w]) => lengthOf(w)));
    const expected = found.at.reduce((sum, a) => sum + a.short[0] + a.short[1], 0);
    if (found.noneOfRange3) expect(short.filter((q) => spins(q) <= 2).length).toBe(expected);
    expect(short.length).toBeGreaterThanOrEqual(expected);
  });
});

function lengthOf(word: bigint): number {
  let rest = word;
  while ((rest & 3n) === 0n) rest >>= 2n;
  return Math.ceil(rest.toString(2).length / 2);
}
