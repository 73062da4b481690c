/** Ladders: published and computed term counts, agreement with the exhaustive search, exactness. */
import { describe, expect, it } from 'vitest';
import { textFromRational } from '../../src/algebra/rational.ts';
import { textFromWord } from '../../src/algebra/word.ts';
import { parseModel } from '../../src/model/formula.ts';
import { pack, pass, unpack } from '../../src/theory/boost.ts';
import { ladder, ladderBase, NoLadderError } from '../../src/theory/ladder.ts';
import { property } from '../support/random.ts';

/** Computed beforehand by two independent throw-away programs. */
const COUNTS = [3, 6, 18, 42, 105, 252, 612, 1476, 3567, 8610];

describe('ladder', () => {
  it.each(['XX + YY + ZZ', 'XX + YY + 1/3 ZZ', 'XX + YY + 1/3 ZZ + 2/5 Z', '2 XX + 3 YY + 5 ZZ'])(
    '%s: terms range by range',
    (formula) => {
      const sizes = [...ladder(parseModel(formula), { range: 9 })].map((rung) => rung.size);
      expect(sizes).toEqual(COUNTS.slice(0, 8));
    },
  );

  it('gives charges that the plain exact bracket annihilates, of rising range', () => {
    for (const formula of ['2 XX + 3 YY + 5 ZZ', '2 XX + 3 YY + 7 Z', 'ZZ + 3/2 X', 'XX + YY + 1/3 ZZ + Z']) {
      const h = parseModel(formula);
      const rungs = [...ladder(h, { range: 6 })];
      expect(rungs.at(-1)!.range).toBe(6);
      for (const rung of rungs) expect(h.chain.bracket(h.density, unpack(rung.packed)).isZero()).toBe(true);
    }
  });

  // Quantum integrals of motion for the Heisenberg spin chain, hep-th/9403149, Mod. Phys. Lett. A 9, 2197 (1994): Q_3 = Σ (s×s)·s.
  it('finds the published three-spin charge of the Heisenberg chain', () => {
    const [, third] = ladder(parseModel('XX + YY + ZZ'), { range: 3 });
    const terms = [...unpack(third!.packed).terms()].map(([w, c]) => [textFromWord(w), textFromRational(c)]);
    const sign = terms[0]![1]! === '1' ? 1 : -1;
    expect(Object.fromEntries(terms.map(([w, c]) => [w, sign * Number(c)]))).toEqual({
      XYZ: 1,
      YZX: 1,
      ZXY: 1,
      XZY: -1,
      YXZ: -1,
      ZYX: -1,
    });
  });

  it('refuses models without a boost operator, and says that it proves nothing', () => {
    expect(() => [...ladder(parseModel('2 XX + 3 YY + 5 ZZ + X'), { range: 4 })]).toThrow(NoLadderError);
    expect(() => [...ladder(parseModel('2 XX + 3 YY + 5 ZZ + X'), { range: 4 })]).toThrow(/proves nothing/);
    expect(ladderBase(parseModel('X'))).toBeUndefined();
  });

  property('a pass agrees with the plain exact bracket, large coefficients included', 30, (random) => {
    const h = random.hamiltonian({ cell: random.integer(1, 2), range: 2, terms: 4 });
    const q = random.hamiltonian({ cell: h.chain.cell, range: 3, terms: 5 });
    const scaled = q.density.times(q.density.denominator * (1n + (1n << BigInt(random.integer(0, 90)))));
    const boost = {
      chain: h.chain,
      h: h.density.times(h.density.denominator),
      shift: h.density.minus(h.density),
      factor: 1n,
    };
    expect(pass(boost, pack(h.chain, scaled), 'check').conserved).toBe(
      h.chain.bracket(h.density, q.density).isZero(),
    );
    expect(pass(boost, pack(h.chain, boost.h), 'check').conserved).toBe(true);
  });
});
